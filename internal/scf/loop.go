// Package scf iterates a molecule's state to self-consistency, for the
// semi-empirical tier and for Hartree-Fock alike. Physics, acceleration,
// stopping and watching are four parts: Step, Mixer, Done and Watch.
package scf

import (
	"context"
	"errors"
	"fmt"
	"math"
)

// A Step is the physics: from a state (charges, a Fock matrix) to what comes
// out of it. Its slices are good until the next call.
type Step func(in []float64) (Output, error)

// An Output is what a Step makes of a state.
type Output struct {
	State    []float64
	Residual []float64 // zero at self-consistency: out - in, or FDS - SDF
	Energy   float64   // hartree
}

// A Mixer is the acceleration: damping, Broyden, DIIS. It knows no chemistry.
// The slice that Next returns is good until the next call.
type Mixer interface {
	Next(in []float64, out Output) []float64
}

// An Iteration is what Done judges and Watch prints.
type Iteration struct {
	N        int     // from 1
	Energy   float64 // hartree
	Change   float64 // since the last iteration, hartree; the whole energy in the first
	Residual float64 // rms, in the state's own unit
}

// A Loop iterates Step. Watch may be nil; the other fields are needed.
type Loop struct {
	Step    Step
	Mixer   Mixer
	Done    func(Iteration) bool
	MaxIter int
	Watch   func(Iteration)
}

// ErrNotConverged comes, with the last state, after MaxIter iterations.
var ErrNotConverged = errors.New("scf: not converged")

// ErrNotFinite comes when an energy or a residual is no finite number.
var ErrNotFinite = errors.New("scf: energy or residual is not finite")

// Solve iterates from start until Done, and returns the state that came out
// last. start is not changed. It ends early with ctx's error, with the step's
// own, and with ErrNotConverged or ErrNotFinite.
func (l Loop) Solve(ctx context.Context, start []float64) (state []float64, it Iteration, err error) {
	state = start
	for it.N < l.MaxIter {
		if err := ctx.Err(); err != nil {
			return state, it, err
		}
		out, err := l.Step(state)
		if err != nil {
			return state, it, fmt.Errorf("scf: iteration %d: %w", it.N+1, err)
		}
		it = Iteration{N: it.N + 1, Energy: out.Energy, Change: out.Energy - it.Energy, Residual: rms(out.Residual)}
		if l.Watch != nil {
			l.Watch(it)
		}
		if !finite(it.Energy) || !finite(it.Residual) {
			return state, it, ErrNotFinite
		}
		if l.Done(it) {
			return out.State, it, nil
		}
		state = l.Mixer.Next(state, out)
	}
	return state, it, ErrNotConverged
}

func rms(x []float64) float64 {
	if len(x) == 0 {
		return 0
	}
	var sum float64
	for _, v := range x {
		sum += v * v
	}
	return math.Sqrt(sum / float64(len(x)))
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }
