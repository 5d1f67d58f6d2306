package calibration

import (
	"math"
	"strings"
	"testing"

	"torsieve/internal/units"
)

func hf3c(t *testing.T) Combination {
	t.Helper()
	c, ok, err := For("hf-3c")
	if err != nil || !ok {
		t.Fatalf("found %t, error %v", ok, err)
	}
	return c
}

// A constant added to a tier's energies changes nothing, and the solvation comes
// in whole.
func TestEnergiesAreRelative(t *testing.T) {
	c := hf3c(t)
	hf, xtb := []float64{-400, -400.002, -399.999}, []float64{-30, -30.001, -29.998}
	gas, err := c.Energies([][]float64{hf, xtb}, nil)
	if err != nil {
		t.Fatal(err)
	}
	want := c.Coefficients[0]*-0.002 + c.Coefficients[1]*-0.001
	if gas[0] != 0 || math.Abs(gas[1]-want) > 1e-12 {
		t.Errorf("energies %v, want 0 and %g", gas, want)
	}
	wet, err := c.Energies([][]float64{hf, xtb}, []float64{-0.01, -0.012, -0.01})
	if err != nil {
		t.Fatal(err)
	}
	if d := wet[1] - gas[1]; math.Abs(d+0.002) > 1e-12 || wet[2] != gas[2] {
		t.Errorf("solvation changes %v to %v", gas, wet)
	}
}

func TestEnergiesRefuse(t *testing.T) {
	c := hf3c(t)
	_, err := c.Energies([][]float64{{-1, math.NaN()}, {-1, -1}}, nil)
	if err == nil || !strings.Contains(err.Error(), "conformer 2 has no energy of hf") {
		t.Errorf("error %v", err)
	}
	for name, f := range map[string]func(){
		"one tier":    func() { _, _ = c.Energies([][]float64{{1}}, nil) },
		"two lengths": func() { _, _ = c.Energies([][]float64{{1}, {1, 2}}, nil) },
		"solvation":   func() { _, _ = c.Energies([][]float64{{1}, {1}}, []float64{1, 2}) },
	} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("%s: no panic", name)
				}
			}()
			f()
		}()
	}
}

// What was never fitted is not made up.
func TestUnknownMethods(t *testing.T) {
	if _, ok, err := For("hf-d3"); ok || err != nil {
		t.Errorf("hf-d3: found %t, error %v", ok, err)
	}
	if _, ok, err := Between("hf-3c", "forcefield"); ok || err != nil {
		t.Errorf("downwards: found %t, error %v", ok, err)
	}
}

// The scatter grows with flexibility and with the tiers' disagreement.
func TestScatterGrows(t *testing.T) {
	c := hf3c(t)
	agree := [][]float64{{0, 0.001, 0.002}, {0, 0.001, 0.002}}
	differ := [][]float64{{0, 0.001, 0.002}, {0, 0.004, -0.002}}
	small := c.Scatter(25, 3, agree).Scale
	if c.Scatter(25, 9, agree).Scale <= small || c.Scatter(25, 3, differ).Scale <= small {
		t.Error("the scatter does not grow")
	}
	if s := c.Scatter(1, 0, [][]float64{{0}, {0}}); !(s.Scale > 0) {
		t.Errorf("one conformer of one atom: %+v", s)
	}
}

// Differences 0, 1 and 2 kcal/mol have the standard deviation 1.
func TestDisagreement(t *testing.T) {
	a := []float64{-100, -100 + units.KcalPerMol, -100 + 2*units.KcalPerMol}
	if d := Disagreement(a, []float64{7, 7, 7}) / units.KcalPerMol; math.Abs(d-1) > 1e-9 {
		t.Errorf("disagreement %g kcal/mol, want 1", d)
	}
	if Disagreement([]float64{1}, []float64{5}) != 0 {
		t.Error("a single conformer disagrees")
	}
}

// Every prior that promotion is given passes its own check, for any molecule.
func TestPriors(t *testing.T) {
	table, err := Load()
	if err != nil {
		t.Fatal(err)
	}
	if len(table.Pairs) == 0 {
		t.Fatal("no pairs")
	}
	for _, p := range table.Pairs {
		for _, size := range [][2]int{{0, 0}, {1, 0}, {25, 5}, {120, 60}} {
			if err := p.Prior(size[0], size[1]).Check(); err != nil {
				t.Errorf("%s to %s, %v: %v", p.Lower, p.Upper, size, err)
			}
		}
	}
}

// Along a direction in which the coefficients are known the error is their
// covariance's: d^T C d.
func TestCoefficientError(t *testing.T) {
	c := Combination{Covariance: [][]float64{{0.04, 0}, {0, 0.01}}}
	if e := c.CoefficientError([]float64{1, 0}); math.Abs(e-0.2) > 1e-12 {
		t.Errorf("%g, want 0.2", e)
	}
	if e := c.CoefficientError([]float64{3, 4}); math.Abs(e-math.Sqrt(0.36+0.16)) > 1e-12 {
		t.Errorf("%g", e)
	}
}

// If y = 1.2 e + r, then 0.6 y + 0.3 e = 1.02 e + 0.6 r.
func TestCombinedPair(t *testing.T) {
	p := Pair{Slope: 1.2, SlopeSpread: 2, Residual: Law{Scale: 0.5, Freedom: 1}}
	before, after := p.Prior(25, 5), p.Combined(0.6, 0.3).Prior(25, 5)
	if math.Abs(after.Slope-1.02) > 1e-12 || math.Abs(after.Scale-0.6*before.Scale) > 1e-12 || math.Abs(after.SlopeSD-0.6*before.SlopeSD) > 1e-12 {
		t.Errorf("%+v becomes %+v", before, after)
	}
}
