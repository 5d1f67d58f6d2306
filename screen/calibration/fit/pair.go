package main

import (
	"fmt"
	"math"

	"torsieve/screen/calibration"
)

// A step is a pair of tiers and the columns that stand for them.
type step struct {
	lower, upper             string
	set                      string
	lowerColumn, upperColumn string
}

var pairs = []step{
	{"forcefield", "semiempirical", "fh2020", "forcefield_hartree", "gfn2_hartree"},
	{"semiempirical", "hf-3c", "fh2020", "gfn2_hartree", "hf3c_hartree"},
}

func (s step) pair(folder string) (p calibration.Pair, err error) {
	set, err := read(folder, s.set, s.upperColumn, s.lowerColumn)
	if err != nil {
		return p, err
	}
	p, err = fitPair(set)
	if err != nil {
		return p, fmt.Errorf("%s to %s: %w", s.lower, s.upper, err)
	}
	p.Lower, p.Upper = s.lower, s.upper
	return p, nil
}

// fitPair fits slope, spread and law for molecules whose reference is the upper
// tier and whose only method is the lower one.
func fitPair(set []molecule) (p calibration.Pair, err error) {
	fit := lawFit{set: set, slope: true, residual: func(m molecule, slope float64) []float64 { return minus(m, []float64{slope}) }}
	law, slope, spread, err := fit.minimum(calibration.Law{Scale: 0.3, Heavy: 0.4, Rotors: 1, Freedom: 1.5})
	return calibration.Pair{
		Slope: round(slope), SlopeSpread: round(spread), Residual: roundedLaw(law),
		Molecules: len(set), Conformers: conformers(set),
	}, err
}

// round keeps four significant digits: more are noise.
func round(x float64) float64 {
	if x == 0 {
		return 0
	}
	unit := math.Pow(10, math.Floor(math.Log10(math.Abs(x)))-3)
	// By division: a unit under 1 has no exact form, its inverse has.
	if unit < 1 {
		inverse := math.Round(1 / unit)
		return math.Round(x*inverse) / inverse
	}
	return math.Round(x/unit) * unit
}

func rounded(x []float64) []float64 {
	out := make([]float64, len(x))
	for k, v := range x {
		out[k] = round(v)
	}
	return out
}

func roundedLaw(l calibration.Law) calibration.Law {
	return calibration.Law{
		Scale: round(l.Scale), Heavy: round(l.Heavy), Rotors: round(l.Rotors),
		Disagreement: round(l.Disagreement), Freedom: round(l.Freedom),
	}
}
