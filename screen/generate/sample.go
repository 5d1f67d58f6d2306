package generate

import (
	"math"
	"math/rand/v2"
)

// A sampler draws recipes that do not clash.
type sampler struct {
	a      *assembly
	states [][]float64 // by rotor: weights of the states, adapted as energies come in
	shapes [][]float64 // by fragment: weights of the shapes
	width  float64     // share of a state's spread that is drawn
	evenly bool        // every place in a state is as likely as another
}

func newSampler(a *assembly) *sampler {
	s := &sampler{a: a, width: 1}
	for _, t := range a.turns {
		w := make([]float64, len(t.states))
		for k, st := range t.states {
			w[k] = st.weight
		}
		s.states = append(s.states, w)
	}
	for _, f := range a.frags {
		s.shapes = append(s.shapes, f.weights())
	}
	return s
}

// draws of one fragment's placing before the sampler goes back to the start,
// and starts before it gives up.
const (
	placings = 8
	restarts = 12
)

// draw grows a structure into x fragment by fragment; where one clashes it
// draws that one again. first chooses the states of the first round, rotor by
// rotor, in 0..1; nil leaves them to r. It reports whether it succeeded.
func (s *sampler) draw(r *rand.Rand, first []float64, x []float64) (recipe, bool) {
	rec := recipe{make([]int, len(s.a.frags)), make([]float64, len(s.a.turns))}
	for try := range restarts {
		if try > 0 {
			first = nil
		}
		if s.grow(r, first, rec, x) {
			return rec, true
		}
	}
	return rec, false
}

func (s *sampler) grow(r *rand.Rand, first []float64, rec recipe, x []float64) bool {
	var crowding float64
	for k, step := range s.a.steps {
		added, ok := 0.0, false
		for p := range placings {
			rec.shapes[step.frag] = pick(s.shapes[step.frag], r.Float64())
			if step.turn >= 0 {
				u := r.Float64()
				if p == 0 && first != nil {
					u = first[step.turn]
				}
				rec.angles[step.turn] = s.angle(step.turn, u)
			}
			if added = s.a.put(k, rec, x); crowding+added < tooCrowded {
				ok = true
				break
			}
		}
		if !ok {
			return false
		}
		crowding += added
		s.a.settle(k)
	}
	return true
}

// angle draws a state and a place in it by a number in 0..1: the numbers that
// fall to one state go through its normal distribution from one end to the
// other; where minima are asked for, which lie where they like, evenly from one
// end to the other.
//
// The spreads of the table are what they say: of 440 rotors of every other
// ligand with a crystal shape, half were within 0.55 of a spread of the nearest
// state, nine in ten within 1.62 (0.67 and 1.64 would be normal).
func (s *sampler) angle(turn int, u float64) float64 {
	k, share := pickShare(s.states[turn], u)
	st := s.a.turns[turn].states[k]
	off := math.Sqrt2 * math.Erfinv(2*share-1) * s.width
	if s.evenly {
		off = outmost * (2*share - 1)
	}
	return st.angle + st.spread*math.Max(-outmost, math.Min(outmost, off))
}

// outmost is how far from the middle of a state angles are drawn, in its spreads.
const outmost = 2.5

// pick returns the index in which the fraction u of the summed weights falls.
func pick(weights []float64, u float64) int {
	k, _ := pickShare(weights, u)
	return k
}

// pickShare returns how far into its weight u falls, too, in 0..1.
func pickShare(weights []float64, u float64) (k int, share float64) {
	var sum float64
	for _, w := range weights {
		sum += w
	}
	u *= sum
	for k, w := range weights {
		if u < w {
			return k, u / w
		}
		u -= w
	}
	return len(weights) - 1, 0.5
}
