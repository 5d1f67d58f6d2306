package molecule_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"torsieve/molecule"
)

// A regular tetrahedron with neighbour 1 up and 2, 3, 4 anticlockwise below, as
// one looks from 1: SMILES @ (OpenSMILES 1.0, section 3.8.2).
var tetrahedron = [4][3]float64{{0, 0, 1}, {1, 0, -0.3}, {-0.5, 0.866, -0.3}, {-0.5, -0.866, -0.3}}

// place puts the neighbours of a centre at the corners of the tetrahedron, in
// the order given, and all else at the origin.
func place(m *molecule.Molecule, order [4]int) []float64 {
	x := make([]float64, 3*m.NumAtoms())
	for n, i := range order {
		for k := range 3 {
			x[3*i+k] = 2 * tetrahedron[n][k]
		}
	}
	return x
}

func TestParityFromCoordinates(t *testing.T) {
	anticlockwise, clockwise := parse(t, "F[C@](Cl)(Br)I"), parse(t, "F[C@@](Cl)(Br)I")
	for _, tc := range []struct {
		m     *molecule.Molecule
		order [4]int
		fits  bool
	}{
		{anticlockwise, [4]int{0, 2, 3, 4}, true},
		{anticlockwise, [4]int{0, 3, 4, 2}, true}, // an even permutation
		{anticlockwise, [4]int{2, 0, 4, 3}, true},
		{anticlockwise, [4]int{0, 3, 2, 4}, false},
		{clockwise, [4]int{0, 2, 3, 4}, false},
		{clockwise, [4]int{0, 3, 2, 4}, true},
	} {
		err := tc.m.StereoMatches(place(tc.m, tc.order))
		if (err == nil) != tc.fits {
			t.Errorf("%s, order %v: %v", tc.m.SMILES(), tc.order, err)
		}
		if err != nil && err.Error() != "atom 2 (carbon) has the opposite of the stated configuration" {
			t.Errorf("message: %v", err)
		}
	}
	flat := []float64{2, 0, 0, 0, 0, 0.1, 0, 2, 0, -2, 0, 0, 0, -2, 0} // a square
	if err := anticlockwise.StereoMatches(flat); err == nil || !strings.Contains(err.Error(), "is flat") {
		t.Errorf("a flat centre: %v", err)
	}
}

// A sulfoxide: the lone pair stands opposite to the three neighbours.
func TestParityWithLonePair(t *testing.T) {
	m := parse(t, "C[S@](=O)N") // C, lone pair, O, N anticlockwise from C
	c := m.Centres()[0]
	x := make([]float64, 3*m.NumAtoms())
	// The lone pair takes corner 1: seen from it, O, C, N are an even
	// permutation of the order C, lone pair, O, N with the pair in front.
	order := []int{2, 0, 3}
	for n, i := range order {
		copy(x[3*i:], tetrahedron[n+1][:])
	}
	// C, pair, O, N anticlockwise = pair, O, C, N anticlockwise (two exchanges).
	if got := m.ParityOf(c, x); got != c.Parity {
		t.Errorf("parity %d, want %d", got, c.Parity)
	}
	for i := range m.NumAtoms() {
		x[3*i] = -x[3*i] // the mirror image
	}
	if got := m.ParityOf(c, x); got != -c.Parity {
		t.Errorf("mirror image: parity %d, want %d", got, -c.Parity)
	}
}

// The parity does not change under rotation and translation, and changes under
// reflection.
func TestParityLaws(t *testing.T) {
	m := parse(t, "N[C@@H](C)C(=O)O")
	c := m.Centres()[0]
	random := rand.New(rand.NewPCG(3, 4))
	x := place(m, c.Neighbours)
	for i := range x {
		x[i] += 0.3 * random.NormFloat64()
	}
	want := m.ParityOf(c, x)
	if want != 1 {
		t.Fatalf("parity %d in anticlockwise order", want)
	}
	s, cs := math.Sincos(0.7)
	moved, mirrored := make([]float64, len(x)), make([]float64, len(x))
	for i := range m.NumAtoms() {
		a, b, z := x[3*i], x[3*i+1], x[3*i+2]
		moved[3*i], moved[3*i+1], moved[3*i+2] = cs*a-s*b+3, s*a+cs*b-1, z+7
		mirrored[3*i], mirrored[3*i+1], mirrored[3*i+2] = a, -b, z
	}
	if got := m.ParityOf(c, moved); got != want {
		t.Errorf("moved: %d, want %d", got, want)
	}
	if got := m.ParityOf(c, mirrored); got != -want {
		t.Errorf("mirrored: %d, want %d", got, -want)
	}
}

func TestCisFromCoordinates(t *testing.T) {
	// F, C, C, F of difluoroethene in a plane; the hydrogens do not matter.
	cis := map[bool][]float64{
		true:  {-0.7, 1.2, 0, 0, 0, 0, 1.3, 0, 0, 2.0, 1.2, 0},
		false: {-0.7, 1.2, 0, 0, 0, 0, 1.3, 0, 0, 2.0, -1.2, 0},
	}
	for s, want := range map[string]bool{"F/C=C/F": false, "F/C=C\\F": true, "F\\C=C/F": true} {
		m := parse(t, s)
		b := m.StereoBonds()[0]
		if b.Cis != want {
			t.Errorf("%s: cis %v", s, b.Cis)
		}
		hydrogens := []float64{-0.7, -1.2, 0, 2.0, 0.1, 1}
		x := slices.Concat(cis[want], hydrogens)
		if m.CisOf(b, x) != want || m.StereoMatches(x) != nil {
			t.Errorf("%s: cis %v in space, %v", s, m.CisOf(b, x), m.StereoMatches(x))
		}
		x = slices.Concat(cis[!want], hydrogens)
		if err := m.StereoMatches(x); err == nil || err.Error() != "the double bond between atoms 2 and 3 has the opposite of the stated configuration" {
			t.Errorf("%s in the other configuration: %v", s, err)
		}
	}
}
