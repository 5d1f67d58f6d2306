package geom

import "math"

// A Puckering describes a ring by how far its atoms stand out of the mean
// plane. Lengths are in the unit of the coordinates, phases in radians.
//
// Source: D. Cremer, J. A. Pople, J. Am. Chem. Soc. 1975, 97, 1354, eqs. 4-14.
type Puckering struct {
	Amplitude []float64 // q_m, m = 2, 3, ..; for even rings the last one has a sign and no phase
	Phase     []float64 // phi_m
}

// Total is Q, the root of the sum of the squared amplitudes.
func (p Puckering) Total() float64 {
	var sum float64
	for _, q := range p.Amplitude {
		sum += q * q
	}
	return math.Sqrt(sum)
}

// PuckeringModes is the number of amplitudes and of phases of a ring of n atoms.
func PuckeringModes(n int) (amplitudes, phases int) { return n/2 - 1, (n-1)/2 - 1 }

// PuckeringOf takes the coordinates of a ring's atoms in ring order.
func PuckeringOf(ring []float64) Puckering {
	z := OutOfPlane(ring)
	n := len(z)
	amplitudes, phases := PuckeringModes(n)
	p := Puckering{make([]float64, amplitudes), make([]float64, phases)}
	for k := range phases {
		m := float64(k + 2)
		var c, s float64
		for j, zj := range z {
			sin, cos := math.Sincos(2 * math.Pi * m * float64(j) / float64(n))
			c += zj * cos
			s -= zj * sin
		}
		f := math.Sqrt(2 / float64(n))
		p.Amplitude[k], p.Phase[k] = f*math.Hypot(c, s), math.Atan2(s, c)
	}
	if n%2 == 0 {
		var sum float64
		for j, zj := range z {
			sum += alternate(j) * zj
		}
		p.Amplitude[amplitudes-1] = sum / math.Sqrt(float64(n))
	}
	return p
}

func alternate(j int) float64 { return float64(1 - 2*(j%2)) }

// OutOfPlane returns each atom's distance from the mean plane, positive on the
// side from which the ring runs clockwise.
func OutOfPlane(ring []float64) []float64 {
	n := len(ring) / 3
	var centre, a, b vec
	for i, v := range ring {
		centre[i%3] += v / float64(n)
	}
	for j := range n {
		sin, cos := math.Sincos(2 * math.Pi * float64(j) / float64(n))
		for d := range 3 {
			v := ring[3*j+d] - centre[d]
			a[d] += v * sin
			b[d] += v * cos
		}
	}
	normal := cross(a, b)
	length := norm(normal)
	z := make([]float64, n)
	for j := range n {
		for d := range 3 {
			z[j] += (ring[3*j+d] - centre[d]) * normal[d] / length
		}
	}
	return z
}

// Heights is the way back: the distances from the plane of n atoms.
func (p Puckering) Heights(n int) []float64 {
	amplitudes, phases := PuckeringModes(n)
	z := make([]float64, n)
	for j := range z {
		for k := range phases {
			angle := p.Phase[k] + 2*math.Pi*float64(k+2)*float64(j)/float64(n)
			z[j] += math.Sqrt(2/float64(n)) * p.Amplitude[k] * math.Cos(angle)
		}
		if n%2 == 0 {
			z[j] += alternate(j) * p.Amplitude[amplitudes-1] / math.Sqrt(float64(n))
		}
	}
	return z
}
