package handbook

import (
	"context"
	"math"
)

// A question is how a fact is measured on a subject: a value from the tier that
// relaxes and one from HF-3c at the same geometries, in the fact's unit.
type question struct {
	fact   string
	class  class
	shapes []shape // that it asks about
	ask    func(ctx context.Context, sub *subject) (answer, error)
}

// An answer is NaN where a tier has none: HF-3c has no geometries of its own.
type answer struct {
	value, hf float64
	led       bool // the search did not lead there, so it was started from there
}

// gap asks for the energy of to above from.
func gap(fact string, c class, from, to pick) question {
	return question{fact, c, append(from.shapes, to.shapes...), func(ctx context.Context, sub *subject) (answer, error) {
		a, err := sub.energyOf(ctx, from)
		if err != nil {
			return answer{}, err
		}
		b, err := sub.energyOf(ctx, to)
		return answer{b.value - a.value, b.hf - a.hf, a.led || b.led}, err
	}}
}

// energyOf is a pick's energy at both tiers.
func (sub *subject) energyOf(ctx context.Context, p pick) (answer, error) {
	points, err := p.points(ctx, sub)
	if err != nil {
		return answer{}, err
	}
	var own, high []float64
	a := answer{hf: math.NaN()}
	for _, at := range points {
		a.led = a.led || at.led
		own = append(own, at.energy)
		if sub.top != nil {
			e, err := sub.hfEnergy(ctx, at)
			if err != nil {
				return answer{}, err
			}
			high = append(high, e)
		}
	}
	a.value = p.reduce(sub, points, own)
	if sub.top != nil {
		a.hf = p.reduce(sub, points, high)
	}
	return a, nil
}

// angle asks for a dihedral in the lowest minimum of a shape that says about
// what it is.
func angle(fact string, d dihedral, turns ...turn) question {
	p := minimum(turns...)
	return question{fact, angles, p.shapes, func(ctx context.Context, sub *subject) (answer, error) {
		points, err := p.points(ctx, sub)
		if err != nil {
			return answer{}, err
		}
		low := points[0]
		for _, q := range points {
			if q.energy < low.energy {
				low = q
			}
		}
		perm, hand, _ := sub.fit(low.x, turns)
		size := math.Abs(hand * d.under(perm).of(low.x))
		return answer{size, math.NaN(), low.led}, nil
	}}
}

// isomer asks for the lowest energy of the subject above that of another
// molecule of the same formula.
func isomer(fact string, c class, other string) question {
	return question{fact, c, nil, func(ctx context.Context, sub *subject) (answer, error) {
		from, err := searchFor(ctx, other)
		if err != nil {
			return answer{}, err
		}
		base, err := subjectAt(ctx, from, sub.level, false)
		if err != nil {
			return answer{}, err
		}
		a, err := base.energyOf(ctx, minimum())
		if err != nil {
			return answer{}, err
		}
		b, err := sub.energyOf(ctx, minimum())
		return answer{b.value - a.value, b.hf - a.hf, false}, err
	}}
}

// count asks how many distinct minima the search leads to, up to so many kcal/mol
// above the lowest.
func count(fact string, within float64) question {
	return question{fact, counts, nil, func(_ context.Context, sub *subject) (answer, error) {
		n := 0.0
		for _, p := range sub.minima {
			if !p.led && p.energy < sub.minima[0].energy+within {
				n++
			}
		}
		return answer{value: n, hf: math.NaN()}, nil
	}}
}

// A specimen is a molecule and the questions about it.
type specimen struct {
	name, smiles string
	questions    []question
}

// hydrogens says whether any question speaks of a hydrogen atom.
func (s specimen) hydrogens(numbers []int) bool {
	for _, q := range s.questions {
		for _, sh := range q.shapes {
			for _, t := range sh {
				for _, a := range t.dihedral {
					if numbers[a] == 1 {
						return true
					}
				}
			}
		}
	}
	return false
}
