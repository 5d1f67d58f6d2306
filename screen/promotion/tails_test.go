package promotion

import (
	"math"
	"math/rand/v2"
	"testing"
)

// A heavy residual is a Student t of three degrees of freedom over its own
// deviation, 3^1/2, times heavyDeviation: quantiles of printed tables (0.765, 2.353 and 5.841 for
// 75, 95 and 99.5 %), within four standard errors of 40000 draws.
func TestHeavyResiduals(t *testing.T) {
	source := rand.New(rand.NewPCG(1, 9))
	const n = 40000
	for _, tc := range []struct{ quantile, share float64 }{{0.765, 0.75}, {2.353, 0.95}, {5.841, 0.995}} {
		below := 0.0
		for range n {
			if heavy(source) < heavyDeviation*tc.quantile/math.Sqrt(3) {
				below++
			}
		}
		if got := below / n; math.Abs(got-tc.share) > 4*math.Sqrt(tc.share*(1-tc.share)/n)+1e-4 {
			t.Errorf("share under %g: %.4f, want %.4f", tc.quantile, got, tc.share)
		}
	}
}

// Three hundred residuals tell which they are, whatever their unit; two say nothing.
func TestHeavyTailsAreSeen(t *testing.T) {
	source := rand.New(rand.NewPCG(3, 9))
	right := 0
	for range 100 {
		normal, wild := make([]float64, 300), make([]float64, 300)
		for i := range normal {
			normal[i], wild[i] = 1e-3*source.NormFloat64(), 7*heavy(source)
		}
		if heavyTails(normal) < 0.5 {
			right++
		}
		if heavyTails(wild) > 0.5 {
			right++
		}
	}
	if right < 195 {
		t.Errorf("%d of 200 samples are told right", right)
	}
	if p := heavyTails([]float64{1, -1}); p < 0.2 || p > 0.8 {
		t.Errorf("two residuals say %g", p)
	}
	if p := heavyTails([]float64{0, 0, 0}); p != heavyBefore {
		t.Errorf("residuals of zero say %g", p)
	}
}
