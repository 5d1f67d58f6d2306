package calibration

import (
	"math"
	"slices"

	"torsieve/internal/units"
	"torsieve/screen/promotion"
)

// A Pair says how the energies of one tier scatter about those of the tier
// below, within a molecule.
type Pair struct {
	Lower, Upper string
	Slope        float64 // of the upper on the lower
	SlopeSpread  float64 `json:"slope_spread_per_kcal_mol"` // its deviation between molecules, over the molecule's residual
	Residual     Law     // of the upper about the slope times the lower; knows no disagreement
	Molecules    int
	Conformers   int
}

// Between returns the pair of two tiers; ok is false where none could be fitted.
func Between(lower, upper string) (p Pair, ok bool, err error) {
	t, err := Load()
	if err != nil {
		return p, false, err
	}
	k := slices.IndexFunc(t.Pairs, func(p Pair) bool { return p.Lower == lower && p.Upper == upper })
	if k < 0 {
		return p, false, nil
	}
	return t.Pairs[k], true, nil
}

// Prior returns what promotion should believe of a molecule before it has seen
// any of its energies.
func (p Pair) Prior(heavy, rotors int) promotion.Prior {
	size := p.Residual.Size(heavy, rotors, 0)
	return promotion.Prior{
		Scale:   size * units.KcalPerMol,
		Freedom: p.Residual.Freedom,
		Slope:   p.Slope,
		SlopeSD: p.SlopeSpread * size,
	}
}

// Combined returns the pair of the lower tier and a combination of both, upper
// times the upper tier's energy plus lower times the lower one's: what promotion
// should ask for where the combination is the final energy.
func (p Pair) Combined(upper, lower float64) Pair {
	p.Slope = upper*p.Slope + lower
	p.Residual.Scale *= math.Abs(upper) // the spread of slopes is in units of the residual
	return p
}
