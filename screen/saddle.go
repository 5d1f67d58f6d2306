package screen

import (
	"math"
	"slices"

	"torsieve/internal/geom"
	"torsieve/molecule"
)

// methylTurn is well off the top of a threefold barrier, which is 60 degrees
// from its foot, and well inside the valley about it.
const methylTurn = 20 * math.Pi / 180

// offSaddle returns x with every methyl-like end (CH3, NH3+, CF3) turned a little. Two tiers may
// disagree on which way a methyl group stands; symmetry then holds a relaxation
// on the top of the barrier, where the gradient is zero too: N-methylacetamide
// ends 1.15 kcal/mol too high in GFN2-xTB when it is started from the force
// field's minimum as it stands.
func offSaddle(m *molecule.Molecule, x []float64) []float64 {
	out := slices.Clone(x)
	for _, r := range m.Rotors() {
		if !r.Idle || slices.ContainsFunc(r.Moving, func(i int) bool { return len(m.Neighbours(i)) > 1 }) {
			continue
		}
		geom.RotateAbout(out, r.J, r.K, r.Moving, methylTurn)
	}
	return out
}
