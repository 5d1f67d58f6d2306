package generate

import (
	"encoding/json"
	"math"
	"os"
	"testing"

	"torsieve/molecule"
	"torsieve/molecule/smiles"
)

// checks is testdata/reference/uff/generation_checks.json as far as it is used here.
type checks struct {
	CremerPople []struct {
		N        int
		XYZ      [][3]float64
		Total    float64              `json:"Q"`
		Modes    map[string][]float64 `json:"q"`
		Torsions []float64
	} `json:"cremer_pople"`
	OneFour []struct {
		A, B, C, Alpha, Beta, Phi, D float64
	} `json:"one_four"`
	TorsionClasses struct {
		Tests [][2]string
	} `json:"torsion_classes"`
}

func readChecks(t *testing.T) checks {
	t.Helper()
	text, err := os.ReadFile("../../testdata/reference/uff/generation_checks.json")
	if err != nil {
		t.Fatal(err)
	}
	var c checks
	if err := json.Unmarshal(text, &c); err != nil {
		t.Fatal(err)
	}
	return c
}

func parse(t testing.TB, text string) *molecule.Molecule {
	t.Helper()
	m, _, err := smiles.Parse(text)
	if err != nil {
		t.Fatalf("%s: %v", text, err)
	}
	return m
}

// Which class a bond belongs to: molecules and answers made up by hand for the
// table, see torsion_classes in the file of checks.
func TestClassify(t *testing.T) {
	tests := readChecks(t).TorsionClasses.Tests
	if len(tests) < 100 {
		t.Fatalf("%d checks, want at least 100", len(tests))
	}
	for _, c := range tests {
		m := parse(t, c[0])
		b, d := -1, -1
		for i, a := range m.Atoms() {
			switch a.Class {
			case 1:
				b = i
			case 2:
				d = i
			}
		}
		class, _, _, err := classify(m, b, d)
		if err != nil || class.name != c[1] {
			t.Errorf("%s: class %q (%v), want %q", c[0], class.name, err, c[1])
		}
	}
}

// Every class stands on numbers that make sense.
func TestTorsionTable(t *testing.T) {
	classes, err := torsionClasses()
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range classes {
		if turns := 2 * math.Pi / c.period; math.Abs(turns-math.Round(turns)) > 1e-9 {
			t.Errorf("%s: the period is no part of a full turn", c.name)
		}
		for _, p := range c.peaks {
			if p.weight <= 0 || p.spread <= 0 || math.Abs(p.angle) > 2*math.Pi {
				t.Errorf("%s: peak %+v", c.name, p)
			}
		}
	}
}

// Peaks unfold over the turn and fold by symmetry: hand-made cases.
func TestStates(t *testing.T) {
	alkane := torsionClass{period: 2 * math.Pi, peaks: []state{{math.Pi, 0.1, 2}, {65 * degree, 0.1, 1}, {-65 * degree, 0.1, 1}}}
	biaryl := torsionClass{period: math.Pi, peaks: []state{{42 * degree, 0.1, 1}, {138 * degree, 0.1, 1}}}
	toluene := torsionClass{period: math.Pi / 3, peaks: []state{{30 * degree, 0.1, 1}}}
	for _, c := range []struct {
		name     string
		class    torsionClass
		symmetry int
		want     []float64 // degrees
	}{
		{"alkane", alkane, 1, []float64{180, 65, -65}},
		{"biaryl", biaryl, 1, []float64{42, 138, -138, -42}},
		{"biaryl with a symmetric ring", biaryl, 2, []float64{42, 138}},
		{"toluene", toluene, 6, []float64{30}},
	} {
		got := c.class.states(c.symmetry)
		if len(got) != len(c.want) {
			t.Errorf("%s: %d states, want %v", c.name, len(got), c.want)
			continue
		}
		var sum float64
		for k, s := range got {
			sum += s.weight
			if math.Abs(s.angle/degree-c.want[k]) > 1e-6 {
				t.Errorf("%s: state %d at %g degrees, want %g", c.name, k, s.angle/degree, c.want[k])
			}
		}
		if math.Abs(sum-1) > 1e-12 {
			t.Errorf("%s: weights sum to %g", c.name, sum)
		}
	}
}

// Distances across three bonds from closed forms, computed independently.
func TestOneFourDistance(t *testing.T) {
	for _, c := range readChecks(t).OneFour {
		got := oneFourDistance(c.A, c.B, c.C, c.Alpha*degree, c.Beta*degree, c.Phi*degree)
		if math.Abs(got-c.D) > 1e-6 {
			t.Errorf("%+v: %.7f, want %.6f", c, got, c.D)
		}
	}
}
