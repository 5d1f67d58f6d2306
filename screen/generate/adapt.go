package generate

import (
	"math"
	"math/rand/v2"

	"torsieve/internal/geom"
	"torsieve/internal/units"
)

// How fast the weights of the states follow the energies, the effective kT of
// the energies, and the least that a state keeps.
const (
	learningRate   = 0.2
	learningKT     = 4 * units.KcalPerMol
	leastOfAverage = 0.1
)

// learn moves the weights of each rotor's states towards the Boltzmann-weighted
// frequencies in the relaxed structures of the last batch.
func (s *sampler) learn(last []entry) {
	if len(last) == 0 {
		return
	}
	lowest := math.Inf(1)
	for _, e := range last {
		lowest = math.Min(lowest, e.energy)
	}
	for turn, t := range s.a.turns {
		share := make([]float64, len(t.states))
		var sum float64
		for _, e := range last {
			w := math.Exp((lowest - e.energy) / learningKT)
			share[t.nearest(geom.Dihedral(e.x, t.a, t.b, t.c, t.d))] += w
			sum += w
		}
		n := float64(len(share))
		for k := range share {
			w := (1-learningRate)*s.states[turn][k] + learningRate*share[k]/sum
			s.states[turn][k] = math.Max(w, leastOfAverage/n*math.Min(1, 2*n*t.states[k].weight))
		}
	}
}

// nearest returns the state whose angle is closest, in units of the symmetry
// that the list of states has been folded by.
func (t *torsion) nearest(angle float64) int {
	best, least := 0, math.Inf(1)
	for k, s := range t.states {
		off := math.Abs(wrap(s.angle-angle, t.turn))
		if off = math.Min(off, t.turn-off); off < least {
			best, least = k, off
		}
	}
	return best
}

// latin returns n points in the unit cube of some dimensions, of which every
// coordinate has one value in each n-th of the interval.
// Source: M. D. McKay, R. J. Beckman, W. J. Conover, Technometrics 1979, 21, 239.
func latin(r *rand.Rand, n, dimensions int) [][]float64 {
	points := make([][]float64, n)
	for i := range points {
		points[i] = make([]float64, dimensions)
	}
	for d := range dimensions {
		for i, cell := range r.Perm(n) {
			points[i][d] = (float64(cell) + r.Float64()) / float64(n)
		}
	}
	return points
}
