package ensemble

import (
	"math"
	"slices"
	"testing"

	"torsieve/internal/units"
)

// For two states the log of the populations' ratio is Student t, so the
// percentiles are known: p = 1/(1+exp(-(gap +- t sqrt(2) s)/kT)). The 95 %
// quantiles of t are those of every printed table (6.314, 2.015, 1.645 for 1, 5
// and very many degrees of freedom).
func TestBarsOfTwoStates(t *testing.T) {
	const temperature, gap, scale = 298.15, 0.5, 0.2 // K, kcal/mol
	kT := temperature * units.Kelvin / units.KcalPerMol
	for _, tc := range []struct{ freedom, quantile float64 }{{1, 6.314}, {5, 2.015}, {1e6, 1.645}} {
		s := Scatter{Scale: scale * units.KcalPerMol, Freedom: tc.freedom}
		bars := Bars(states([]float64{0, gap}, []float64{1, 1}), temperature, s, [2]uint64{1, 2})
		reach := tc.quantile * math.Sqrt2 * scale
		low, high := logistic((gap-reach)/kT), logistic((gap+reach)/kT)
		// 4000 draws: standard error of a 5 % tail 0.34 %; four of those moved
		// through the slope of the quantile stay under 0.04 in a population.
		if b := bars[0]; math.Abs(b.Low-low) > 0.04 || math.Abs(b.High-high) > 0.04 {
			t.Errorf("freedom %g: bar %.3f to %.3f, want %.3f to %.3f", tc.freedom, b.Low, b.High, low, high)
		}
		if b := bars[1]; math.Abs(b.Low-(1-high)) > 0.04 || math.Abs(b.High-(1-low)) > 0.04 {
			t.Errorf("freedom %g: second bar %.3f to %.3f does not mirror the first", tc.freedom, b.Low, b.High)
		}
	}
}

func logistic(x float64) float64 { return 1 / (1 + math.Exp(-x)) }

// One state has all the weight whatever its energy; the same stream gives the
// same bars, another stream others; sharper energies give narrower bars.
func TestBarsLaws(t *testing.T) {
	sharp := Scatter{Scale: 0.01 * units.KcalPerMol, Freedom: 3}
	blunt := Scatter{Scale: 1 * units.KcalPerMol, Freedom: 3}
	if b := Bars(states([]float64{3}, []float64{2}), 300, blunt, [2]uint64{1, 1}); b[0] != (Bar{1, 1}) {
		t.Errorf("a single state has the bar %v", b[0])
	}
	three := states([]float64{0, 0.4, 1}, []float64{1, 2, 1})
	a := Bars(three, 300, blunt, [2]uint64{1, 1})
	if b := Bars(three, 300, blunt, [2]uint64{1, 1}); !slices.Equal(a, b) {
		t.Errorf("the same stream gives %v and %v", a, b)
	}
	if b := Bars(three, 300, blunt, [2]uint64{1, 2}); slices.Equal(a, b) {
		t.Error("another stream gives the same bars")
	}
	narrow := Bars(three, 300, sharp, [2]uint64{1, 1})
	d := Weigh(three, 300)
	for i := range three {
		if narrow[i].High-narrow[i].Low >= a[i].High-a[i].Low {
			t.Errorf("state %d: bar %v for sharp energies, %v for blunt ones", i, narrow[i], a[i])
		}
		if p := d.Populations[i]; narrow[i].Low > p || narrow[i].High < p {
			t.Errorf("state %d: the bar %v does not hold the population %.4f", i, narrow[i], p)
		}
	}
}
