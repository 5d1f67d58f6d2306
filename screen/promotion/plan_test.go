package promotion

import (
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"torsieve/internal/units"
)

func start(t *testing.T, s Settings, energies ...float64) *Plan {
	t.Helper()
	var candidates []Candidate
	for _, e := range energies {
		candidates = append(candidates, Candidate{Energy: e * units.KcalPerMol, Copies: 1})
	}
	p, err := New(candidates, quantum, s)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// finish answers every batch by answer.
func finish(t *testing.T, p *Plan, answer func(i int) error) {
	t.Helper()
	for batch := p.Next(); len(batch) > 0; batch = p.Next() {
		for _, i := range batch {
			if err := answer(i); err != nil {
				t.Fatal(err)
			}
		}
	}
}

func rising(n int, step float64) []float64 {
	out := make([]float64, n)
	for i := range out {
		out[i] = step * float64(i)
	}
	return out
}

func TestFewAreAllComputed(t *testing.T) {
	for n := 1; n <= fewEnough; n++ {
		p := start(t, Defaults(), rising(n, 3)...)
		if batch := p.Next(); len(batch) != n {
			t.Errorf("%d conformers: %v go up, want all", n, batch)
		}
		for i := range n {
			if err := p.Computed(i, 0); err != nil {
				t.Fatal(err)
			}
		}
		if p.Next() != nil || p.End() != Everything || p.Missed()[0].P95 != 0 {
			t.Errorf("%d conformers: end %v, missed %+v", n, p.End(), p.Missed()[0])
		}
	}
}

// The first batch spans the whole range and holds the lowest.
func TestFirstBatchIsSpread(t *testing.T) {
	energies := rising(41, 0.2)
	slices.Reverse(energies) // index 40 is the lowest
	p := start(t, Defaults(), energies...)
	if batch, want := p.Next(), []int{0, 10, 20, 30, 37, 38, 39, 40}; !slices.Equal(batch, want) {
		t.Errorf("first batch %v, want %v", batch, want)
	}
	if again := p.Next(); len(again) != 8 {
		t.Errorf("asked again while answers are outstanding: %v", again)
	}
}

// Where the tiers agree up to a constant, what lies 8 kcal/mol up holds nothing
// and is left.
func TestAgreeingTiersStopEarly(t *testing.T) {
	energies := append(rising(10, 0.3), rising(200, 0.05)...)
	for i := 10; i < len(energies); i++ {
		energies[i] += 8
	}
	p := start(t, Defaults(), energies...)
	finish(t, p, func(i int) error { return p.Computed(i, (energies[i]-500)*units.KcalPerMol) })
	if p.End() != Enough || p.handed > 40 {
		t.Errorf("end %v after %d of %d", p.End(), p.handed, len(energies))
	}
	for i := range 6 { // up to 1.5 kcal/mol; those above may hold less than 2 % together
		if why := p.Why(i); !strings.HasPrefix(why, "went up: ") {
			t.Errorf("conformer %d of the lowest: %s", i+1, why)
		}
	}
	if why := p.Why(len(energies) - 2); !strings.Contains(why, "stays: expected 1") {
		t.Errorf("why: %q", why)
	}
	if said := p.Explain(); !strings.Contains(said, "under the tolerance of 2.0 %") {
		t.Errorf("explained: %q", said)
	}
}

func TestIdenticalEnergies(t *testing.T) {
	p := start(t, Defaults(), make([]float64, 30)...)
	finish(t, p, func(i int) error { return p.Computed(i, -1) })
	// All alike at both tiers: each holds a thirtieth, so one alone may be left
	// at a tolerance of 2 %: none.
	if p.End() != Everything || p.Missed()[0].Mean != 0 {
		t.Errorf("end %v, missed %g", p.End(), p.Missed()[0].Mean)
	}
}

func TestAllFail(t *testing.T) {
	p := start(t, Defaults(), rising(20, 0.5)...)
	finish(t, p, func(i int) error { return p.Failed(i, "not converged") })
	e := p.Missed()[0]
	if p.End() != NoneCame || e.Mean != 1 || e.P95 != 1 {
		t.Errorf("end %v, missed %+v, want none came and all missed", p.End(), e)
	}
	if _, _, _, ok := p.Residual(); ok {
		t.Error("a residual is known though nothing was computed")
	}
	if why := p.Why(0); !strings.Contains(why, "not converged") {
		t.Errorf("why: %q", why)
	}
}

// A failed candidate is missed with its expected weight, and what can be
// computed is: it does not hold the others up.
func TestFailedStaysMissed(t *testing.T) {
	energies := append([]float64{0, 0.1, 0.2}, rising(30, 0.1)...)
	for i := 3; i < len(energies); i++ {
		energies[i] += 12
	}
	p := start(t, Defaults(), energies...)
	finish(t, p, func(i int) error {
		if i == 0 {
			return p.Failed(i, "fell apart")
		}
		return p.Computed(i, energies[i]*units.KcalPerMol)
	})
	e := p.Missed()[0]
	// The three lowest hold 0.39, 0.33 and 0.28 at 298.15 K.
	if e.Failed < 0.3 || e.Failed > 0.5 || e.Mean < e.Failed {
		t.Errorf("missed %.3f, failed %.3f of it, want about 0.39", e.Mean, e.Failed)
	}
	if p.End() != Enough {
		t.Errorf("end %v after %d", p.End(), p.handed)
	}
	if said := p.Explain(); !strings.Contains(said, "could not be computed") {
		t.Errorf("explained: %q", said)
	}
}

// Where every other candidate falls into a known minimum, those that wait are
// expected to weigh less.
func TestMergesLowerWhatIsMissed(t *testing.T) {
	missed := func(merge bool) float64 {
		p := start(t, Defaults(), rising(60, 0.05)...)
		for k, i := range p.Next() {
			var err error
			if merge && k > 3 {
				err = p.Merged(i, 0, 0.05*float64(i)*units.KcalPerMol)
			} else {
				err = p.Computed(i, 0.05*float64(i)*units.KcalPerMol)
			}
			if err != nil {
				t.Fatal(err)
			}
		}
		// In units of what is known: the known is smaller where some merged.
		m := p.Missed()[0].Mean
		return m / (1 - m) * float64(len(p.list(computed)))
	}
	if with, without := missed(true), missed(false); with > 0.8*without {
		t.Errorf("missed over known: %.3f with merges, %.3f without", with, without)
	}
}

func TestBudget(t *testing.T) {
	for _, budget := range []int{1, 3, 9, 20} {
		s := Defaults()
		s.Budget = budget
		p := start(t, s, rising(100, 0.01)...)
		finish(t, p, func(i int) error { return p.Computed(i, 0) })
		if p.End() != Spent || p.handed != budget {
			t.Errorf("budget %d: end %v after %d", budget, p.End(), p.handed)
		}
		if why := p.Why(99); budget < 9 && budget > 4 && !strings.Contains(why, "budget") {
			t.Errorf("why: %q", why)
		}
	}
}

// Of several temperatures the hottest decides here: it spreads the weight.
func TestSeveralTemperatures(t *testing.T) {
	count := func(temperatures ...float64) int {
		s := Defaults()
		s.Temperatures = temperatures
		p := start(t, s, rising(150, 0.05)...)
		finish(t, p, func(i int) error { return p.Computed(i, 0.05*float64(i)*units.KcalPerMol) })
		if n := len(p.Missed()); n != len(temperatures) {
			t.Errorf("%d estimates for %d temperatures", n, len(temperatures))
		}
		return p.handed
	}
	cold, both := count(100), count(100, 500)
	if cold >= both {
		t.Errorf("%d evaluations at 100 K, %d at 100 and 500 K", cold, both)
	}
	if count(1e-3) == 0 || count(1e6) == 0 {
		t.Error("extreme temperatures evaluate nothing")
	}
}

func TestRefusesBadInput(t *testing.T) {
	good := []Candidate{{Energy: 1, Copies: 1}}
	nan := math.NaN()
	for _, tc := range []struct {
		name  string
		c     []Candidate
		prior Prior
		s     func(*Settings)
		want  string
	}{
		{"none", nil, quantum, nil, "no conformers"},
		{"NaN", []Candidate{{Energy: nan, Copies: 1}}, quantum, nil, "conformer 1: energy NaN"},
		{"copies", []Candidate{{Copies: 0}}, quantum, nil, "statistical weight"},
		{"descriptor", []Candidate{{Copies: 1, Descriptors: []float64{nan}}}, quantum, nil, "descriptor NaN"},
		{"descriptors", []Candidate{{Copies: 1}, {Copies: 1, Descriptors: []float64{1}}}, quantum, nil, "1 descriptors"},
		{"prior", good, Prior{}, nil, "residual of 0 hartree"},
		{"freedom", good, Prior{Scale: 1, Freedom: nan}, nil, "observations"},
		{"slope", good, Prior{Scale: 1, Freedom: 1, Slope: nan}, nil, "slope NaN"},
		{"temperature 0", good, quantum, func(s *Settings) { s.Temperatures = []float64{0} }, "more than 0 K, have 0"},
		{"temperature", good, quantum, func(s *Settings) { s.Temperatures = []float64{300, -5} }, "more than 0 K, have -5"},
		{"no temperature", good, quantum, func(s *Settings) { s.Temperatures = nil }, "at least one"},
		{"tolerance 0", good, quantum, func(s *Settings) { s.Tolerance = 0 }, "share between 0 and 1"},
		{"tolerance 1", good, quantum, func(s *Settings) { s.Tolerance = 1 }, "share between 0 and 1"},
		{"tolerance NaN", good, quantum, func(s *Settings) { s.Tolerance = nan }, "share between 0 and 1"},
		{"budget", good, quantum, func(s *Settings) { s.Budget = -1 }, "budget"},
	} {
		s := Defaults()
		if tc.s != nil {
			tc.s(&s)
		}
		if _, err := New(tc.c, tc.prior, s); err == nil || !strings.Contains(err.Error(), tc.want) {
			t.Errorf("%s: error %v, want one with %q", tc.name, err, tc.want)
		}
	}
}

func TestRefusesBadAnswers(t *testing.T) {
	p := start(t, Defaults(), rising(30, 0.1)...)
	batch := p.Next()
	for name, err := range map[string]error{
		"NaN":         p.Computed(batch[0], math.NaN()),
		"infinite":    p.Computed(batch[0], math.Inf(-1)),
		"not asked":   p.Computed(12, 0),
		"no such":     p.Failed(30, ""),
		"negative":    p.Failed(-1, ""),
		"into itself": p.Merged(batch[0], batch[0], 0),
		"into none":   p.Merged(batch[0], 99, 0),
	} {
		if err == nil {
			t.Errorf("%s: accepted", name)
		}
	}
	if err := p.Computed(batch[0], 0); err != nil {
		t.Error(err)
	}
	if err := p.Computed(batch[0], 0); err == nil {
		t.Error("a second answer was accepted")
	}
}

// The same calls give the same plan; another ligand's stream other draws; a
// constant added to all energies of a tier, and the order of a batch's answers,
// change nothing.
func TestSameCallsSamePlan(t *testing.T) {
	l := maker{prior: quantum, least: 80, most: 80, span: 8}.ligand(rand.New(rand.NewPCG(3, 4)))
	run := func(seed uint64, shift float64, backwards bool) ([]int, Estimate) {
		s := Defaults()
		s.Seed[1] = seed
		shifted := slices.Clone(l.candidates)
		for i := range shifted {
			shifted[i].Energy += shift
		}
		p, err := New(shifted, quantum, s)
		if err != nil {
			t.Fatal(err)
		}
		var all []int
		for batch := p.Next(); len(batch) > 0; batch = p.Next() {
			all = append(all, batch...)
			if backwards {
				slices.Reverse(batch)
			}
			for _, i := range batch {
				if err := p.Computed(i, l.upper[i]-shift); err != nil {
					t.Fatal(err)
				}
			}
		}
		return all, p.Missed()[0]
	}
	order, e := run(1, 0, false)
	if again, f := run(1, 0, true); !slices.Equal(order, again) || e.P95 != f.P95 {
		t.Error("the same calls give another plan")
	}
	if again, f := run(1, 0.25, false); !slices.Equal(order, again) || math.Abs(e.Mean-f.Mean) > 1e-6 {
		t.Errorf("a constant in the energies changes the plan: %d and %d evaluations, missed %g and %g", len(order), len(again), e.Mean, f.Mean)
	}
	if _, f := run(2, 0, false); e.P95 == f.P95 {
		t.Error("another stream gives the same draws")
	}
}
