package semiempirical

import (
	"context"
	"errors"
	"fmt"

	"torsieve/internal/linalg"
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

// A way is how the moments became self-consistent.
type way struct {
	cycles      int     // of all attempts
	cautious    bool    // the usual mixing did not do
	hottest     float64 // kelvin: electrons were heated so far; 0: they were not
	temperature float64 // kelvin: of the answer
}

// converge makes the moments self-consistent and keeps them in start: from
// what is known of the last geometry, or from the neutral guess, or with
// cautious mixing, or by way of hotter electrons.
func (s *Surface) converge(ctx context.Context) (way, error) {
	w := way{temperature: s.options.Temperature}
	s.heat(w.temperature)
	if s.warm {
		s.mixer.Continue(remembered)
		s.cycle.tolerance = firstTolerance
		err := s.attempt(ctx, &w, min(warmCycles, s.options.MaxCycles))
		if err == nil || ctx.Err() != nil {
			return w, err
		}
	}
	for _, factor := range []float64{damping, cautiousDamping} {
		w.cautious = factor == cautiousDamping
		s.begin(factor)
		s.guess()
		if err := s.attempt(ctx, &w, s.options.MaxCycles); !unsettled(err) {
			return w, err
		}
	}
	err := s.throughHeat(ctx, &w)
	if unsettled(err) {
		err = fmt.Errorf("%w (%d cycles)", ErrNotConverged, w.cycles)
	}
	return w, err
}

// unsettled says whether another way of mixing may help.
func unsettled(err error) bool {
	return errors.Is(err, scf.ErrNotConverged) || errors.Is(err, scf.ErrNotFinite) || errors.Is(err, linalg.ErrNotFinite)
}

// begin forgets what cycles before have shown.
func (s *Surface) begin(factor float64) {
	s.mixer.Restart(factor)
	s.cycle.tolerance = 0
}

// attempt runs the self-consistency from start, with the mixer as it is.
func (s *Surface) attempt(ctx context.Context, w *way, maxCycles int) error {
	loop := scf.Loop{
		Step:    s.cycle.step,
		Mixer:   s.mixer,
		Done:    scf.Within(1e-6*s.options.Accuracy, 2e-5*s.options.Accuracy),
		MaxIter: maxCycles,
	}
	state, it, err := loop.Solve(ctx, s.start)
	w.cycles += it.N
	s.warm = err == nil
	if s.warm {
		copy(s.start, state)
	}
	return err
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
