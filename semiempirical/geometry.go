package semiempirical

import (
	"math"

	"torsieve/internal/units"
)

// closest is the distance in bohr below which two atoms count as lying on one
// another; the shortest bond there is, in H2, is half as long again.
const closest = 0.5 * units.Angstrom

// A geometry holds the distances between all pairs of atoms a > b; pair (a, b)
// has the place a(a-1)/2 + b.
type geometry struct {
	x []float64    // 3N, bohr
	v [][3]float64 // from b to a
	r []float64
}

func newGeometry(atoms int) *geometry {
	n := atoms * (atoms - 1) / 2
	return &geometry{x: make([]float64, 3*atoms), v: make([][3]float64, n), r: make([]float64, n)}
}

// set takes in new coordinates; they must be finite (*NotFiniteError), and no
// two atoms may lie on one another (*CloseAtomsError).
func (g *geometry) set(x []float64) error {
	if len(x) != len(g.x) {
		panic("semiempirical: want three coordinates for each atom")
	}
	for i, c := range x {
		if math.IsNaN(c) || math.IsInf(c, 0) {
			return &NotFiniteError{Atom: i / 3, Axis: i % 3}
		}
	}
	copy(g.x, x)
	k := 0
	for a := range len(x) / 3 {
		for b := range a {
			v := [3]float64{x[3*a] - x[3*b], x[3*a+1] - x[3*b+1], x[3*a+2] - x[3*b+2]}
			r := math.Sqrt(v[0]*v[0] + v[1]*v[1] + v[2]*v[2])
			if r < closest {
				return &CloseAtomsError{I: b, J: a, Distance: r}
			}
			g.v[k], g.r[k] = v, r
			k++
		}
	}
	return nil
}

// addPair adds f times the bond's vector to atom a's gradient and takes it
// from b's.
func addPair(grad []float64, a, b int, f float64, v [3]float64) {
	for k := range v {
		grad[3*a+k] += f * v[k]
		grad[3*b+k] -= f * v[k]
	}
}
