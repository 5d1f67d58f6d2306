package molecule

import (
	"fmt"
	"math"
)

// flatCentre is the normalised volume below which a centre counts as flat: the
// triple product of the unit vectors to its neighbours (3.08 for a regular
// tetrahedron, 0 where centre and neighbours lie in a plane).
const flatCentre = 0.4

// ParityOf returns the parity that c has in the coordinates x, with respect to
// the order of c.Neighbours, or 0 if the centre is flat there.
func (m *Molecule) ParityOf(c Centre, x []float64) Parity {
	m.checkCoordinates(x)
	var p [4][3]float64
	var sum [3]float64
	lone := -1
	for n, j := range c.Neighbours {
		if j == LonePair {
			lone = n
			continue
		}
		p[n] = direction(x, c.Atom, j)
		for k := range sum {
			sum[k] += p[n][k]
		}
	}
	if lone >= 0 { // opposite to the three neighbours
		length := math.Sqrt(dot(sum, sum))
		if length < 1e-6 {
			return 0
		}
		for k := range sum {
			p[lone][k] = -sum[k] / length
		}
	}
	volume := dot(minus(p[0], p[3]), cross(minus(p[1], p[3]), minus(p[2], p[3])))
	switch {
	case volume > flatCentre:
		return 1
	case volume < -flatCentre:
		return -1
	}
	return 0 // NaN too
}

// CisOf says whether the reference substituents of b are on the same side in
// the coordinates x: whether their dihedral angle is below 90 degrees.
func (m *Molecule) CisOf(b StereoBond, x []float64) bool {
	m.checkCoordinates(x)
	return m.cosDihedral(b, x) > 0
}

func (m *Molecule) cosDihedral(b StereoBond, x []float64) float64 {
	axis := direction(x, b.J, b.K)
	u := cross(axis, direction(x, b.J, b.A))
	v := cross(axis, direction(x, b.K, b.B))
	return dot(u, v) / math.Sqrt(dot(u, u)*dot(v, v))
}

// StereoMatches compares the coordinates x with the stated stereo elements. The
// error names the first one that differs.
func (m *Molecule) StereoMatches(x []float64) error {
	for _, c := range m.centres {
		if c.Parity == 0 {
			continue
		}
		switch found := m.ParityOf(c, x); found {
		case c.Parity:
		case 0:
			return fmt.Errorf("%s is flat, no configuration", m.centreText(c))
		default:
			return fmt.Errorf("%s has the opposite of the stated configuration", m.centreText(c))
		}
	}
	for _, b := range m.stereoBonds {
		if !b.Known {
			continue
		}
		found := m.cosDihedral(b, x)
		switch {
		case b.Cis && found > 0.5 || !b.Cis && found < -0.5:
		case math.Abs(found) > 0.5:
			return fmt.Errorf("%s has the opposite of the stated configuration", m.bondText(b))
		default:
			return fmt.Errorf("%s is twisted by more than 60 degrees", m.bondText(b))
		}
	}
	return nil
}

func (m *Molecule) checkCoordinates(x []float64) {
	if len(x) != 3*len(m.atoms) {
		panic("molecule: coordinates and atoms differ in number")
	}
}

// direction returns the unit vector from atom i to atom j.
func direction(x []float64, i, j int) [3]float64 {
	d := [3]float64{x[3*j] - x[3*i], x[3*j+1] - x[3*i+1], x[3*j+2] - x[3*i+2]}
	length := math.Sqrt(dot(d, d))
	return [3]float64{d[0] / length, d[1] / length, d[2] / length}
}

func minus(a, b [3]float64) [3]float64 { return [3]float64{a[0] - b[0], a[1] - b[1], a[2] - b[2]} }
func dot(a, b [3]float64) float64      { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }
func cross(a, b [3]float64) [3]float64 {
	return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}
