package generate

import (
	"math"

	"torsieve/internal/units"
	"torsieve/molecule"
)

// Limits of the clash screen, as shares of the sum of the van der Waals radii
// (Bondi and followers, see internal/element). Our own choice: tight enough for
// the force field to repair what passes.
const (
	hardShare     = 0.62
	hydrogenShare = 0.55 // between hydrogens
	bondShare     = 0.45 // between a hydrogen on N, O, S and an acceptor
	softShare     = 0.85
)

// A clashScreen knows for every pair of atoms how close they may come.
type clashScreen struct {
	n    int
	hard []float64 // n x n, squares, bohr^2; 0 for pairs less than four bonds apart
	soft []float64 // n x n, distances below which closeness costs, bohr
}

func newClashScreen(m *molecule.Molecule) *clashScreen {
	n := m.NumAtoms()
	s := &clashScreen{n: n, hard: make([]float64, n*n), soft: make([]float64, n*n)}
	for i := range n {
		for j := range n {
			if i == j || m.TopologicalDistance(i, j) < 4 {
				continue
			}
			sum := radius(m, i) + radius(m, j)
			share, soft := hardShare, softShare*sum
			switch {
			case m.Atom(i).Number == 1 && m.Atom(j).Number == 1:
				share = hydrogenShare
			case polarHydrogen(m, i) && isPolar(m.Atom(j).Number), polarHydrogen(m, j) && isPolar(m.Atom(i).Number):
				share, soft = bondShare, 0.6*sum
			}
			s.hard[i*n+j] = share * sum * share * sum
			s.soft[i*n+j] = soft
		}
	}
	return s
}

// between returns how much the atoms of fresh crowd those of placed, in bohr^2,
// or infinity where two of them collide.
func (s *clashScreen) between(x []float64, placed, fresh []int) float64 {
	var crowding float64
	for _, i := range fresh {
		a, b, c := x[3*i], x[3*i+1], x[3*i+2]
		hard, soft := s.hard[i*s.n:], s.soft[i*s.n:]
		for _, j := range placed {
			dx, dy, dz := a-x[3*j], b-x[3*j+1], c-x[3*j+2]
			d2 := dx*dx + dy*dy + dz*dz
			if d2 < hard[j] {
				return math.Inf(1)
			}
			if d2 < soft[j]*soft[j] {
				d := soft[j] - math.Sqrt(d2)
				crowding += d * d
			}
		}
	}
	return crowding
}

// tooCrowded is the crowding of a whole structure that is not worth relaxing.
const tooCrowded = 6 * units.Angstrom * units.Angstrom
