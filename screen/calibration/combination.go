package calibration

import (
	"fmt"
	"math"
	"slices"

	"torsieve/screen/ensemble"
)

// A Combination is a final energy made of the gas-phase energies of several
// tiers, relative to one conformer:
//
//	E_i = sum_t Coefficients[t] (E_ti - E_t0) + (dG_solv,i - dG_solv,0).
//
// The solvation is added whole: how far it is from the truth is not in Residual.
type Combination struct {
	Final           string      // method of the last tier, as the options name it
	Tiers           []string    // the last tier first
	Coefficients    []float64   // as Tiers
	Covariance      [][]float64 // of the coefficients, from molecule to molecule
	Residual        Law         // against the reference, on minima of drug-like molecules
	Molecules       int         // that were fitted
	Conformers      int
	CrossValidation []Score `json:"cross_validation"`
}

// A Score says how a fit did on molecules that it had not seen.
type Score struct {
	Set       string
	Molecules int
	Of        string  // what was scored: the combination, or a tier alone
	MAD       float64 `json:"mad_kcal_mol"` // mean over molecules, energies relative to the molecule's mean
	Rho       float64 // median over molecules of Spearman's correlation
}

func (c Combination) check() error {
	n := len(c.Tiers)
	if n == 0 || len(c.Coefficients) != n || len(c.Covariance) != n {
		return fmt.Errorf("%d tiers, %d coefficients, %d rows of covariance", n, len(c.Coefficients), len(c.Covariance))
	}
	for _, row := range c.Covariance {
		if len(row) != n {
			return fmt.Errorf("%d tiers, a row of covariance has %d", n, len(row))
		}
	}
	return c.Residual.check()
}

// For returns the combination for a final method; ok is false where none could
// be fitted.
func For(final string) (c Combination, ok bool, err error) {
	t, err := Load()
	if err != nil {
		return c, false, err
	}
	k := slices.IndexFunc(t.Combinations, func(c Combination) bool { return c.Final == final })
	if k < 0 {
		return c, false, nil
	}
	return t.Combinations[k], true, nil
}

// Energies returns the combined energy of each conformer in hartree, relative to
// the first one. tiers holds the tiers' gas-phase energies in the order of
// Tiers, one per conformer; solvation the free energies of solvation, or nil.
//
// Panics if the slices do not fit. An energy that is not finite is an error: a
// conformer that lacks a tier has no combined energy.
func (c Combination) Energies(tiers [][]float64, solvation []float64) ([]float64, error) {
	if len(tiers) != len(c.Coefficients) {
		panic(fmt.Sprintf("calibration: energies of %d tiers, want %d", len(tiers), len(c.Coefficients)))
	}
	out := make([]float64, len(tiers[0]))
	for k, energies := range tiers {
		if err := add(out, energies, c.Coefficients[k], c.Tiers[k]); err != nil {
			return nil, err
		}
	}
	if solvation == nil {
		return out, nil
	}
	return out, add(out, solvation, 1, "solvation")
}

func add(out, energies []float64, factor float64, what string) error {
	if len(energies) != len(out) {
		panic(fmt.Sprintf("calibration: %s: %d energies, want %d", what, len(energies), len(out)))
	}
	for i, e := range energies {
		if math.IsNaN(e) || math.IsInf(e, 0) {
			return fmt.Errorf("conformer %d has no energy of %s: nothing to combine", i+1, what)
		}
		out[i] += factor * (e - energies[0])
	}
	return nil
}

// CoefficientError returns the standard error, in the unit of the differences,
// that the coefficients' own uncertainty gives a combined energy; differences are
// those of the tiers' energies to the first conformer's, in the order of Tiers.
func (c Combination) CoefficientError(differences []float64) float64 {
	var square float64
	for a, row := range c.Covariance {
		for b, v := range row {
			square += differences[a] * v * differences[b]
		}
	}
	return math.Sqrt(math.Max(square, 0))
}

// Scatter returns how far combined energies of a molecule lie from the
// reference. The first two tiers are asked by how much they disagree.
func (c Combination) Scatter(heavy, rotors int, tiers [][]float64) ensemble.Scatter {
	var d float64
	if len(tiers) > 1 {
		d = Disagreement(tiers[0], tiers[1])
	}
	return c.Residual.Scatter(heavy, rotors, d)
}
