package solvent

import "math"

// pairs holds the distances of all pairs of atoms; pair (a, b) with b < a has
// the place a(a-1)/2 + b.
type pairs struct {
	n int
	x []float64 // bohr, 3n
	r []float64 // bohr
}

func newPairs(n int) *pairs {
	return &pairs{n: n, x: make([]float64, 3*n), r: make([]float64, n*(n-1)/2)}
}

// closest is the distance in bohr below which two atoms lie on one another.
const closest = 1e-3

// update takes in coordinates (3n, bohr): finite, and no two atoms in one
// place.
func (p *pairs) update(x []float64) error {
	if len(x) != 3*p.n {
		panic("solvent: want three coordinates for each atom")
	}
	for i, c := range x {
		if math.IsNaN(c) || math.IsInf(c, 0) {
			return &GeometryError{Atom: i / 3, Msg: "coordinates are not finite"}
		}
	}
	copy(p.x, x)
	k := 0
	for a := range p.n {
		for b := range a {
			v := p.vector(a, b)
			p.r[k] = math.Sqrt(v[0]*v[0] + v[1]*v[1] + v[2]*v[2])
			if p.r[k] < closest {
				return &GeometryError{Atom: a, Msg: "lies on another atom"}
			}
			k++
		}
	}
	return nil
}

// vector goes from atom b to atom a.
func (p *pairs) vector(a, b int) [3]float64 {
	return [3]float64{p.x[3*a] - p.x[3*b], p.x[3*a+1] - p.x[3*b+1], p.x[3*a+2] - p.x[3*b+2]}
}

// addGradient adds to grad the gradient of an energy of which slope holds the
// derivatives with respect to each distance.
func (p *pairs) addGradient(slope, grad []float64) {
	k := 0
	for a := range p.n {
		for b := range a {
			f, v := slope[k]/p.r[k], p.vector(a, b)
			for c := range v {
				grad[3*a+c] += f * v[c]
				grad[3*b+c] -= f * v[c]
			}
			k++
		}
	}
}
