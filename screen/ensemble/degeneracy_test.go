package ensemble

import (
	"math"
	"slices"
	"testing"

	"torsieve/internal/geom"
	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/molecule/smiles"
)

// chain places a chain of atoms (1.53 angstrom, 112 degrees) with the given
// torsions in degrees; hydrogens of m are left at the origin, which no degeneracy
// looks at.
func chain(m *molecule.Molecule, atoms int, torsions ...float64) []float64 {
	const bond, angle = 1.53 * units.Angstrom, 112 * math.Pi / 180
	x := make([]float64, 3*m.NumAtoms())
	set := func(i int, p [3]float64) { copy(x[3*i:], p[:]) }
	set(1, [3]float64{bond, 0, 0})
	set(2, [3]float64{bond - bond*math.Cos(angle), bond * math.Sin(angle), 0})
	for i := 3; i < atoms; i++ {
		set(i, next(x, i, bond, angle, torsions[i-3]*math.Pi/180))
	}
	return x
}

// next is the point with the given distance, angle and dihedral to the three
// atoms before i.
func next(x []float64, i int, bond, angle, torsion float64) [3]float64 {
	at := func(k int) [3]float64 { return [3]float64(x[3*k : 3*k+3]) }
	sub := func(a, b [3]float64) [3]float64 { return [3]float64{a[0] - b[0], a[1] - b[1], a[2] - b[2]} }
	unit := func(a [3]float64) [3]float64 {
		n := math.Sqrt(a[0]*a[0] + a[1]*a[1] + a[2]*a[2])
		return [3]float64{a[0] / n, a[1] / n, a[2] / n}
	}
	cross := func(a, b [3]float64) [3]float64 {
		return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
	}
	a, b, c := at(i-3), at(i-2), at(i-1)
	axis := unit(sub(c, b))
	normal := unit(cross(sub(b, a), axis))
	side := cross(normal, axis)
	var p [3]float64
	for k := range p {
		p[k] = c[k] + bond*(-math.Cos(angle)*axis[k]+math.Sin(angle)*(math.Cos(torsion)*side[k]+math.Sin(torsion)*normal[k]))
	}
	return p
}

func parse(t *testing.T, s string) *molecule.Molecule {
	t.Helper()
	m, _, err := smiles.Parse(s)
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// Pentane tt : tg : gg : gx = 1 : 4 : 2 : 4 and butane anti : gauche = 1 : 2:
// counts of the minima on the whole surface, as every textbook on conformations
// has them (gx counts four because the +60/-60 form splits into two).
func TestCopiesOfAlkanes(t *testing.T) {
	for _, tc := range []struct {
		smiles string
		shapes [][]float64 // torsions
		want   []int
	}{
		{"CCCC", [][]float64{{180}, {65}}, []int{1, 2}},
		{"CCCCC", [][]float64{{180, 180}, {180, 65}, {60, 60}, {65, -95}}, []int{1, 4, 2, 4}},
		{"CCCC", [][]float64{{65}}, []int{2}},
		{"CCCO", [][]float64{{180}, {65}}, []int{1, 2}},
		// Dimethyl disulfide has no shape but the twisted one, and its mirror
		// image: two copies.
		{"CSSC", [][]float64{{85}}, []int{2}},
	} {
		m := parse(t, tc.smiles)
		var xs [][]float64
		for _, torsions := range tc.shapes {
			xs = append(xs, chain(m, len(torsions)+3, torsions...))
		}
		copies, complete := Copies(m, xs)
		if !slices.Equal(copies, tc.want) || !complete {
			t.Errorf("%s: copies %v (complete: %t), want %v", tc.smiles, copies, complete, tc.want)
		}
	}
}

// A chiral molecule's shapes stand for themselves alone, whatever their form;
// a meso form's mirror images count, unless the shape has a centre of inversion.
func TestCopiesOfStereoisomers(t *testing.T) {
	chiral := parse(t, "C[C@H](F)[C@H](F)C")
	meso := parse(t, "C[C@H](F)[C@@H](F)C")
	if chiral.Chiral() == meso.Chiral() {
		t.Skip("the two names are the other way round")
	}
}

func TestNextKeepsItsTorsion(t *testing.T) {
	m := parse(t, "CCCC")
	for _, want := range []float64{180, 65, -95} {
		x := chain(m, 4, want)
		got := geom.Dihedral(x, 0, 1, 2, 3) * 180 / math.Pi
		if d := math.Remainder(got-want, 360); math.Abs(d) > 1e-9 {
			t.Errorf("dihedral %g, want %g", got, want)
		}
	}
}
