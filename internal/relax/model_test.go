package relax

import (
	"math"
	"testing"

	"torsieve/internal/geom"
)

// ethyne is H-C-C-H on a line, and ethanol-like a chain with a bend and a
// torsion; bohr.
var (
	ethyne        = []float64{0, 0, 0, 2, 0, 0, 4.3, 0, 0, 6.3, 0, 0}
	ethyneNumbers = []int{1, 6, 6, 1}
	chain         = []float64{0, 0, 0, 2.9, 0, 0, 3.8, 2.6, 0, 3.1, 3.7, 1.2, -0.7, -1.0, -1.6, 3.6, -0.9, 1.7}
	chainNumbers  = []int{6, 6, 8, 1, 1, 1}
)

func built(x []float64, numbers []int) *model {
	m := NewMinimiser(len(x))
	m.prepareModel(x, numbers)
	return m.model
}

// quadraticForm returns v.H v of the factorised model, from H = L L^T.
func (m *model) quadraticForm(v []float64) float64 {
	var sum float64
	for c := range m.n {
		var t float64
		for r := c; r < m.n; r++ {
			t += m.factor[r*m.n+c] * v[r]
		}
		sum += t * t
	}
	return sum
}

// TestModelStretch: along a bond at its reference length, with all else far
// away, the model is the published 0.45 hartree/bohr^2 and the shift.
func TestModelStretch(t *testing.T) {
	m := built([]float64{0, 0, 0, 2.87, 0, 0}, []int{6, 6})
	v := []float64{-math.Sqrt2 / 2, 0, 0, math.Sqrt2 / 2, 0, 0}
	if got, want := m.quadraticForm(v), 2*stretchConstant+shift; math.Abs(got-want) > 1e-12 {
		t.Errorf("curvature %g, want %g", got, want)
	}
}

// TestModelLeavesMotionsFree: shifts and turns of the whole cost the shift only.
func TestModelLeavesMotionsFree(t *testing.T) {
	for _, c := range []struct {
		x       []float64
		numbers []int
	}{{ethyne, ethyneNumbers}, {chain, chainNumbers}} {
		m := built(c.x, c.numbers)
		v := make([]float64, len(c.x))
		for i := 0; i < len(v); i += 3 {
			v[i] = 1
		}
		if got, want := m.quadraticForm(v), shift*float64(len(v)/3); math.Abs(got-want) > 1e-12 {
			t.Errorf("a shift costs %g, want %g", got, want)
		}
		var norm float64
		for i := 0; i < len(v); i += 3 { // a turn about z
			v[i], v[i+1], v[i+2] = -c.x[i+1], c.x[i], 0
			norm += v[i]*v[i] + v[i+1]*v[i+1]
		}
		if got, want := m.quadraticForm(v), shift*norm; math.Abs(got-want) > 1e-10 {
			t.Errorf("a turn costs %g, want %g", got, want)
		}
	}
}

// TestModelHoldsLinearBends: bending a straight molecule is not free.
func TestModelHoldsLinearBends(t *testing.T) {
	m := built(ethyne, ethyneNumbers)
	for d := 1; d <= 2; d++ {
		v := make([]float64, 12)
		v[d], v[3+d], v[6+d], v[9+d] = 1, -0.5, -0.5, 1
		if got := m.quadraticForm(v); got < 0.02 {
			t.Errorf("direction %d: a bend costs %g, as little as a free motion", d, got)
		}
	}
}

// TestModelTurnsWithTheMolecule: the step from a turned gradient is the turned step.
func TestModelTurnsWithTheMolecule(t *testing.T) {
	turn := func(x []float64) []float64 {
		y := append([]float64{-0.3, 0.5, -0.8, 0.3, -0.5, 0.8}, x...) // an axis through the origin
		all := make([]int, len(x)/3)
		for i := range all {
			all[i] = i + 2
		}
		geom.RotateAbout(y, 0, 1, all, 1.1)
		return y[6:]
	}
	g := []float64{0.1, -0.2, 0.3, 0.05, 0.2, -0.1, 0.3, 0.1, 0.02, -0.2, 0.1, 0.1, 0.07, 0, -0.3, 0.2, 0.3, -0.05}
	step := append([]float64(nil), g...)
	built(chain, chainNumbers).solve(step)
	turned := turn(g)
	built(turn(chain), chainNumbers).solve(turned)
	for i, want := range turn(step) {
		if math.Abs(turned[i]-want) > 1e-10 {
			t.Errorf("component %d: %g, want %g", i, turned[i], want)
		}
	}
}
