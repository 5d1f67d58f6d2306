package forcefield

import "math"

// A pair is the van der Waals term of two atoms four or more apart along the
// bonds: d [(x/r)^12 - 2 (x/r)^6].
// Source: Rappe et al., J. Am. Chem. Soc. 1992, 114, 10024, eq. 20, with the
// geometric combination rules of eqs. 21b and 22.
type pair struct {
	i, j int32
	x2   float64 // square of the distance of the minimum, bohr^2
	d    float64 // depth of the well, hartree
}

type pairs []pair

func (pairs) name() string { return "van der Waals" }

func (ps pairs) addTo(grad, x []float64) float64 {
	var energy float64
	for n := range ps {
		p := &ps[n]
		a, b := x[3*p.i:3*p.i+3:3*p.i+3], x[3*p.j:3*p.j+3:3*p.j+3]
		d0, d1, d2 := a[0]-b[0], a[1]-b[1], a[2]-b[2]
		inv := 1 / (d0*d0 + d1*d1 + d2*d2)
		q := p.x2 * inv
		q = q * q * q
		e := p.d * q
		energy += e*q - 2*e
		if grad == nil {
			continue
		}
		f := -12 * e * (q - 1) * inv
		ga, gb := grad[3*p.i:3*p.i+3:3*p.i+3], grad[3*p.j:3*p.j+3:3*p.j+3]
		ga[0] += f * d0
		ga[1] += f * d1
		ga[2] += f * d2
		gb[0] -= f * d0
		gb[1] -= f * d1
		gb[2] -= f * d2
	}
	return energy
}

// softPairs are pairs whose repulsion goes on along its tangent inside 0.6 of
// the distance of the minimum, so that overlapping atoms part without violence.
// Own choice, for starting structures.
type softPairs []pair

func (softPairs) name() string { return "van der Waals" }

// softCore is where the tangent touches, as a share of the distance of the minimum.
const softCore = 0.6

func (ps softPairs) addTo(grad, x []float64) float64 {
	q6 := math.Pow(softCore, -6)
	touch, slope := q6*q6-2*q6, -12*(q6*q6-q6)/softCore // in units of d, d/x
	var energy float64
	for n := range ps {
		p := ps[n : n+1]
		d := arrow(x, p[0].i, p[0].j)
		r2 := dot(d, d)
		if r2 >= softCore*softCore*p[0].x2 {
			energy += pairs(p).addTo(grad, x)
			continue
		}
		x0, r := math.Sqrt(p[0].x2), math.Sqrt(r2)
		energy += p[0].d * (touch + slope*(r/x0-softCore))
		if grad == nil || r == 0 {
			continue
		}
		f := p[0].d * slope / (x0 * r)
		push(grad, p[0].i, f, d)
		push(grad, p[0].j, -f, d)
	}
	return energy
}
