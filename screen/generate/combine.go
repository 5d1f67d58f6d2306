package generate

import (
	"cmp"
	"context"
	"math"
	"slices"
)

// budget is how many structures are relaxed at most.
func (s *search) budget() int {
	if s.assembly == nil {
		return s.o.relaxations(0)
	}
	return s.o.relaxations(len(s.assembly.turns))
}

// gridShare is the share of the budget, one in so many, that the grid may take
// where no minima are asked for.
const gridShare = 2

// freeWidth is the share of a state's spread that is drawn where rotors are not
// held: the force field moves the rest.
const freeWidth = 0.7

// assembled relaxes structures put together from fragments: all combinations
// where they are few, and then samples of what lies beside them; otherwise
// samples alone.
func (s *search) assembled(ctx context.Context) error {
	budget := s.budget()
	gridded := s.combinations(s.middles()) <= float64(s.o.Exhaustive)
	if gridded {
		states, limit := s.middles(), budget
		if !s.o.Minima {
			limit = budget / gridShare
		} else if fine := s.shoulders(); s.combinations(fine) <= finest {
			states, limit = fine, finest
		}
		spent, err := s.grid(ctx, states, limit)
		if err != nil {
			return err
		}
		budget = max(budget-spent, fewestCounted)
	} else {
		s.sampler.width = freeWidth
	}
	return s.sampled(ctx, budget, gridded)
}

// grid relaxes all combinations of states, or so many of them, and returns how
// many.
func (s *search) grid(ctx context.Context, states [][]state, limit int) (int, error) {
	leaves := s.enumerate(states)
	s.result.Starts += int(s.combinations(states))
	if s.result.Complete = len(leaves) <= limit; !s.result.Complete {
		leaves = s.lottery(leaves, limit)
	}
	for _, l := range leaves {
		x := make([]float64, 3*s.m.NumAtoms())
		s.assembly.force(l.recipe, x)
		if err := s.add(ctx, x, l.recipe, false); err != nil {
			return 0, err
		}
	}
	return len(leaves), nil
}

// lottery draws so many of the leaves, each with a chance that falls with its
// cost, and keeps their order.
//
// Source: P. S. Efraimidis, P. G. Spirakis, Inf. Process. Lett. 2006, 97, 181:
// the largest keys log(u)/w are a weighted sample without repetition.
func (s *search) lottery(leaves []leaf, n int) []leaf {
	r := stream(s.o.Seed, s.id, streamLottery, 0)
	keys := make([]float64, len(leaves))
	order := make([]int, len(leaves))
	for k, l := range leaves {
		order[k] = k
		keys[k] = math.Log(-math.Log(1-r.Float64())) + l.cost
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(keys[a], keys[b]) })
	order = order[:n]
	slices.Sort(order)
	drawn := make([]leaf, n)
	for k, i := range order {
		drawn[k] = leaves[i]
	}
	return drawn
}

// combinations counts the recipes with every rotor in one of its states.
func (s *search) combinations(states [][]state) float64 {
	n := 1.0
	for _, list := range states {
		n *= float64(len(list))
	}
	for _, f := range s.assembly.frags {
		n *= float64(len(f.shapes))
	}
	return n
}

// A leaf is a complete recipe that does not clash. cost ranks leaves: minus the
// logarithm of the product of the weights, and the crowding.
type leaf struct {
	recipe recipe
	cost   float64
}

// enumerate goes through all combinations depth first and leaves a branch where
// fragments clash.
func (s *search) enumerate(states [][]state) []leaf {
	a := s.assembly
	rec := recipe{make([]int, len(a.frags)), make([]float64, len(a.turns))}
	x := make([]float64, 3*s.m.NumAtoms())
	var leaves []leaf
	var visit func(k int, cost float64)
	visit = func(k int, cost float64) {
		if k == len(a.steps) {
			leaves = append(leaves, leaf{rec.clone(), cost})
			return
		}
		step := a.steps[k]
		shapes := s.sampler.shapes[step.frag]
		for shape, share := range shapes {
			rec.shapes[step.frag] = shape
			if step.turn < 0 {
				a.put(k, rec, x)
				a.settle(k)
				visit(k+1, cost-math.Log(share))
				continue
			}
			for _, st := range states[step.turn] {
				crowding, ok := s.fitIn(k, st, rec, x)
				if !ok {
					continue
				}
				a.settle(k)
				visit(k+1, cost-math.Log(share)-math.Log(st.weight)+crowding/tooCrowded)
				a.unsettle(k)
			}
		}
	}
	visit(0, 0)
	s.result.Embedded += len(leaves)
	return leaves
}

// offsets from the middle of a state, in its spreads, that are tried where the
// middle clashes.
var offsets = [...]float64{0, 0.8, -0.8, 1.6, -1.6}

func (s *search) fitIn(k int, st state, rec recipe, x []float64) (crowding float64, ok bool) {
	turn := s.assembly.steps[k].turn
	for _, off := range offsets {
		rec.angles[turn] = st.angle + off*st.spread
		if crowding = s.assembly.put(k, rec, x); crowding < tooCrowded {
			return crowding, true
		}
	}
	return 0, false
}
