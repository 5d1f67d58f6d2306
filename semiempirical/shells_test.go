package semiempirical

import (
	"math"
	"testing"

	"torsieve/internal/gauss"
)

// The contracted functions are not normalised; their self-overlaps are known
// from the reference library (testdata/reference/gfn2/README.md).
func TestSelfOverlaps(t *testing.T) {
	var file struct {
		Values []struct {
			Shell, Fit string
			Overlap    float64 `json:"self_overlap"`
		}
	}
	readReference(t, "self-overlap.json.gz", &file)
	for _, v := range file.Values {
		for _, zeta := range []float64{1, 1.83} { // it does not depend on zeta
			s := shell{N: int(v.Shell[0] - '0'), L: map[byte]int{'s': 0, 'p': 1, 'd': 2}[v.Shell[1]], Gaussians: int(v.Fit[4] - '0'), Zeta: zeta}
			g, err := slater(&s)
			if err != nil {
				t.Errorf("%s: %v", v.Shell, err)
				continue
			}
			block := gauss.OneCentre(&g, &g)
			for m := range g.Size() {
				if got := block[(m*g.Size()+m)*gauss.Operators]; math.Abs(got-v.Overlap) > 1e-11 {
					t.Errorf("%s function %d: %.13f, want %.12f", v.Shell, m, got, v.Overlap)
				}
			}
		}
	}
	if len(file.Values) == 0 {
		t.Error("no values")
	}
}

// Every element has shells, a whole number of electrons, and each l once.
func TestParameterTable(t *testing.T) {
	table, err := gfn2()
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range table.Elements {
		var electrons float64
		seen := map[int]bool{}
		for i := range e.Shells {
			s := &e.Shells[i]
			electrons += s.Occupation
			if seen[s.L] {
				t.Errorf("%s has two shells with l = %d", e.Symbol, s.L)
			}
			seen[s.L] = true
			if _, err := slater(s); err != nil {
				t.Errorf("%s: %v", e.Symbol, err)
			}
		}
		if math.Abs(electrons-math.Round(electrons)) > 1e-9 || electrons < 1 {
			t.Errorf("%s has %g valence electrons", e.Symbol, electrons)
		}
	}
}
