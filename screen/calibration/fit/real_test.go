package main

import (
	"math"
	"strconv"
	"testing"

	"torsieve/internal/units"
	"torsieve/screen/calibration"
	"torsieve/screen/ensemble"
	"torsieve/screen/promotion"
)

const (
	data        = "../../../testdata/reference/energies"
	temperature = 298.15
)

func mustRead(t *testing.T, set, reference string, methods ...string) []molecule {
	t.Helper()
	m, err := read(data, set, reference, methods...)
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// populations of the reference, all copies alike.
func populations(m molecule) []float64 {
	return ensemble.Weigh(statesOf(m.reference), temperature).Populations
}

func statesOf(kcal []float64) []ensemble.State {
	out := make([]ensemble.State, len(kcal))
	for i, e := range kcal {
		out[i] = ensemble.State{Energy: e * units.KcalPerMol, Copies: 1}
	}
	return out
}

// A promoted molecule is a plan from the first method to the reference.
type promoted struct {
	p95    float64 // of the missed weight, as reported
	missed float64 // that was
	end    promotion.End
}

// promote runs a plan with so many evaluations, 0 as many as it asks for.
func promote(t *testing.T, m molecule, p calibration.Pair, budget int, seed uint64) promoted {
	t.Helper()
	var candidates []promotion.Candidate
	for _, e := range m.methods[0] {
		candidates = append(candidates, promotion.Candidate{Energy: e * units.KcalPerMol, Copies: 1})
	}
	s := promotion.Defaults()
	s.Budget, s.Seed = budget, [2]uint64{1, seed}
	plan, err := promotion.New(candidates, p.Prior(m.heavy, m.rotors), s)
	if err != nil {
		t.Fatal(err)
	}
	left := populations(m)
	for batch := plan.Next(); len(batch) > 0; batch = plan.Next() {
		for _, i := range batch {
			if err := plan.Computed(i, m.reference[i]*units.KcalPerMol); err != nil {
				t.Fatal(err)
			}
			left[i] = 0
		}
	}
	out := promoted{p95: plan.Missed()[0].P95, end: plan.End()}
	for _, w := range left {
		out.missed += w
	}
	return out
}

// foldPairs fits a pair without each fold in turn.
func foldPairs(t *testing.T, set []molecule) (pairs [folds]calibration.Pair) {
	t.Helper()
	for fold := range pairs {
		var err error
		if pairs[fold], err = fitPair(without([][]molecule{set}, fold)[0]); err != nil {
			t.Fatal(err)
		}
	}
	return pairs
}

// promoteAll promotes every molecule of more than budget conformers, with a
// prior fitted to molecules of other folds.
func promoteAll(t *testing.T, set []molecule, pairs [folds]calibration.Pair, budget int) (out []promoted) {
	t.Helper()
	for i, m := range set {
		if len(m.reference) > max(budget, 6) {
			out = append(out, promote(t, m, pairs[i%folds], budget, uint64(i)))
		}
	}
	return out
}

// DLPNO-CCSD(T) as the upper tier, published columns as the lower one: the
// reported 95th percentile of the missed weight holds in at least 93 % of cases,
// looked at after five, six, seven and eight evaluations of ten. (A single stage
// has a standard error of 2 %; with two conformers left it holds less often
// than with five.)
func TestMissedWeightHoldsOnRealMolecules(t *testing.T) {
	for _, lower := range []string{"gfn2_kcal_mol", "mmff94_kcal_mol", "uff_kcal_mol", "gfnff_kcal_mol", "pbeh3c_kcal_mol"} {
		set := mustRead(t, "fh2020", reference, lower)
		if lower == "mmff94_kcal_mol" || lower == "uff_kcal_mol" {
			set = sound(t, set)
		}
		pairs := foldPairs(t, set)
		var held, all float64
		for _, budget := range []int{5, 6, 7, 8} {
			var heldHere float64
			cases := promoteAll(t, set, pairs, budget)
			for _, c := range cases {
				if c.missed <= c.p95 {
					heldHere++
				}
			}
			t.Logf("%s, %d evaluations: held in %.1f %% of %d molecules", lower, budget, 100*heldHere/float64(len(cases)), len(cases))
			held, all = held+heldHere, all+float64(len(cases))
		}
		if held/all < 0.93 {
			t.Errorf("%s: the 95th percentile held in %.1f %% of %g cases, want at least 93", lower, 100*held/all, all)
		}
	}
}

// Left to itself, with the default tolerance of 2 %, the rule keeps what it
// promises: it misses 2 % or less in all but a few molecules, most of which it
// has computed whole, as there are but ten conformers.
func TestRuleOnRealMolecules(t *testing.T) {
	for _, lower := range []string{"gfn2_kcal_mol", "pbeh3c_kcal_mol"} {
		over, early, worst := 0, 0, 0.0
		set := mustRead(t, "fh2020", reference, lower)
		cases := promoteAll(t, set, foldPairs(t, set), 0)
		for _, c := range cases {
			if c.end == promotion.Enough {
				early++
			}
			if c.missed > 0.02 {
				over++
			}
			worst = math.Max(worst, c.missed)
		}
		t.Logf("%s: %d of %d molecules stopped early, %d missed more than 2 %%, at most %.1f %%", lower, early, len(cases), over, 100*worst)
		if share := float64(over) / float64(len(cases)); share > 0.05 {
			t.Errorf("%s: %.1f %% of the molecules missed more than the tolerance", lower, 100*share)
		}
	}
}

// sound keeps the molecules whose published force-field energies were made with
// the right bonds: the column ffok.
func sound(t *testing.T, set []molecule) []molecule {
	t.Helper()
	records, err := readAll(data + "/fh2020.csv.gz")
	if err != nil {
		t.Fatal(err)
	}
	ok := map[string]bool{}
	for _, r := range records[1:] {
		ok[r[0]] = r[4] == "1"
	}
	var out []molecule
	for _, m := range set {
		if ok[m.id] {
			out = append(out, m)
		}
	}
	return out
}

// The bars of populations hold the reference's in nine of ten cases: fits to
// other molecules, energies of the combination, the law's scatter, errors that
// are independent or shared.
func TestBarsHoldReferencePopulations(t *testing.T) {
	near := distances(t)
	for _, f := range finals {
		sets, err := f.read(data, f.sets)
		if err != nil {
			t.Fatal(err)
		}
		for _, shared := range []bool{false, true} {
			var n tally
			for fold := range folds {
				fitted, err := fitCombination(without(sets, fold), f.alone)
				if err != nil {
					t.Fatal(err)
				}
				c := calibration.Combination{Tiers: f.tiers, Coefficients: fitted.coefficients, Residual: fitted.laws[0]}
				for i, m := range sets[0] {
					if i%folds != fold {
						continue
					}
					var d [][]float64
					if shared {
						d = near[m.id]
					}
					n.add(populations(m), bars(t, c, m, d, uint64(i)))
				}
			}
			t.Logf("%s, shared errors %t: bars hold %.1f %% of %g populations, %.1f %% of the %g that may pass 5 %%; mean width %.3f",
				f.method, shared, 100*n.held/n.all, n.all, 100*n.heldLarge/n.large, n.large, n.width/n.all)
			if share := n.heldLarge / n.large; math.Abs(share-0.9) > 0.05 {
				t.Errorf("%s, shared errors %t: bars hold %.1f %% of the populations, want 85 to 95", f.method, shared, 100*share)
			}
		}
	}
}

// A tally counts populations inside their bars; large ones are those whose bar
// reaches above 5 %.
type tally struct{ held, all, heldLarge, large, width float64 }

func (n *tally) add(populations []float64, bars []ensemble.Bar) {
	for k, p := range populations {
		b := bars[k]
		inside := p >= b.Low && p <= b.High
		n.all++
		n.width += b.High - b.Low
		if inside {
			n.held++
		}
		if b.High > 0.05 {
			n.large++
			if inside {
				n.heldLarge++
			}
		}
	}
}

// distances reads the RMSD of fh2020 in bohr, by molecule, of the conformers
// that have a reference energy, in their order.
func distances(t *testing.T) map[string][][]float64 {
	t.Helper()
	place := map[string]int{}
	out := map[string][][]float64{}
	records, err := readAll(data + "/fh2020.csv.gz")
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range records[1:] {
		if r[13] == "" || r[14] == "" && r[15] == "" {
			continue
		}
		place[r[0]+" "+r[1]] = len(out[r[0]])
		out[r[0]] = append(out[r[0]], nil)
	}
	for id, rows := range out {
		for i := range rows {
			out[id][i] = make([]float64, len(rows))
		}
	}
	if records, err = readAll(data + "/fh2020-rmsd.csv.gz"); err != nil {
		t.Fatal(err)
	}
	for _, r := range records[1:] {
		i, known := place[r[0]+" "+r[1]]
		j, alsoKnown := place[r[0]+" "+r[2]]
		if !known || !alsoKnown {
			continue
		}
		rmsd, err := strconv.ParseFloat(r[3], 64)
		if err != nil {
			t.Fatal(err)
		}
		out[r[0]][i][j], out[r[0]][j][i] = rmsd*units.Angstrom, rmsd*units.Angstrom
	}
	return out
}

func bars(t *testing.T, c calibration.Combination, m molecule, distances [][]float64, seed uint64) []ensemble.Bar {
	t.Helper()
	var tiers [][]float64
	for _, column := range m.methods {
		energies := make([]float64, len(column))
		for i, e := range column {
			energies[i] = e * units.KcalPerMol
		}
		tiers = append(tiers, energies)
	}
	energies, err := c.Energies(tiers, nil)
	if err != nil {
		t.Fatal(err)
	}
	states := make([]ensemble.State, len(energies))
	for i, e := range energies {
		states[i] = ensemble.State{Energy: e, Copies: 1}
	}
	doubt := ensemble.Doubt{Scatter: c.Scatter(m.heavy, m.rotors, tiers), Distances: distances}
	var out []ensemble.Bar
	for _, p := range ensemble.Imagine(states, doubt, [2]uint64{7, seed}).At(temperature, nil).Populations() {
		out = append(out, p.Bar)
	}
	return out
}
