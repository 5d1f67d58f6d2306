package main

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"

	"torsieve/screen/calibration"
)

// The embedded table is what the fit gives. Another processor may sum in another
// order: four digits are written, and a thousandth is allowed.
func TestTableIsTheFit(t *testing.T) {
	want, err := table(data)
	if err != nil {
		t.Fatal(err)
	}
	got, err := calibration.Load()
	if err != nil {
		t.Fatal(err)
	}
	for k, w := range want.Combinations {
		g := got.Combinations[k]
		close := slices.EqualFunc(g.Coefficients, w.Coefficients, near3) && sameLaw(g.Residual, w.Residual)
		for i := range w.Covariance {
			close = close && slices.EqualFunc(g.Covariance[i], w.Covariance[i], near3)
		}
		for i := range w.CrossValidation {
			close = close && near3(g.CrossValidation[i].MAD, w.CrossValidation[i].MAD) && near3(g.CrossValidation[i].Rho, w.CrossValidation[i].Rho)
		}
		if !close || g.Final != w.Final || g.Molecules != w.Molecules {
			t.Errorf("embedded %+v\nthe fit gives %+v\nrun: %s", g, w, command)
		}
	}
	for k, w := range want.Pairs {
		g := got.Pairs[k]
		if !near3(g.Slope, w.Slope) || !near3(g.SlopeSpread, w.SlopeSpread) || !sameLaw(g.Residual, w.Residual) || g.Molecules != w.Molecules {
			t.Errorf("embedded %+v\nthe fit gives %+v\nrun: %s", g, w, command)
		}
	}
}

func near3(a, b float64) bool { return math.Abs(a-b) <= 1e-3*(math.Abs(a)+math.Abs(b)) }

func sameLaw(a, b calibration.Law) bool {
	return near3(a.Scale, b.Scale) && math.Abs(a.Heavy-b.Heavy) < 2e-3 && math.Abs(a.Rotors-b.Rotors) < 2e-3 &&
		near3(a.Disagreement, b.Disagreement) && near3(a.Freedom, b.Freedom)
}

// The published figures of GFN2-xTB on the whole of fh2020's 150 molecules, as
// the data's own scoring program has them: MAD 0.49, Spearman 0.72; HF-3c and
// GFN2-xTB on the torsion scans.
func TestScoresOfPublishedColumns(t *testing.T) {
	for _, tc := range []struct {
		set, column string
		mad, rho    float64
	}{
		{"fh2020", "gfn2_hartree", 0.49, 0.72},
		{"fh2020", "b973c_kcal_mol", 0.21, 0.90},
		{"fh2020", "pbeh3c_kcal_mol", 0.25, 0.88},
	} {
		var s []scored
		for _, m := range mustRead(t, tc.set, reference, tc.column) {
			s = append(s, score(m, []float64{1}))
		}
		got := summary(tc.set, tc.column, s)
		if math.Abs(got.MAD-tc.mad) > 0.005 || math.Abs(got.Rho-tc.rho) > 0.005 {
			t.Errorf("%s: MAD %.4f, rho %.4f, published %.2f and %.2f", tc.column, got.MAD, got.Rho, tc.mad, tc.rho)
		}
	}
}

// HF-3c's squared correlation with the reference over ten conformers, as computed
// with Psi4 1.3.2 and simple-dftd3 1.6.0 for the same geometries, printed to two
// digits: the column that torsieve computed says the same.
func TestHF3cColumn(t *testing.T) {
	printed := map[string]float64{"pdb_1f06": 0.81, "csd_PNPAUR": 0.94, "pdb_1iy7": 0.53, "csd_CIBPOS": 0.00, "csd_FUDVUV": 0.40}
	found := 0
	for _, m := range mustRead(t, "fh2020", reference, "hf3c_hartree") {
		want, ok := printed[m.id]
		if !ok {
			continue
		}
		found++
		r := inner(m.reference, m.methods[0])
		r2 := r * r / inner(m.reference, m.reference) / inner(m.methods[0], m.methods[0])
		if math.Abs(r2-want) > 0.005 {
			t.Errorf("%s: R2 %.4f, want %.2f", m.id, r2, want)
		}
	}
	if found != len(printed) {
		t.Errorf("%d of %d molecules are there", found, len(printed))
	}
}

// The combination beats each of its tiers on molecules that it has not seen, by
// mean deviation on every set, and its rank correlation is no worse than that of
// GFN2-xTB.
func TestCombinationBeatsItsTiers(t *testing.T) {
	c, ok, err := calibration.For("hf-3c")
	if err != nil || !ok {
		t.Fatal(ok, err)
	}
	bySet := map[string]map[string]calibration.Score{}
	for _, s := range c.CrossValidation {
		if bySet[s.Set] == nil {
			bySet[s.Set] = map[string]calibration.Score{}
		}
		bySet[s.Set][s.Of] = s
	}
	for set, s := range bySet {
		whole := s["combination"]
		t.Logf("%s: %+v", set, s)
		if whole.MAD >= s["hf"].MAD || whole.MAD >= s["semiempirical"].MAD || whole.Rho < s["semiempirical"].Rho {
			t.Errorf("%s: combination %+v, tiers %+v and %+v", set, whole, s["hf"], s["semiempirical"])
		}
	}
}

// madeSet draws molecules from the model: reference = c1 method1 + c2 method2 +
// residual of a law's size.
func madeSet(n int, coefficients []float64, law calibration.Law) []molecule {
	source := rand.New(rand.NewPCG(11, 12))
	var set []molecule
	for range n {
		m := molecule{heavy: 10 + source.IntN(30), rotors: 1 + source.IntN(10), methods: make([][]float64, len(coefficients))}
		spread := math.Sqrt(law.Freedom / distuv.ChiSquared{K: law.Freedom, Src: source}.Rand())
		for k := range m.methods {
			m.methods[k] = make([]float64, 10)
			for i := range 10 {
				m.methods[k][i] = 2 * source.NormFloat64()
			}
			centre(m.methods[k])
		}
		s := size(law, m)
		m.reference = make([]float64, 10)
		for i := range 10 {
			m.reference[i] = s * spread * source.NormFloat64()
			for k, c := range coefficients {
				m.reference[i] += c * m.methods[k][i]
			}
		}
		centre(m.reference)
		set = append(set, m)
	}
	return set
}

// The fit finds what molecules were made from, within four of its own standard
// errors; the law's scale and freedom within a quarter (400 molecules).
func TestFitFindsWhatWasPutIn(t *testing.T) {
	law := calibration.Law{Scale: 0.3, Heavy: 0.3, Rotors: 1.2, Disagreement: 0.2, Freedom: 2}
	want := []float64{0.6, 0.3}
	sets := [][]molecule{madeSet(400, want, law)}
	c, err := fitCombination(sets, false)
	if err != nil {
		t.Fatal(err)
	}
	covariance := c.covariance(sets)
	for k, w := range want {
		if e := math.Sqrt(covariance[k][k]); math.Abs(c.coefficients[k]-w) > 4*e || e > 0.02 {
			t.Errorf("coefficient %.4f with error %.4f, want %.4f", c.coefficients[k], e, w)
		}
	}
	got := c.laws[0]
	m := molecule{heavy: 25, rotors: 5, methods: sets[0][0].methods}
	if r := size(got, m) / size(law, m); r < 0.75 || r > 1.33 || math.Abs(got.Freedom/2-1) > 0.25 || math.Abs(got.Rotors-1.2) > 0.3 {
		t.Errorf("law %+v, want %+v (size %.2f of it)", got, law, r)
	}
}

// The density without a slope's spread is the limit of the one with it, and is
// that of a Student t: for two conformers, one dimension.
func TestMinusLog(t *testing.T) {
	r, e := []float64{0.3, -0.3}, []float64{1, -1}
	a, b := minusLog(r, nil, 0.4, 0, 3), minusLog(r, e, 0.4, 1e-9, 3)
	if math.Abs(a-b) > 1e-12 {
		t.Errorf("%g without, %g with a spread of nothing", a, b)
	}
	student := distuv.StudentsT{Mu: 0, Sigma: 0.4, Nu: 3}
	// The one coordinate of r is (r1-r2)/sqrt 2; the constant left out is ln(pi)/2.
	if want := -student.LogProb(0.6/math.Sqrt2) - math.Log(math.Pi)/2; math.Abs(a-want) > 1e-12 {
		t.Errorf("%g, want %g", a, want)
	}
}

func TestReadRefuses(t *testing.T) {
	if _, err := read(data, "fh2020", "no_such_column"); err == nil {
		t.Error("a column that is not there is read")
	}
	if _, err := read(data, "no_such_set", reference); err == nil {
		t.Error("a set that is not there is read")
	}
}
