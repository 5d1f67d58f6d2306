package semiempirical

import (
	"context"
	"errors"
	"fmt"

	"torsieve/internal/scf"
)

// Factors of the first steps of the mixing: the usual one, and one for
// molecules that do not settle with it.
const (
	damping         = 0.4
	cautiousDamping = 0.1
)

// remembered is how many changes of earlier cycles the mixing takes along to
// the next geometry. Relaxations of ligands took 8 cycles a gradient (accuracy
// 0.1) without any, 6 with 40, 5 with 80 or 160.
const remembered = 80

// warmCycles bounds the attempt from the last geometry; if it is not done then,
// what was taken along is of no use.
const warmCycles = 50

// converge makes the moments self-consistent and keeps them in start: from
// what is known of the last geometry, or from the neutral guess, or with
// cautious mixing. It returns the number of cycles of all attempts, and whether
// caution was needed.
func (s *Surface) converge(ctx context.Context) (cycles int, cautious bool, err error) {
	if s.warm {
		s.mixer.Continue(remembered)
		cycles, err = s.iterate(ctx, min(warmCycles, s.options.MaxCycles))
		if err == nil || ctx.Err() != nil {
			return cycles, false, err
		}
	}
	for _, factor := range []float64{damping, cautiousDamping} {
		s.mixer.Restart(factor)
		s.guess()
		var more int
		more, err = s.iterate(ctx, s.options.MaxCycles)
		cycles += more
		if !unsettled(err) {
			return cycles, factor == cautiousDamping, err
		}
	}
	return cycles, true, fmt.Errorf("%w (%d cycles)", ErrNotConverged, cycles)
}

// unsettled says whether another way of mixing may help.
func unsettled(err error) bool {
	return errors.Is(err, scf.ErrNotConverged) || errors.Is(err, scf.ErrNotFinite)
}

// iterate runs the self-consistency from start, with the mixer as it is.
func (s *Surface) iterate(ctx context.Context, maxCycles int) (cycles int, err error) {
	loop := scf.Loop{
		Step:    s.cycle.step,
		Mixer:   s.mixer,
		Done:    scf.Within(1e-6*s.options.Accuracy, 2e-5*s.options.Accuracy),
		MaxIter: maxCycles,
	}
	state, it, err := loop.Solve(ctx, s.start)
	s.warm = err == nil
	if s.warm {
		copy(s.start, state)
	}
	return it.N, err
}

// guess spreads the charge evenly over the atoms and, on each, over the shells
// as its electrons are.
func (s *Surface) guess() {
	b := s.model.basis
	clear(s.start)
	each := s.charge / float64(b.atoms())
	for a := range b.atoms() {
		var electrons float64
		for i := b.atomShell[a]; i < b.atomShell[a+1]; i++ {
			electrons += b.shells[i].Occupation
		}
		for i := b.atomShell[a]; i < b.atomShell[a+1]; i++ {
			s.start[i] = each * b.shells[i].Occupation / electrons
		}
	}
}
