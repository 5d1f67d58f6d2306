package sdf

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"torsieve/molecule"
)

// drawn makes a table of a centre (atom 0) and its neighbours at the given
// positions, with one mark on each bond.
func drawn(x [][3]float64, marks []mark) *table {
	t := &table{atoms: []tableAtom{{number: 6}}}
	for n, p := range x {
		t.atoms = append(t.atoms, tableAtom{number: 6, x: p})
		t.bonds = append(t.bonds, tableBond{a: 0, b: n + 1, kind: 1, mark: marks[n]})
	}
	return t
}

// A tetrahedron, turned at random, drawn by leaving out z and marking the bond
// that leans most towards or away from the viewer, has the configuration that
// it has in space, or one that can be read in two ways, which is said.
func TestWedgesMeanWhatTheyShow(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for neighbours := 3; neighbours <= 4; neighbours++ {
		tried, read := 0, 0
		for range 2000 {
			x := turned(rng)
			want := molecule.Parity(1)
			if volume(x) < 0 {
				want = -1
			}
			list := []int{1, 2, 3, 4}[:neighbours]
			steepest := 0
			for n := range neighbours {
				if math.Abs(x[n][2]) > math.Abs(x[steepest][2]) {
					steepest = n
				}
			}
			marks := make([]mark, 4)
			if marks[steepest] = wedge; x[steepest][2] < 0 {
				marks[steepest] = hash
			}
			// A neighbour that is not drawn is understood to lean the other way.
			if neighbours == 3 && x[3][2]*x[steepest][2] > 0 {
				continue
			}
			tried++
			got, problem := drawn(x[:], marks).wedgeParity(0, list)
			switch {
			case got == want:
				read++
			case got != 0 || problem == "":
				t.Fatalf("%d neighbours at %.2f with marks %v: parity %d, want %d", neighbours, x[:neighbours], marks, got, want)
			}
		}
		if read < tried*8/10 || tried < 1000 {
			t.Errorf("%d neighbours: only %d of %d drawings are read", neighbours, read, tried)
		}
	}
}

// turned returns the corners of a regular tetrahedron after a random rotation
// or reflection.
func turned(rng *rand.Rand) (x [4][3]float64) {
	x = [4][3]float64{{1, 1, 1}, {1, -1, -1}, {-1, 1, -1}, {-1, -1, 1}}
	for range 6 {
		i, j := rng.IntN(3), rng.IntN(3)
		if i == j {
			continue
		}
		s, c := math.Sincos(rng.Float64() * 2 * math.Pi)
		for n := range x {
			x[n][i], x[n][j] = c*x[n][i]-s*x[n][j], s*x[n][i]+c*x[n][j]
		}
	}
	if rng.IntN(2) == 0 {
		x[0], x[1] = x[1], x[0]
	}
	return x
}

// volume is the sign convention of molecule.Parity.
func volume(x [4][3]float64) float64 {
	var d [3][3]float64
	for n := range d {
		for k := range 3 {
			d[n][k] = x[n][k] - x[3][k]
		}
	}
	return d[0][0]*(d[1][1]*d[2][2]-d[1][2]*d[2][1]) +
		d[0][1]*(d[1][2]*d[2][0]-d[1][0]*d[2][2]) +
		d[0][2]*(d[1][0]*d[2][1]-d[1][1]*d[2][0])
}

// Drawings that IUPAC calls unacceptable (Brecher 2006) state nothing, and the
// reader is told.
func TestAmbiguousDrawings(t *testing.T) {
	y := [][3]float64{{-1, 0.5, 0}, {0, 1, 0}, {1, 0.5, 0}}      // all on one side
	star := [][3]float64{{-1, -0.5, 0}, {0, 1, 0}, {1, -0.5, 0}} // well spread
	cross := [][3]float64{{1, 0, 0}, {0, 1, 0}, {-1, 0, 0}, {0, -1, 0}}
	for _, tc := range []struct {
		name    string
		x       [][3]float64
		marks   []mark
		parity  molecule.Parity
		problem string
	}{
		{"between two plain bonds", y, []mark{plain, wedge, plain}, 0, "between"},
		{"beside two plain bonds", y, []mark{wedge, plain, plain}, -1, ""},
		{"spread, up", star, []mark{plain, wedge, plain}, -1, ""},
		{"spread, down", star, []mark{plain, hash, plain}, 1, ""},
		{"up and down", star, []mark{wedge, hash, plain}, 0, "one up and one down"},
		{"all up", star, []mark{wedge, wedge, wedge}, 0, "alike"},
		{"wavy", star, []mark{plain, wavy, plain}, 0, ""},
		{"plain", star, []mark{plain, plain, plain}, 0, ""},
		{"cross, opposite bonds up", cross, []mark{wedge, plain, wedge, plain}, 1, ""},
		{"cross, neighbouring bonds up", cross, []mark{wedge, wedge, plain, plain}, 0, "cancel"},
		{"cross, opposite bonds up and down", cross, []mark{wedge, plain, hash, plain}, 0, "cancel"},
		{"in one direction", [][3]float64{{1, 0, 0}, {1, 0.01, 0}, {-1, 0, 0}}, []mark{wedge, plain, plain}, 0, "one direction"},
		{"on top", [][3]float64{{1, 0, 0}, {0, 0, 0}, {-1, 0, 0}}, []mark{wedge, plain, plain}, 0, "on top"},
	} {
		list := []int{1, 2, 3, 4}[:len(tc.x)]
		got, problem := drawn(tc.x, tc.marks).wedgeParity(0, list)
		if got != tc.parity || !strings.Contains(problem, tc.problem) || tc.problem == "" && problem != "" {
			t.Errorf("%s: parity %d (%s), want %d (%s)", tc.name, got, problem, tc.parity, tc.problem)
		}
	}
}

// A warning comes for a real centre only.
func TestAmbiguousCentreIsNamed(t *testing.T) {
	lines := func(first string) string {
		return molfile("  4  3  0  0  0  0  0  0  0  0999 V2000",
			"    0.0000    0.0000    0.0000 C   0  0",
			"   -1.0000    0.5000    0.0000 "+first+"   0  0",
			"    0.0000    1.0000    0.0000 O   0  0",
			"    1.0000    0.5000    0.0000 C   0  0",
			"  1  2  1  0", "  1  3  1  1", "  1  4  1  0", "M  END")
	}
	for first, named := range map[string]bool{"F": true, "C": false} {
		records := readAll(t, lines(first))
		if len(records) != 1 || records[0].Err != nil {
			t.Fatalf("%+v", records)
		}
		if got := strings.Contains(strings.Join(records[0].Warnings, ";"), "atom 1 can be read in two ways"); got != named {
			t.Errorf("first neighbour %s: warnings %q", first, records[0].Warnings)
		}
	}
}
