package scf

import (
	"math"
	"testing"
)

func TestOccupyTwoLevels(t *testing.T) {
	// One electron in two levels d apart: the Fermi level is in the middle, and
	// the upper level holds 1/(1+exp(d/2kT)).
	const d, kT = 0.01, 0.003
	f := make([]float64, 2)
	level := Occupy(f, []float64{-d / 2, d / 2}, 1, kT)
	want := 1 / (1 + math.Exp(d/2/kT))
	if math.Abs(level) > 1e-15 || math.Abs(f[1]-want) > 1e-14 || math.Abs(f[0]-(1-want)) > 1e-14 {
		t.Errorf("level %g, occupations %v, want 0 and %g above", level, f, want)
	}
	// -T S of the mixture of two states
	entropy := 2 * kT * (want*math.Log(want) + (1-want)*math.Log(1-want))
	if got := Entropy(f, kT); math.Abs(got-entropy) > 1e-15 {
		t.Errorf("entropy term %g, want %g", got, entropy)
	}
}

func TestOccupySums(t *testing.T) {
	const kT = 9.5e-4
	levels := []float64{-0.7, -0.5, -0.5, -0.4999, -0.2, -0.2, 0.1, 3}
	f := make([]float64, len(levels))
	for _, n := range []float64{0, 0.3, 1, 2, 3, 4, 4.5, 5, 6, 7, 8} {
		Occupy(f, levels, n, kT)
		var sum float64
		for i, v := range f {
			sum += v
			if v < 0 || v > 1 || i > 0 && v > f[i-1]+1e-15 {
				t.Errorf("%g electrons: occupations %v", n, f)
			}
		}
		if math.Abs(sum-n) > 1e-13 {
			t.Errorf("%g electrons: occupations sum to %.16g", n, sum)
		}
	}
}

// A wide gap leaves whole electrons, exactly, and degenerate levels share.
func TestOccupyWholeAndShared(t *testing.T) {
	f := make([]float64, 4)
	Occupy(f, []float64{-1, -0.9, 0.5, 0.6}, 2, 1e-3)
	if f[0] != 1 || f[1] != 1 || f[2] != 0 || f[3] != 0 || Entropy(f, 1e-3) != 0 {
		t.Errorf("occupations %v, want 1 1 0 0", f)
	}
	Occupy(f, []float64{-1, -0.3, -0.3, -0.3}, 2, 1e-3)
	for _, v := range f[1:] {
		if math.Abs(v-1.0/3) > 1e-14 {
			t.Errorf("occupations %v, want thirds", f)
		}
	}
	Occupy(f, []float64{-1, -0.9, 0.5, 0.6}, 1.5, 0)
	if f[0] != 1 || f[1] != 0.5 || f[2] != 0 {
		t.Errorf("occupations at 0 K %v, want 1 0.5 0 0", f)
	}
}
