package generate

import (
	"encoding/json"
	"math"
	"testing"

	"torsieve/internal/geom"
	"torsieve/internal/units"
)

// The built rings have the torsions that the table lists for bonds of 1.53
// angstrom, computed independently, and bonds of that length.
func TestRingTemplates(t *testing.T) {
	var table puckerTable
	if err := json.Unmarshal(puckersJSON, &table); err != nil {
		t.Fatal(err)
	}
	bySize, err := ringTemplates()
	if err != nil {
		t.Fatal(err)
	}
	for n := 3; n <= 8; n++ {
		if len(bySize[n]) == 0 {
			t.Errorf("no shapes of rings of %d", n)
		}
		for _, r := range bySize[n] {
			x := r.coordinates(1.53 * units.Angstrom)
			var bond float64
			for j := range n {
				bond += geom.Distance(x, j, (j+1)%n) / float64(n)
				if n < 4 {
					continue
				}
				got := geom.Dihedral(x, (j+n-1)%n, j, (j+1)%n, (j+2)%n)
				if off := math.Remainder(got-r.torsions[j], 2*math.Pi) / degree; math.Abs(off) > 0.1 {
					t.Errorf("ring of %d, %s: torsion %d is %.1f degrees, want %.1f", n, r.name, j, got/degree, r.torsions[j]/degree)
				}
			}
			if math.Abs(bond/units.Angstrom-1.53) > 1e-4 {
				t.Errorf("ring of %d, %s: mean bond %.3f angstrom, want 1.53", n, r.name, bond/units.Angstrom)
			}
		}
	}
}

// A table whose heights and amplitudes differ is refused.
func TestTemplateCheck(t *testing.T) {
	bySize, err := ringTemplates()
	if err != nil {
		t.Fatal(err)
	}
	chair := bySize[6][1]
	if err := chair.check(map[string][]float64{"q2": {0, 0}, "q3": {0.7}}); err == nil {
		t.Error("a chair with another amplitude passes")
	}
}

// Saturated rings get their usual starts: two chairs and six twist-boats among
// those of cyclohexane, none that is flat.
func TestRingProblems(t *testing.T) {
	s := searchOf(t, "C1CCCCC1")
	f := s.assembly.frags[0]
	problems, err := f.ringProblems(s.embedder.problems[0])
	if err != nil {
		t.Fatal(err)
	}
	if len(problems) < 8 {
		t.Errorf("%d starts for cyclohexane, want at least 8", len(problems))
	}
	for _, text := range []string{"c1ccccc1", "C1CCCCCCCC1", "C1CCC2CCCCC2C1"} {
		s := searchOf(t, text)
		if problems, err := s.assembly.frags[0].ringProblems(s.embedder.problems[0]); err != nil || problems != nil {
			t.Errorf("%s: %d starts (%v), want none: no single flexible ring of seven or less", text, len(problems), err)
		}
	}
}
