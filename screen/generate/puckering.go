package generate

import "math"

// A puckering describes a ring by how far its atoms stand out of the mean
// plane. Lengths are in the unit of the coordinates, phases in radians.
//
// Source: D. Cremer, J. A. Pople, J. Am. Chem. Soc. 1975, 97, 1354, eqs. 4-14.
type puckering struct {
	amplitude []float64 // q_m, m = 2, 3, ..; for even rings the last one has a sign and no phase
	phase     []float64 // phi_m
}

// total is Q, the root of the sum of the squared amplitudes.
func (p puckering) total() float64 {
	var sum float64
	for _, q := range p.amplitude {
		sum += q * q
	}
	return math.Sqrt(sum)
}

// modes is the number of amplitudes and of phases of a ring of n atoms.
func modes(n int) (amplitudes, phases int) { return n/2 - 1, (n-1)/2 - 1 }

// puckeringOf takes the coordinates of a ring's atoms in ring order.
func puckeringOf(ring []float64) puckering {
	z := outOfPlane(ring)
	n := len(z)
	amplitudes, phases := modes(n)
	p := puckering{make([]float64, amplitudes), make([]float64, phases)}
	for k := range phases {
		m := float64(k + 2)
		var c, s float64
		for j, zj := range z {
			sin, cos := math.Sincos(2 * math.Pi * m * float64(j) / float64(n))
			c += zj * cos
			s -= zj * sin
		}
		f := math.Sqrt(2 / float64(n))
		p.amplitude[k], p.phase[k] = f*math.Hypot(c, s), math.Atan2(s, c)
	}
	if n%2 == 0 {
		var sum float64
		for j, zj := range z {
			sum += alternate(j) * zj
		}
		p.amplitude[amplitudes-1] = sum / math.Sqrt(float64(n))
	}
	return p
}

func alternate(j int) float64 { return float64(1 - 2*(j%2)) }

// outOfPlane returns each atom's distance from the mean plane, positive on the
// side from which the ring runs clockwise.
func outOfPlane(ring []float64) []float64 {
	n := len(ring) / 3
	var centre, a, b [3]float64
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
	normal := unit(cross(a, b))
	z := make([]float64, n)
	for j := range n {
		for d := range 3 {
			z[j] += (ring[3*j+d] - centre[d]) * normal[d]
		}
	}
	return z
}

// heights is the way back: the distances from the plane of n atoms.
func (p puckering) heights(n int) []float64 {
	amplitudes, phases := modes(n)
	z := make([]float64, n)
	for j := range z {
		for k := range phases {
			angle := p.phase[k] + 2*math.Pi*float64(k+2)*float64(j)/float64(n)
			z[j] += math.Sqrt(2/float64(n)) * p.amplitude[k] * math.Cos(angle)
		}
		if n%2 == 0 {
			z[j] += alternate(j) * p.amplitude[amplitudes-1] / math.Sqrt(float64(n))
		}
	}
	return z
}
