package promotion

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"

	"torsieve/internal/units"
)

// With a prior that knows nothing the posterior is least squares: offset, slope
// and the prediction's scale as gonum's regression and the textbook formula give
// them (Gelman et al. 2013, eq. 14.7).
func TestFitIsLeastSquares(t *testing.T) {
	x := []float64{0, 0.4, 1.1, 2.3, 3.2, 4.8}
	y := []float64{0.3, 0.2, 1.6, 2.0, 3.9, 4.1}
	var candidates []Candidate
	var known []int
	var energies []float64
	for i := range x {
		candidates = append(candidates, Candidate{Energy: x[i] * units.KcalPerMol, Copies: 1})
		known, energies = append(known, i), append(energies, y[i]*units.KcalPerMol)
	}
	candidates = append(candidates, Candidate{Energy: 6 * units.KcalPerMol, Copies: 1})
	vague := Prior{Scale: 1e-6 * units.KcalPerMol, Freedom: 1e-9, Slope: 7, SlopeSD: 1e3}
	f, ok := newFit(newDesign(candidates), vague, known, energies)
	if !ok {
		t.Fatal("no fit")
	}
	offset, slope := stat.LinearRegression(x, y, nil, false)
	if math.Abs(f.mean[1]-slope) > 1e-6 || math.Abs(f.mean[0]+y[0]-offset) > 1e-6 {
		t.Errorf("offset %g, slope %g, want %g and %g", f.mean[0]+y[0], f.mean[1], offset, slope)
	}
	var squares, spread float64
	for i := range x {
		squares += math.Pow(y[i]-offset-slope*x[i], 2)
		spread += math.Pow(x[i]-stat.Mean(x, nil), 2)
	}
	n := float64(len(x))
	// The vague slope takes no degree of freedom: n-1, not n-2.
	want := math.Sqrt(squares/(n-1)) * math.Sqrt(1+1/n+math.Pow(6-stat.Mean(x, nil), 2)/spread)
	centre, scale := f.predict(6)
	if math.Abs(centre+y[0]-offset-6*slope) > 1e-6 || math.Abs(scale-want) > 1e-6 {
		t.Errorf("prediction %g with scale %g, want %g and %g", centre+y[0], scale, offset+6*slope, want)
	}
}

// Draws of coefficients and residuals have the Student t that predict states:
// median and quartiles within four standard errors of 20000 draws.
func TestDrawsMatchPrediction(t *testing.T) {
	l := maker{prior: quantum, least: 30, most: 30, span: 5}.ligand(rand.New(rand.NewPCG(5, 6)))
	d := newDesign(l.candidates)
	f, ok := newFit(d, quantum, []int{1, 5, 9, 13, 20, 22}, []float64{l.upper[1], l.upper[5], l.upper[9], l.upper[13], l.upper[20], l.upper[22]})
	if !ok {
		t.Fatal("no fit")
	}
	source := rand.New(rand.NewPCG(7, 8))
	spread := distuv.ChiSquared{K: f.freedom, Src: source}
	centre, scale := f.predict(2)
	coefficients := make([]float64, d.columns)
	const n = 20000
	var below [3]float64
	for range n {
		s := f.draw(coefficients, spread, source)
		y := dot(d.row(2), coefficients) + s*source.NormFloat64()
		for k, p := range []float64{0.25, 0.5, 0.75} {
			if (y-centre)/scale < f.student().Quantile(p) {
				below[k]++
			}
		}
	}
	for k, p := range []float64{0.25, 0.5, 0.75} {
		if got := below[k] / n; math.Abs(got-p) > 4*math.Sqrt(p*(1-p)/n) {
			t.Errorf("share of draws under the quantile of %g: %.4f", p, got)
		}
	}
}

// A descriptor that explains the residual is learnt, and predictions sharpen.
func TestDescriptorIsLearnt(t *testing.T) {
	source := rand.New(rand.NewPCG(9, 10))
	prior := quantum
	prior.Ridge = 3
	var plain, told []Candidate
	var known []int
	var energies []float64
	for i := range 40 {
		c := Candidate{Energy: 5 * source.Float64() * units.KcalPerMol, Copies: 1}
		bonds := float64(source.IntN(3))
		plain = append(plain, c)
		c.Descriptors = []float64{bonds, 4} // the second is the same for all
		told = append(told, c)
		if i < 12 {
			known = append(known, i)
			energies = append(energies, c.Energy-1.5*bonds*units.KcalPerMol+0.05*source.NormFloat64()*units.KcalPerMol)
		}
	}
	without, _ := newFit(newDesign(plain), prior, known, energies)
	with, _ := newFit(newDesign(told), prior, known, energies)
	_, wide := without.predict(30)
	_, sharp := with.predict(30)
	if sharp > wide/3 || with.mean[3] != 0 {
		t.Errorf("scale %.3f with the descriptor, %.3f without; coefficient of a constant one %g", sharp, wide, with.mean[3])
	}
}
