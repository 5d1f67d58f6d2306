package main

import (
	"fmt"
	"slices"

	"gonum.org/v1/gonum/mat"

	"torsieve/screen/calibration"
)

// A final names a combination and the columns that it is made of.
type final struct {
	method string
	tiers  []string
	alone  bool     // the first tier counts alone, the others say how far to trust it
	sets   []source // the first one's residual law is kept
	scored []source // sets that take no part in the fit
}

// A source is a set with its columns, in the order of the tiers.
type source struct {
	set     string
	columns []string
}

const reference = "e_ref_kcal_mol"

var finals = []final{
	{
		method: "hf-3c", tiers: []string{"hf", "semiempirical"},
		sets: []source{
			{"fh2020", []string{"hf3c_hartree", "gfn2_hartree"}},
			{"torsions59", []string{"hf3c_kcal_mol", "gfn2_hartree"}},
		},
		scored: []source{{"gmtkn55", []string{"hf3c_hartree", "gfn2_hartree"}}},
	},
	{
		// Fitted, the force field gets a tenth; that lowers the deviation by 1 % and
		// the rank correlation by 3 % on molecules that were left out.
		method: "semiempirical", tiers: []string{"semiempirical", "forcefield"}, alone: true,
		sets: []source{{"fh2020", []string{"gfn2_hartree", "forcefield_hartree"}}},
	},
}

func (f final) read(folder string, sources []source) ([][]molecule, error) {
	var sets [][]molecule
	for _, s := range sources {
		set, err := read(folder, s.set, reference, s.columns...)
		if err != nil {
			return nil, err
		}
		sets = append(sets, set)
	}
	return sets, nil
}

func (f final) combination(folder string) (c calibration.Combination, err error) {
	sets, err := f.read(folder, f.sets)
	if err != nil {
		return c, err
	}
	fitted, err := fitCombination(sets, f.alone)
	if err != nil {
		return c, fmt.Errorf("%s: %w", f.method, err)
	}
	c = calibration.Combination{
		Final: f.method, Tiers: f.tiers, Coefficients: rounded(fitted.coefficients),
		Residual: roundedLaw(fitted.laws[0]),
	}
	for _, row := range fitted.covariance(sets) {
		if f.alone {
			clear(row) // nothing was fitted
		}
		c.Covariance = append(c.Covariance, rounded(row))
	}
	for _, set := range sets {
		c.Molecules += len(set)
		c.Conformers += conformers(set)
	}
	c.CrossValidation, err = f.validate(folder, sets, fitted)
	return c, err
}

// combined are coefficients that all sets share, and the law of the residuals of
// each set.
type combined struct {
	coefficients []float64
	laws         []calibration.Law
}

// fitCombination maximises the likelihood in turn over the laws and over the
// coefficients, until the latter stand still.
func fitCombination(sets [][]molecule, alone bool) (combined, error) {
	n := len(sets[0][0].methods)
	c := combined{coefficients: make([]float64, n), laws: make([]calibration.Law, len(sets))}
	for k := range c.coefficients {
		c.coefficients[k] = 1 / float64(n)
	}
	if alone {
		clear(c.coefficients)
		c.coefficients[0] = 1
	}
	for k := range c.laws {
		c.laws[k] = calibration.Law{Scale: 0.3, Heavy: 0.4, Rotors: 1, Freedom: 1.5}
	}
	for range 12 {
		for k, set := range sets {
			fit := lawFit{set: set, disagreement: n > 1, residual: func(m molecule, _ float64) []float64 { return minus(m, c.coefficients) }}
			law, _, _, err := fit.minimum(c.laws[k])
			if err != nil {
				return c, err
			}
			c.laws[k] = law
		}
		if alone {
			break
		}
		before := slices.Clone(c.coefficients)
		for range 20 {
			c.reweigh(sets)
		}
		if near(before, c.coefficients) {
			break
		}
	}
	return c, nil
}

func near(a, b []float64) bool {
	for k := range a {
		if d := a[k] - b[k]; d > 1e-4 || d < -1e-4 {
			return false
		}
	}
	return true
}

// weight of a molecule in the least squares that have the likelihood's maximum
// as their fixed point: (freedom + n-1) / (freedom s^2 + residuals squared).
func (c combined) weight(set int, m molecule) float64 {
	s := size(c.laws[set], m)
	var squares float64
	for _, r := range minus(m, c.coefficients) {
		squares += r * r
	}
	nu := c.laws[set].Freedom
	return (nu + float64(len(m.reference)-1)) / (nu*s*s + squares)
}

// normal returns the matrix and the right side of the weighted least squares.
func (c combined) normal(sets [][]molecule) (*mat.SymDense, *mat.VecDense) {
	n := len(c.coefficients)
	matrix, right := mat.NewSymDense(n, nil), mat.NewVecDense(n, nil)
	for k, set := range sets {
		for _, m := range set {
			w := c.weight(k, m)
			for a := range n {
				right.SetVec(a, right.AtVec(a)+w*inner(m.methods[a], m.reference))
				for b := a; b < n; b++ {
					matrix.SetSym(a, b, matrix.At(a, b)+w*inner(m.methods[a], m.methods[b]))
				}
			}
		}
	}
	return matrix, right
}

func (c *combined) reweigh(sets [][]molecule) {
	matrix, right := c.normal(sets)
	var cholesky mat.Cholesky
	var solution mat.VecDense
	if !cholesky.Factorize(matrix) || cholesky.SolveVecTo(&solution, right) != nil {
		return // methods that say the same: the coefficients stay
	}
	copy(c.coefficients, solution.RawVector().Data)
}

// covariance is that of estimates from independent molecules whose residuals
// need not have the law's shape: H^-1 (sum of score score^T) H^-1.
//
// Source: White, Econometrica 1982, 50, 1 (the sandwich estimate).
func (c combined) covariance(sets [][]molecule) [][]float64 {
	n := len(c.coefficients)
	matrix, _ := c.normal(sets)
	scores := mat.NewSymDense(n, nil)
	for k, set := range sets {
		for _, m := range set {
			w, r := c.weight(k, m), minus(m, c.coefficients)
			score := make([]float64, n)
			for a := range n {
				score[a] = w * inner(m.methods[a], r)
			}
			scores.SymRankOne(scores, 1, mat.NewVecDense(n, score))
		}
	}
	var inverse, half, whole mat.Dense
	if err := inverse.Inverse(matrix); err != nil {
		panic("fit: the tiers' energies say the same: " + err.Error())
	}
	half.Mul(&inverse, scores)
	whole.Mul(&half, &inverse)
	out := make([][]float64, n)
	for a := range n {
		out[a] = slices.Clone(whole.RawRowView(a))
	}
	return out
}

func inner(a, b []float64) float64 {
	var sum float64
	for i := range a {
		sum += a[i] * b[i]
	}
	return sum
}
