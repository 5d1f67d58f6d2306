package semiempirical

import (
	"context"
	"math"
	"slices"
)

// Where levels of filled and empty orbitals nearly meet, charge may slosh from
// cycle to cycle without end. Hot electrons share such levels and settle; from
// there they are cooled step by step, each time from the moments of the step
// before.

// hotter are the temperatures (kelvin) at which electrons are tried that do not
// settle at their own.
var hotter = [...]float64{1000, 2000, 4000, 8000, 16000}

// Limits of the way through heat: cycles of each attempt, the factor from one
// temperature to the next below, how many steps of cooling may be tried, and how
// many may fail, each time to be followed by steps half as long.
const (
	heatCycles    = 100
	coolingFactor = 0.6
	coolingSteps  = 25
	coolingFails  = 4
)

// heat sets the electronic temperature in kelvin.
func (s *Surface) heat(temperature float64) {
	s.cycle.orbitals.kT = boltzmann * temperature
}

// throughHeat makes the moments self-consistent at a higher temperature and
// cools them again, as far as they stay so. An answer that is still hot does not
// start the next geometry. The error is that of the last attempt where no
// temperature helps.
func (s *Surface) throughHeat(ctx context.Context, w *way) error {
	err := ErrNotConverged // where the temperature asked for is beyond all others
	for _, temperature := range hotter {
		if temperature <= s.options.Temperature {
			continue
		}
		s.guess()
		if err = s.attemptAt(ctx, w, temperature); err == nil {
			w.hottest, w.temperature = temperature, temperature
			return s.cool(ctx, w)
		}
		if !unsettled(err) {
			return err
		}
	}
	return err
}

// cool lowers the temperature to the one asked for, or to the lowest that
// there is an answer for.
func (s *Surface) cool(ctx context.Context, w *way) error {
	target := s.options.Temperature
	settled := slices.Clone(s.cycle.in.vec) // what went into the last cycle; what came out may be far from it
	factor, fails := coolingFactor, 0
	for step := 0; step < coolingSteps && w.temperature > target && fails < coolingFails; step++ {
		next := max(factor*w.temperature, target)
		copy(s.start, settled)
		err := s.attemptAt(ctx, w, next)
		switch {
		case err == nil:
			copy(settled, s.cycle.in.vec)
			w.temperature = next
		case unsettled(err):
			factor = math.Sqrt(factor)
			fails++
		default:
			return err
		}
	}
	if w.temperature == target {
		return nil
	}
	s.warm = false
	return s.repeat(w, settled)
}

// repeat does the cycle again that ended at the temperature of w: what the last
// ones left is of an attempt that failed.
func (s *Surface) repeat(w *way, settled []float64) error {
	s.heat(w.temperature)
	s.cycle.tolerance = 0
	_, err := s.cycle.step(settled)
	w.cycles++
	return err
}

// attemptAt is an attempt from start with cautious mixing at a temperature.
func (s *Surface) attemptAt(ctx context.Context, w *way, temperature float64) error {
	s.heat(temperature)
	s.begin(cautiousDamping)
	return s.attempt(ctx, w, min(heatCycles, s.options.MaxCycles))
}
