package generate

import (
	"context"
	"math"

	"torsieve/internal/geom"
	"torsieve/internal/relax"
)

// softly is how collisions are undone, loosely how structures are relaxed before
// duplicates are dropped, barely where no minima are asked for, tightly how the
// survivors are; gradients in hartree/bohr.
var (
	softly  = relax.Settings{RMSGradient: 5e-3, MaxGradients: 40}
	loosely = relax.Settings{RMSGradient: 4e-4, MaxGradients: 150, EnergyChange: 2e-5}
	barely  = relax.Settings{RMSGradient: 4e-4, MaxGradients: 40}
	tightly = relax.Settings{RMSGradient: 1e-4, MaxGradient: 2e-4, MaxGradients: 1500}
)

// add relaxes a start and keeps it if its stereo is still right. Only the end
// of ctx is an error.
func (s *search) add(ctx context.Context, x []float64, r recipe, held bool) error {
	start := s.result.Starts
	if err := s.charge(ctx, x); err != nil {
		return err
	}
	set := loosely
	if !s.o.Minima {
		set = barely
	}
	var energy float64
	var err error
	if held {
		energy, err = s.relaxedHeld(ctx, x, r, set)
	} else {
		energy, err = s.relaxed(ctx, x, set)
	}
	if ctx.Err() != nil {
		return ctx.Err()
	}
	if err != nil {
		s.failure = err // told if nothing at all comes through
		return nil      //nolint:nilerr // one start that fails is no error
	}
	s.result.Relaxed++
	s.pool = append(s.pool, entry{x: x, energy: energy, recipe: r, start: start})
	return nil
}

// relaxed minimises x in place, with the soft core first where atoms collide.
func (s *search) relaxed(ctx context.Context, x []float64, set relax.Settings) (float64, error) {
	if s.collides(x) {
		if _, err := s.soft.Minimise(ctx, x, softly); err != nil {
			return 0, err
		}
	}
	set.Numbers = s.numbers
	res, err := s.surface.Minimise(ctx, x, set)
	if err != nil {
		return 0, err
	}
	if res.Status == relax.Exploded || math.IsNaN(res.Energy) {
		return 0, relax.ErrExploded
	}
	if err := s.m.StereoMatches(x); err != nil {
		return 0, err
	}
	return res.Energy, nil
}

// collides says whether the force field's repulsion would be violent at x.
func (s *search) collides(x []float64) bool {
	n := s.m.NumAtoms()
	for i := range n {
		for j := range i {
			if hard := s.screen.hard[i*n+j]; hard > 0 {
				if d := geom.Distance(x, i, j); d*d < hard {
					return true
				}
			}
		}
	}
	return false
}

// charge freezes the force field's charges at the first structure, relaxed
// without them.
func (s *search) charge(ctx context.Context, x []float64) error {
	if s.charged {
		return nil
	}
	y := append([]float64(nil), x...)
	if _, err := s.relaxed(ctx, y, loosely); err != nil {
		return ctx.Err()
	}
	s.charged = true
	return s.surface.FreezeCharges(y)
}
