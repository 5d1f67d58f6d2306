package ensemble

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"torsieve/internal/units"
)

// states makes states of energies in kcal/mol and copies.
func states(kcal, copies []float64) []State {
	s := make([]State, len(kcal))
	for i := range s {
		s[i] = State{Energy: kcal[i] * units.KcalPerMol, Copies: copies[i]}
	}
	return s
}

// Two and four states in closed form, worked out by an independent script.
// Butane: anti and gauche, 0.67 kcal/mol (experimental enthalpy difference).
// Pentane: tt, tg, gg, gx with energies of Gruzman, Karton, Martin, J. Phys.
// Chem. A 2009, 113, 11974, and the number of copies of each form.
func TestWeighKnownEnsembles(t *testing.T) {
	for _, tc := range []struct {
		name         string
		kcal, copies []float64
		want         []float64
	}{
		{"butane", []float64{0, 0.67}, []float64{1, 2}, []float64{0.607707, 0.392293}},
		{
			"pentane",
			[]float64{0, 0.614, 0.961, 2.813},
			[]float64{1, 4, 2, 4},
			[]float64{0.351033, 0.49813, 0.138663, 0.012175},
		},
	} {
		t.Run(tc.name, func(t *testing.T) {
			d := Weigh(states(tc.kcal, tc.copies), 298.15)
			for i, want := range tc.want {
				// Six printed digits, and RT of the script rounded to the sixth.
				if got := d.Populations[i]; math.Abs(got-want) > 1.5e-6 {
					t.Errorf("state %d: population %.7f, want %.6f", i, got, want)
				}
			}
		})
	}
}

// n equal states of one copy each: p = 1/n, S = R ln n, A = E - kT ln n. The
// same with one state of n copies. R ln 2 = 1.37739 cal/(mol K) with R =
// 1.987204 cal/(mol K) (CODATA 2018).
func TestWeighEqualStates(t *testing.T) {
	const energy, temperature = -1234.5, 298.15
	two := []State{{energy, 1}, {energy, 1}}
	one := []State{{energy, 2}}
	for _, tc := range [][]State{two, one} {
		d := Weigh(tc, temperature)
		calMolK := d.Entropy / units.KcalPerMol * 1000
		if math.Abs(calMolK-1.37739) > 0.5e-4 {
			t.Errorf("%v: entropy %.6f cal/(mol K), want R ln 2 = 1.37739", tc, calMolK)
		}
		if d.Energy != energy {
			t.Errorf("%v: mean energy %.12g, want %.12g", tc, d.Energy, energy)
		}
		if want := energy - temperature*d.Entropy; math.Abs(d.FreeEnergy-want) > 1e-12 {
			t.Errorf("%v: free energy %.12f, want E - TS = %.12f", tc, d.FreeEnergy, want)
		}
	}
}

// Laws: populations sum to one; A = U - TS; a shift of all energies changes no
// population; so does nothing else but the order of the states.
func TestWeighLaws(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 12).Draw(t, "n")
		s := make([]State, n)
		for i := range s {
			s[i] = State{
				Energy: rapid.Float64Range(-0.05, 0.05).Draw(t, "energy") - 2000,
				Copies: float64(rapid.IntRange(1, 12).Draw(t, "copies")),
			}
		}
		temperature := rapid.Float64Range(1, 2000).Draw(t, "temperature")
		d := Weigh(s, temperature)
		var sum float64
		for _, p := range d.Populations {
			if p < 0 {
				t.Fatalf("population %g", p)
			}
			sum += p
		}
		if math.Abs(sum-1) > 1e-9 {
			t.Fatalf("populations sum to %.12f", sum)
		}
		if want := d.Energy - temperature*d.Entropy; math.Abs(d.FreeEnergy-want) > 1e-8 {
			t.Fatalf("free energy %.12f, want %.12f", d.FreeEnergy, want)
		}
		moved := make([]State, n)
		for i := range s {
			moved[n-1-i] = State{Energy: s[i].Energy + 1000, Copies: s[i].Copies}
		}
		m := Weigh(moved, temperature)
		for i, p := range d.Populations {
			if q := m.Populations[n-1-i]; math.Abs(p-q) > 1e-7 {
				t.Fatalf("state %d: %g, %g after a shift", i, p, q)
			}
		}
	})
}

// Far from zero and far apart: total energies of hundreds of hartree over kT
// overflow exp; gaps of hundreds of kT underflow it.
func TestWeighExtremes(t *testing.T) {
	d := Weigh([]State{{-5000, 1}, {-4000, 1}}, 1)
	if d.Populations[0] != 1 || d.Populations[1] != 0 || d.Entropy != 0 {
		t.Errorf("have %+v, want all weight on the lower state", d)
	}
	if hot := Weigh([]State{{-5000, 3}, {-5000.01, 1}}, 1e9); math.Abs(hot.Populations[0]-0.75) > 1e-5 {
		t.Errorf("have %v, want the copies' shares at a high temperature", hot.Populations)
	}
}

func TestWeighRefuses(t *testing.T) {
	for name, f := range map[string]func(){
		"no states":   func() { Weigh(nil, 300) },
		"temperature": func() { Weigh([]State{{0, 1}}, 0) },
		"NaN":         func() { Weigh([]State{{math.NaN(), 1}}, 300) },
		"copies":      func() { Weigh([]State{{0, 0}}, 300) },
	} {
		t.Run(name, func(t *testing.T) {
			defer func() {
				if recover() == nil {
					t.Error("no panic")
				}
			}()
			f()
		})
	}
}
