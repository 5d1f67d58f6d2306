package screen

import (
	"math"
	"slices"

	"torsieve/internal/geom"
	"torsieve/molecule"
)

// endTurn is well off the top of a threefold barrier, which is 60 degrees
// from its foot, and well inside the valley about it.
const endTurn = 20 * math.Pi / 180

// offSaddle returns x with every end turned a little that has one staggered state
// (CH3, NH3+, CF3, C(CH3)3). Two tiers may disagree on which way such an end
// stands; symmetry then holds a relaxation on the top of the barrier, where the
// gradient is zero too: N-methylacetamide ends 1.15 kcal/mol too high in GFN2-xTB
// when it is started from the force field's minimum as it stands, and a
// tert-butyloxadiazole 0.2. In internal coordinates the way back costs next to
// nothing.
func offSaddle(m *molecule.Molecule, x []float64) []float64 {
	out := slices.Clone(x)
	for _, r := range m.Rotors() {
		if r.Idle {
			geom.RotateAbout(out, r.J, r.K, r.Moving, endTurn)
		}
	}
	return out
}
