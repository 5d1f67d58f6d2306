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

const (
	bond  = 1.53 * units.Angstrom
	angle = 112 * math.Pi / 180
)

// chain places the atoms in order, each with the usual distance and angle to the
// ones before it and the given torsions in degrees. The molecule's other atoms
// are left at the origin, where no degeneracy looks at hydrogens on carbon.
func chain(m *molecule.Molecule, atoms []int, torsions ...float64) []float64 {
	x := make([]float64, 3*m.NumAtoms())
	x[3*atoms[1]] = bond
	x[3*atoms[2]], x[3*atoms[2]+1] = bond-bond*math.Cos(angle), bond*math.Sin(angle)
	for k, torsion := range torsions {
		place(x, atoms[k], atoms[k+1], atoms[k+2], atoms[k+3], torsion)
	}
	return x
}

// place puts atom l where the dihedral i-j-k-l is the given one, in degrees.
func place(x []float64, i, j, k, l int, degrees float64) {
	at := func(n int) [3]float64 { return [3]float64(x[3*n : 3*n+3]) }
	sub := func(a, b [3]float64) [3]float64 { return [3]float64{a[0] - b[0], a[1] - b[1], a[2] - b[2]} }
	unit := func(a [3]float64) [3]float64 {
		n := math.Sqrt(a[0]*a[0] + a[1]*a[1] + a[2]*a[2])
		return [3]float64{a[0] / n, a[1] / n, a[2] / n}
	}
	cross := func(a, b [3]float64) [3]float64 {
		return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
	}
	axis := unit(sub(at(k), at(j)))
	normal := unit(cross(sub(at(j), at(i)), axis))
	side := cross(normal, axis)
	sin, cos := math.Sincos(degrees * math.Pi / 180)
	for n := range 3 {
		x[3*l+n] = x[3*k+n] + bond*(-math.Cos(angle)*axis[n]+math.Sin(angle)*(cos*side[n]+sin*normal[n]))
	}
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
			xs = append(xs, chain(m, identity(len(torsions)+3), torsions...))
		}
		copies, complete := Copies(m, xs)
		if !slices.Equal(copies, tc.want) || !complete {
			t.Errorf("%s: copies %v (complete: %t), want %v", tc.smiles, copies, complete, tc.want)
		}
	}
}

// 2,3-Difluorobutane. Of the meso form, the shape with a centre of inversion is
// its own mirror image, any other counts twice. Shapes of the chiral form stand
// for themselves; both that are built here have a twofold axis.
func TestCopiesOfStereoisomers(t *testing.T) {
	for _, s := range []string{"C[C@H](F)[C@H](F)C", "C[C@H](F)[C@@H](F)C"} {
		m := parse(t, s)
		// Chain C0-C1-C3-C5; fluorine 2 sits on C1, fluorine 4 on C3.
		build := func(torsion, f2, f4 float64) []float64 {
			x := chain(m, []int{0, 1, 3, 5}, torsion)
			place(x, 5, 3, 1, 2, f2)
			place(x, 0, 1, 3, 4, f4)
			return x
		}
		var xs [][]float64
		var want []int
		if m.Chiral() {
			xs, want = [][]float64{build(180, 60, 60), build(60, 180, 180)}, []int{1, 1}
		} else {
			xs, want = [][]float64{build(180, 60, -60), build(60, 180, -60)}, []int{1, 2}
		}
		if copies, _ := Copies(m, xs); !slices.Equal(copies, want) {
			t.Errorf("%s: copies %v, want %v", s, copies, want)
		}
	}
}

func TestPlaceKeepsItsTorsion(t *testing.T) {
	m := parse(t, "CCCC")
	for _, want := range []float64{180, 65, -95} {
		x := chain(m, identity(4), want)
		got := geom.Dihedral(x, 0, 1, 2, 3) * 180 / math.Pi
		if d := math.Remainder(got-want, 360); math.Abs(d) > 1e-9 {
			t.Errorf("dihedral %g, want %g", got, want)
		}
	}
}
