package promotion

import (
	"cmp"
	"math"
	"slices"
)

const (
	fewEnough   = 6  // so many candidates are all computed
	spreadSize  = 5  // candidates over the lower tier's whole range, to calibrate on
	lowestSize  = 3  // lowest ones that the first batch has besides
	leastBatch  = 2  // candidates of a later batch, at least
	auditsOneIn = 10 // evaluations of which one is drawn at random
)

// An End says why a plan hands out nothing more.
type End int

// The ends of a plan. Running is none.
const (
	Running    End = iota
	Enough         // the missed weight is under the tolerance
	Everything     // no candidate is left
	Spent          // the budget of evaluations is
	NoneCame       // no candidate is left, and the higher tier computed none
)

// End returns how the plan stands. After Enough, Next may still hand out
// candidates to audit, and what they show can set the plan running again.
func (p *Plan) End() End {
	left := len(p.list(waiting))
	switch {
	case p.open > 0:
		return Running
	case left == 0 && len(p.list(computed)) == 0:
		return NoneCame
	case left == 0:
		return Everything
	case p.settings.Budget > 0 && p.handed >= p.settings.Budget:
		return Spent
	case p.handed > 0 && len(p.entries) > fewEnough && p.within():
		return Enough
	}
	return Running
}

// within says whether what the waiting ones may hold is under the tolerance.
func (p *Plan) within() bool {
	o := p.look()
	return o.estimates[o.worst].reachable <= p.settings.Tolerance
}

// Next returns the candidates that the higher tier should compute now, in the
// order of their indexes, and none when the plan has ended. While answers are
// outstanding it returns those candidates again.
func (p *Plan) Next() []int {
	if p.open > 0 {
		return p.list(asked)
	}
	end := p.End()
	if end != Running && end != Enough {
		return nil
	}
	switch {
	case p.handed == 0:
		p.first()
	default:
		p.drawAudits()
		if end == Running {
			p.weightiest()
		}
	}
	return p.list(asked)
}

// room is how many evaluations the budget still has.
func (p *Plan) room() int {
	if p.settings.Budget == 0 {
		return len(p.entries)
	}
	return max(0, p.settings.Budget-p.handed)
}

func (p *Plan) hand(i int, why reason) {
	if p.entries[i].state != waiting || p.room() == 0 {
		return
	}
	o := p.fresh
	if o != nil && o.fit != nil {
		p.entries[i].share = o.shares[i]
	}
	p.entries[i].state, p.entries[i].why = asked, why
	p.handed++
	p.open++
}

// first hands out what the two tiers are compared on: a spread over the whole
// ranking, since the lowest ones are low partly by accident, and a few of the
// lowest, which are wanted anyway.
func (p *Plan) first() {
	ranking := p.byLower(p.list(waiting))
	if len(ranking) <= fewEnough {
		for _, i := range ranking {
			p.hand(i, asAll)
		}
		return
	}
	for k := range spreadSize {
		p.hand(ranking[k*(len(ranking)-1)/(spreadSize-1)], asSpread)
	}
	for _, i := range ranking[1 : lowestSize+1] {
		p.hand(i, asLowest)
	}
}

// byLower sorts candidates by their energy at the lower tier.
func (p *Plan) byLower(which []int) []int {
	slices.SortStableFunc(which, func(a, b int) int {
		return cmp.Compare(p.candidates[a].Energy, p.candidates[b].Energy)
	})
	return which
}

// weightiest hands out the candidates that hold most of what is expected to be
// missed, as many as would bring it under the tolerance if all came as expected,
// but not more than half as many again as are computed: what they show may
// change the picture.
func (p *Plan) weightiest() {
	left := p.list(waiting)
	o := p.look()
	if o.fit == nil {
		left = p.byLower(left)
		for _, i := range left[:min(len(left), spreadSize)] {
			p.hand(i, asLowest)
		}
		return
	}
	slices.SortStableFunc(left, func(a, b int) int {
		return cmp.Or(cmp.Compare(o.shares[b], o.shares[a]), cmp.Compare(p.candidates[a].Energy, p.candidates[b].Energy))
	})
	need := p.needed(left, o)
	need = min(max(need, leastBatch), max(leastBatch, p.handed/2), len(left))
	for _, i := range left[:need] {
		p.hand(i, asWeighty)
	}
}

// needed returns how many of the candidates, weightiest first, must be computed
// for the rest to come under the tolerance. The 95th percentile is taken to fall
// as the mean does.
func (p *Plan) needed(left []int, o *outlook) int {
	e := o.estimates[o.worst]
	var rest float64
	for _, i := range left {
		rest += o.shares[i]
	}
	target := rest * p.settings.Tolerance / math.Max(e.reachable, p.settings.Tolerance)
	for n, i := range left {
		if rest <= target {
			return n
		}
		rest -= o.shares[i]
	}
	return len(left)
}
