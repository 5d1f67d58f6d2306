package relax

import (
	"math"

	"torsieve/internal/element"
	"torsieve/internal/geom"
)

// The first guess of the curvature along each internal coordinate. Stretches
// and bends: R. Lindh, A. Bernhardsson, G. Karlstrom, P.-A. Malmqvist, Chem.
// Phys. Lett. 1995, 241, 423. Torsions: T. H. Fischer, J. Almlof, J. Phys. Chem.
// 1992, 96, 9768, for a bond as a whole. Formulas and constants of both from
// memory. The constants of pyramids and places are ours, and so is the least
// torsion, five times the published one: with it ethane comes near the 0.02
// hartree/rad^2 that its barrier of 2.9 kcal/mol means, and fewer gradients are
// needed. A minimum does not depend on them, only the way there.
const (
	leastTorsion    = 0.008 // hartree/rad^2, of a bond
	pyramidConstant = 0.02  // hartree
	placeConstant   = 0.05  // hartree/bohr^2
)

func (s *scheme) stretchGuess(x []float64, i, j int) float64 {
	return stretchConstant * s.strength(x, i, j)
}

func (s *scheme) bendGuess(x []float64, i, j, k int) float64 {
	return bendConstant * s.strength(x, i, j) * s.strength(x, j, k)
}

// torsionGuess is the curvature of a turn about j and k, larger where the bond
// is short and where many atoms turn.
func (s *scheme) torsionGuess(x []float64, j, k int) float64 {
	r := geom.Distance(x, j, k)
	r0 := element.CovalentRadius(s.numbers[j]) + element.CovalentRadius(s.numbers[k])
	turning := float64(len(s.bonds.near[j]) + len(s.bonds.near[k]) - 2)
	return leastTorsion + 14*math.Pow(turning, 0.57)/math.Pow(r*r0, 4)*math.Exp(-2.85*(r-r0))
}

// strength is 1 for a bond of Lindh's reference length.
func (s *scheme) strength(x []float64, i, j int) float64 {
	return lindhStrength(s.numbers[i], s.numbers[j], geom.Distance(x, i, j))
}
