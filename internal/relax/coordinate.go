package relax

import (
	"math"

	"torsieve/internal/geom"
)

// A kind of internal coordinate.
type kind int

const (
	stretch  kind = iota // distance i-j, bohr
	bend                 // angle i-j-k, rad
	sideways             // bend of a straight i-j-k towards an axis, about rad
	torsion              // dihedral i-j-k-l, rad
	pyramid              // triple product of the unit arrows from i to j, k and l
	place                // way of i along an axis, bohr
)

// A coordinate is one internal coordinate. Its kind may need fewer than four
// atoms; the others repeat the first one.
type coordinate struct {
	kind  kind
	atoms [4]int
	axis  [3]float64 // of sideways and place: a unit arrow that stays
}

// depends returns the atoms that the coordinate depends on.
func (c *coordinate) depends() []int {
	switch c.kind {
	case place:
		return c.atoms[:1]
	case stretch:
		return c.atoms[:2]
	case bend, sideways:
		return c.atoms[:3]
	}
	return c.atoms[:]
}

// value returns the coordinate at x.
func (c *coordinate) value(x []float64) float64 {
	a := &c.atoms
	switch c.kind {
	case stretch:
		return geom.Distance(x, a[0], a[1])
	case bend:
		return geom.Angle(x, a[0], a[1], a[2])
	case torsion:
		return geom.Dihedral(x, a[0], a[1], a[2], a[3])
	case sideways:
		u, _ := arrow(x, a[1], a[0])
		v, _ := arrow(x, a[1], a[2])
		return inner(c.axis, u) + inner(c.axis, v)
	case pyramid:
		u, _ := arrow(x, a[0], a[1])
		v, _ := arrow(x, a[0], a[2])
		w, _ := arrow(x, a[0], a[3])
		return inner(u, outer(v, w))
	}
	return inner(c.axis, [3]float64(x[3*a[0]:]))
}

// change returns the way from a to b: the short way round for a torsion.
func (c *coordinate) change(a, b float64) float64 {
	if c.kind == torsion {
		return math.Remainder(b-a, 2*math.Pi)
	}
	return b - a
}

// derivative writes the derivative at x by the coordinates of the four atoms
// into row.
func (c *coordinate) derivative(row *[12]float64, x []float64) {
	*row = [12]float64{}
	var y [12]float64 // the four atoms alone
	for n, a := range c.atoms {
		copy(y[3*n:3*n+3], x[3*a:3*a+3])
	}
	switch c.kind {
	case stretch:
		geom.AddDistance(row[:], y[:], 0, 1, 1)
	case bend:
		geom.AddAngle(row[:], y[:], 0, 1, 2, 1)
	case torsion:
		geom.AddDihedral(row[:], y[:], 0, 1, 2, 3, 1)
	case sideways:
		addArrow(row, y[:], 1, 0, c.axis)
		addArrow(row, y[:], 1, 2, c.axis)
	case pyramid:
		u, _ := arrow(y[:], 0, 1)
		v, _ := arrow(y[:], 0, 2)
		w, _ := arrow(y[:], 0, 3)
		addArrow(row, y[:], 0, 1, outer(v, w))
		addArrow(row, y[:], 0, 2, outer(w, u))
		addArrow(row, y[:], 0, 3, outer(u, v))
	case place:
		copy(row[:3], c.axis[:])
	}
}

// addArrow adds the derivative of e.u, where u is the unit arrow from o to p.
func addArrow(row *[12]float64, x []float64, o, p int, e [3]float64) {
	u, r := arrow(x, o, p)
	along := inner(e, u)
	for d := range 3 {
		f := (e[d] - along*u[d]) / r
		row[3*p+d] += f
		row[3*o+d] -= f
	}
}

// arrow returns the unit arrow from o to p and their distance.
func arrow(x []float64, o, p int) (u [3]float64, r float64) {
	r = geom.Distance(x, o, p)
	for d := range 3 {
		u[d] = (x[3*p+d] - x[3*o+d]) / r
	}
	return u, r
}

func inner(v, w [3]float64) float64 { return v[0]*w[0] + v[1]*w[1] + v[2]*w[2] }

func outer(v, w [3]float64) [3]float64 {
	return [3]float64{v[1]*w[2] - v[2]*w[1], v[2]*w[0] - v[0]*w[2], v[0]*w[1] - v[1]*w[0]}
}
