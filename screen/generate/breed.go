package generate

import (
	"math"
	"math/rand/v2"
	"slices"

	"torsieve/internal/geom"
)

// A parent is a relaxed structure in the terms of the assembly.
type parent struct {
	recipe recipe // the angles are those after relaxation
	energy float64
	used   int
}

// A breeder makes recipes from those of relaxed structures: the part beyond a
// rotor from one, the rest from another, some angles and ring shapes drawn
// anew. So what turned out to go together stays together.
type breeder struct {
	s       *search
	parents []parent
	taken   int // structures of the pool that have been looked at
}

// learn takes in what has come to the pool.
func (b *breeder) learn() {
	for _, e := range b.s.pool[b.taken:] {
		if e.recipe.angles == nil {
			continue
		}
		p := parent{recipe: e.recipe.clone(), energy: e.energy}
		for k, t := range b.s.assembly.turns {
			if phi := geom.Dihedral(e.x, t.a, t.b, t.c, t.d); !math.IsNaN(phi) {
				p.recipe.angles[k] = phi
			}
		}
		b.parents = append(b.parents, p)
	}
	b.taken = len(b.s.pool)
}

// fewestParents is how many structures there must be before any is bred from.
const fewestParents = 20

func (b *breeder) ready() bool { return len(b.parents) >= fewestParents && len(b.s.assembly.turns) > 1 }

// choose returns the better of some parents picked at random: low in energy
// and seldom used. One use counts as much as half an energy scale.
// Source of the count: G. Chang, W. C. Guida, W. C. Still, J. Am. Chem. Soc.
// 1989, 111, 4379.
func (b *breeder) choose(r *rand.Rand) *parent {
	const rivals = 4
	var best *parent
	cost := func(p *parent) float64 { return p.energy/b.s.o.EnergyScale + float64(p.used)/2 }
	for range rivals {
		if p := &b.parents[r.IntN(len(b.parents))]; best == nil || cost(p) < cost(best) {
			best = p
		}
	}
	best.used++
	return best
}

// draw makes a structure in x, fragment by fragment; where one clashes its angle
// is drawn anew. It reports whether it succeeded.
func (b *breeder) draw(r *rand.Rand, x []float64) (recipe, bool) {
	a := b.s.assembly
	mother, father := b.choose(r), b.choose(r)
	rec := mother.recipe.clone()
	inherit(a, rec, father.recipe, 1+r.IntN(len(a.steps)-1))
	mutate(b.s.sampler, rec, r)
	var crowding float64
	for k := range a.steps {
		added := a.put(k, rec, x)
		for range placings {
			if crowding+added < tooCrowded {
				break
			}
			if turn := a.steps[k].turn; turn >= 0 {
				rec.angles[turn] = b.s.sampler.angle(turn, r.Float64())
			}
			added = a.put(k, rec, x)
		}
		if crossed := crowding+added >= tooCrowded; crossed {
			return rec, false
		}
		crowding += added
		a.settle(k)
	}
	return rec, true
}

// inherit takes the step numbered from and all that hangs on it from father.
func inherit(a *assembly, rec, father recipe, from int) {
	taken := []int{a.steps[from].frag}
	for k := from; k < len(a.steps); k++ {
		step := a.steps[k]
		if k == from || slices.Contains(taken, step.parent) {
			taken = append(taken, step.frag)
			rec.shapes[step.frag] = father.shapes[step.frag]
			rec.angles[step.turn] = father.angles[step.turn]
		}
	}
}

// nudge is by what share of a state's spread inherited angles are moved.
const nudge = 0.3

// mutate draws about one angle or ring shape anew, and moves all angles a little.
func mutate(s *sampler, rec recipe, r *rand.Rand) {
	n := float64(len(rec.angles))
	for k, t := range s.a.turns {
		if r.Float64()*n < 1 {
			rec.angles[k] = s.angle(k, r.Float64())
			continue
		}
		rec.angles[k] += nudge * t.states[t.nearest(rec.angles[k])].spread * r.NormFloat64()
	}
	for k := range s.a.frags {
		if r.Float64()*2*n < 1 {
			rec.shapes[k] = pick(s.shapes[k], r.Float64())
		}
	}
}
