package generate

import (
	"context"
	"fmt"
	"math"
	"slices"

	"torsieve/dedupe"
	"torsieve/internal/geom"
	"torsieve/internal/units"
)

// rough tells structures apart that are only loosely relaxed; byShape those whose
// energies mean nothing, because nothing more will be done to them: a methyl group
// that came to rest on its barrier does not make another shape.
var (
	rough   = dedupe.Thresholds{RMSD: 0.2 * units.Angstrom, Energy: 1 * units.KcalPerMol}
	byShape = dedupe.Thresholds{RMSD: 0.2 * units.Angstrom, Energy: math.Inf(1)}
)

// finish drops duplicates and what is too high, relaxes the best choice to the
// end, and puts it in order.
func (s *search) finish(ctx context.Context) (Result, error) {
	early, late := rough, dedupe.DefaultThresholds()
	if !s.o.Minima {
		early, late = byShape, byShape
	}
	list := s.within(s.distinct(s.pool, nil, early))
	s.result.Found = len(list)
	if s.o.Minima {
		chosen, err := s.order(ctx, list, s.o.Max)
		if err != nil {
			return Result{}, err
		}
		if len(chosen) < len(list) {
			s.result.Complete = false
		}
		if list, err = s.tightened(ctx, chosen); err != nil {
			return Result{}, err
		}
	}
	if s.o.MirrorImages {
		list = s.bothHands(list, late.RMSD)
	}
	ordered, err := s.order(ctx, list, s.o.Max)
	if err != nil {
		return Result{}, err
	}
	if len(ordered) < len(list) {
		s.result.Complete = false
	}
	s.conformers(ordered)
	return s.result, nil
}

// tightened relaxes candidates to the end and drops those that have become the
// same.
func (s *search) tightened(ctx context.Context, chosen []candidate) ([]candidate, error) {
	var final []entry
	var hits []int
	for _, c := range chosen {
		s.kick(c.x, c.start)
		energy, err := s.relaxed(ctx, c.x, tightly)
		if ctx.Err() != nil {
			return nil, ctx.Err()
		}
		if err != nil {
			s.failure = err
			continue
		}
		c.energy = energy
		final = append(final, c.entry)
		hits = append(hits, c.hits)
	}
	if len(final) == 0 {
		return nil, fmt.Errorf("no structure could be relaxed: %w", s.failure)
	}
	return s.within(s.distinct(final, hits, dedupe.DefaultThresholds())), nil
}

// kick moves every atom and turns every rotor a little, at random: a structure
// that came to rest on a saddle point, an eclipsed methyl group say or the
// middle between two minima that mirror each other, would stay there otherwise.
func (s *search) kick(x []float64, start int) {
	const (
		size = 0.06 * units.Angstrom // standard deviations of a coordinate and of an angle
		turn = 6 * degree
	)
	r := stream(s.o.Seed, s.id, streamKick, start)
	for i := range x {
		x[i] += size * r.NormFloat64()
	}
	for _, rotor := range s.m.Rotors() {
		geom.RotateAbout(x, rotor.J, rotor.K, rotor.Moving, turn*r.NormFloat64())
	}
}

// A candidate is a distinct structure and how often it was met.
type candidate struct {
	entry
	hits int
}

// distinct keeps the lowest of each shape; hits, where known, add up.
func (s *search) distinct(list []entry, hits []int, t dedupe.Thresholds) []candidate {
	xs, energies := make([][]float64, len(list)), make([]float64, len(list))
	for k, e := range list {
		xs[k], energies[k] = e.x, e.energy
	}
	var kept []candidate
	for _, g := range dedupe.Unique(s.comparer, xs, energies, t) {
		c := candidate{entry: list[g.Keep]}
		for _, k := range g.Members {
			if hits != nil {
				c.hits += hits[k]
			} else {
				c.hits++
			}
		}
		kept = append(kept, c)
	}
	return kept
}

// within keeps what lies in the window; list is sorted by energy.
func (s *search) within(list []candidate) []candidate {
	for k, c := range list {
		if c.energy-list[0].energy > s.o.Window {
			return list[:k]
		}
	}
	return list
}

// bothHands adds the mirror image of each shape that is further from it than
// alike, in bohr. Where the molecule is not its own mirror image there is nothing to add.
func (s *search) bothHands(list []candidate, alike float64) []candidate {
	var both []candidate
	for _, c := range list {
		both = append(both, c)
		if rmsd, ok := s.comparer.SelfMirror(c.x); !ok || rmsd <= alike {
			continue
		}
		image := c
		image.x = slices.Clone(c.x)
		for i := 2; i < len(image.x); i += 3 {
			image.x[i] = -image.x[i]
		}
		both = append(both, image)
	}
	return both
}

// conformers writes the result. Families are numbered in the order of the list.
func (s *search) conformers(list []candidate) {
	var seen [][]int
	for _, c := range list {
		family := slices.IndexFunc(seen, func(f []int) bool { return slices.Equal(f, c.recipe.shapes) })
		if family < 0 {
			family = len(seen)
			seen = append(seen, c.recipe.shapes)
		}
		s.result.Conformers = append(s.result.Conformers,
			Conformer{X: c.x, Energy: c.energy, Family: family, Hits: c.hits})
	}
}
