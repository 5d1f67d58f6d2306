package promotion

import (
	"math"
	"math/rand/v2"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat/distuv"

	"torsieve/internal/units"
)

// A design holds what the regression sees of every candidate: a one, the lower
// tier's energy, the descriptors,
//
//	y_i = mu + b e_i + w x_i + eps_i,  eps_i ~ N(0, s^2).
//
// Energies are relative to the lowest in units of kcal/mol and descriptors have
// mean 0 and deviation 1, so that the matrices are well scaled. A column that
// does not vary is zero, and its coefficient stays at the prior.
type design struct {
	columns int
	rows    []float64 // a row per candidate
}

func newDesign(candidates []Candidate) *design {
	d := &design{columns: 2 + len(candidates[0].Descriptors)}
	d.rows = make([]float64, d.columns*len(candidates))
	lowest := math.Inf(1)
	for _, c := range candidates {
		lowest = math.Min(lowest, c.Energy)
	}
	for i, c := range candidates {
		row := d.row(i)
		row[0], row[1] = 1, (c.Energy-lowest)/units.KcalPerMol
		copy(row[2:], c.Descriptors)
	}
	for k := 2; k < d.columns; k++ {
		d.standardise(k, len(candidates))
	}
	return d
}

func (d *design) row(i int) []float64 { return d.rows[i*d.columns : (i+1)*d.columns] }

func (d *design) standardise(column, n int) {
	var mean, square float64
	for i := range n {
		mean += d.row(i)[column] / float64(n)
	}
	for i := range n {
		v := d.row(i)[column] - mean
		square += v * v / float64(n)
	}
	deviation := math.Sqrt(square)
	for i := range n {
		v := d.row(i)[column] - mean
		if deviation <= 1e-12*(1+math.Abs(mean)) {
			d.row(i)[column] = 0
			continue
		}
		d.row(i)[column] = v / deviation
	}
}

// A fit is the posterior of the regression: a normal-inverse-gamma
// distribution. Given s, the coefficients are normal about mean with the
// covariance s^2 precision^-1; s^2 is freedom scale^2 / chi^2(freedom).
// Energies are kcal/mol above zero.
//
// Source: Gelman et al., Bayesian Data Analysis (3rd ed. 2013), sections 14.2
// and 14.8; the flat prior of the constant takes one degree of freedom.
type fit struct {
	design  *design
	zero    float64 // hartree: an energy of the higher tier
	mean    []float64
	upper   *mat.TriDense // precision = upper^T upper
	scale   float64
	freedom float64
	heavy   float64 // probability that the residuals have heavy tails
}

// newFit learns from the candidates in known, whose energies at the higher tier
// are given in hartree. With none the constant is not known: ok is false.
func newFit(d *design, p Prior, known []int, energies []float64) (f *fit, ok bool) {
	if len(known) == 0 {
		return nil, false
	}
	f = &fit{design: d, zero: energies[0]}
	n := d.columns
	before := make([]float64, n) // the prior's mean
	before[1] = p.Slope
	precision := mat.NewSymDense(n, nil)
	right := make([]float64, n)
	for k, v := range p.precisions(n) {
		precision.SetSym(k, k, v)
		right[k] = v * before[k]
	}
	for k, i := range known {
		row, y := d.row(i), (energies[k]-f.zero)/units.KcalPerMol
		precision.SymRankOne(precision, 1, mat.NewVecDense(n, row))
		for j, v := range row {
			right[j] += v * y
		}
	}
	var cholesky mat.Cholesky
	if !cholesky.Factorize(precision) {
		return nil, false
	}
	var mean mat.VecDense
	if err := cholesky.SolveVecTo(&mean, mat.NewVecDense(n, right)); err != nil {
		return nil, false
	}
	f.mean = mean.RawVector().Data
	f.upper = new(mat.TriDense)
	cholesky.UTo(f.upper)
	squares := p.Freedom * (p.Scale / units.KcalPerMol) * (p.Scale / units.KcalPerMol)
	var residuals []float64
	for k, i := range known {
		r := (energies[k]-f.zero)/units.KcalPerMol - dot(d.row(i), f.mean)
		squares += r * r
		residuals = append(residuals, r)
	}
	f.heavy = heavyTails(residuals)
	for k, v := range p.precisions(n) {
		squares += v * (f.mean[k] - before[k]) * (f.mean[k] - before[k])
	}
	f.freedom = p.Freedom + float64(len(known)-1)
	f.scale = math.Max(math.Sqrt(squares/f.freedom), smallestResidual/units.KcalPerMol)
	return f, true
}

// knownSlope stands for a slope without uncertainty, and weakRidge for a
// descriptor whose ridge is not set.
const (
	knownSlope = 1e-6
	weakRidge  = 0.3
)

// precisions are the prior's of the coefficients, in units of 1/s^2.
func (p Prior) precisions(n int) []float64 {
	slope := math.Max(p.SlopeSD, knownSlope) / (p.Scale / units.KcalPerMol)
	ridge := p.Ridge
	if ridge == 0 {
		ridge = weakRidge
	}
	out := make([]float64, n)
	out[1] = 1 / (slope * slope)
	for k := 2; k < n; k++ {
		out[k] = 1 / (ridge * ridge)
	}
	return out
}

// predict returns the centre and the scale of a candidate's Student t, in
// kcal/mol above zero.
func (f *fit) predict(i int) (centre, scale float64) {
	row := f.design.row(i)
	n := len(row)
	// upper^T v = row, so that |v|^2 = row precision^-1 row.
	v := make([]float64, n)
	var leverage float64
	for j := range n {
		sum := row[j]
		for k := range j {
			sum -= f.upper.At(k, j) * v[k]
		}
		v[j] = sum / f.upper.At(j, j)
		leverage += v[j] * v[j]
	}
	return dot(row, f.mean), f.scale * math.Sqrt(1+leverage)
}

// student is the distribution of a prediction about its centre in units of its
// scale.
func (f *fit) student() distuv.StudentsT {
	return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: f.freedom}
}

// draw takes coefficients and a residual's size from the posterior.
func (f *fit) draw(coefficients []float64, spread distuv.ChiSquared, normal *rand.Rand) (s float64) {
	s = math.Max(f.scale*math.Sqrt(f.freedom/spread.Rand()), smallestResidual/units.KcalPerMol)
	n := len(coefficients)
	for k := range coefficients {
		coefficients[k] = s * normal.NormFloat64()
	}
	// upper x = z, from the last row up: then cov(x) = precision^-1.
	for k := n - 1; k >= 0; k-- {
		for j := k + 1; j < n; j++ {
			coefficients[k] -= f.upper.At(k, j) * coefficients[j]
		}
		coefficients[k] /= f.upper.At(k, k)
	}
	for k := range coefficients {
		coefficients[k] += f.mean[k]
	}
	return s
}

func dot(a, b []float64) float64 {
	var sum float64
	for k := range a {
		sum += a[k] * b[k]
	}
	return sum
}
