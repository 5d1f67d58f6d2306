package hf

import (
	"context"
	"errors"
	"fmt"
	"math"

	"torsieve/internal/scf"
)

// A NotConverged error says that no way led to self-consistency. There is no
// energy then.
type NotConverged struct {
	Iterations int     // of all attempts
	Change     float64 // of the energy in the last iteration, hartree
	Residual   float64 // largest element of the commutator in the last iteration
}

func (e *NotConverged) Error() string {
	return fmt.Sprintf("Hartree-Fock did not converge in %d iterations: the energy still changed by %.1e hartree, the commutator was %.1e",
		e.Iterations, e.Change, e.Residual)
}

// An attempt is one way of making the field converge.
type attempt struct {
	name    string
	damping float64 // while the commutator is above calm
	shift   float64 // hartree, while the commutator is above near
	plain   int     // iterations without extrapolation to begin with
	smear   float64 // temperature of the occupations, hartree, while the commutator is above near
}

// The attempts, mild ones first. Shifts, damping and smearing vanish near
// convergence, where they would only cost iterations. Smeared occupations let two
// configurations that take turns settle first (A. D. Rabuck, G. E. Scuseria, J.
// Chem. Phys. 1999, 110, 695).
var attempts = []attempt{
	{name: "DIIS"},
	{name: "DIIS with damping and level shift", damping: 0.5, shift: 0.5},
	{name: "level shift before DIIS", damping: 0.3, shift: 1, plain: 30},
	{name: "strong level shift and damping before DIIS", damping: 0.7, shift: 3, plain: 60},
	{name: "smeared occupations", damping: 0.3, smear: 0.05},
}

const (
	calm          = 0.1  // commutator from which on nothing is damped
	near          = 1e-2 // commutator from which on no level is shifted
	narrow        = 0.1  // gap, hartree, below which levels are shifted at once
	narrowShift   = 0.3  // hartree
	diisKeep      = 8
	maxIterations = 60 // of an attempt, after its plain ones
)

// converge iterates to self-consistency from the densities that guess puts into
// f.densities, and returns the number of iterations. accuracy 1 asks for an
// energy that changes by less than 1e-7 hartree and a commutator below 1e-5.
func (f *field) converge(ctx context.Context, accuracy float64, guess func()) (iterations int, err error) {
	last := &NotConverged{}
	for _, way := range attempts {
		guess()
		it, err := f.try(ctx, way, accuracy)
		iterations += it.N
		if err == nil {
			return iterations, nil
		}
		if !errors.Is(err, scf.ErrNotConverged) {
			return iterations, err
		}
		last = &NotConverged{Iterations: iterations, Change: it.Change, Residual: f.residual}
	}
	return iterations, last
}

func (f *field) try(ctx context.Context, way attempt, accuracy float64) (scf.Iteration, error) {
	start, err := f.start(ctx)
	if err != nil {
		return scf.Iteration{}, err
	}
	mixer := &guided{field: f, way: way, diis: scf.NewDIIS(len(start), diisKeep)}
	loop := scf.Loop{
		Step:    f.step,
		Mixer:   mixer,
		MaxIter: way.plain + maxIterations,
		Done: func(it scf.Iteration) bool {
			return math.Abs(it.Change) < 1e-7*accuracy && f.residual < 1e-5*accuracy && f.shift == 0 && f.damping == 0 && f.smear == 0
		},
	}
	_, it, err := loop.Solve(ctx, start)
	return it, err
}

// guided is DIIS that also sets, for the step to come, how much of the old
// density stays and how far empty levels are lifted.
type guided struct {
	field *field
	way   attempt
	diis  *scf.DIIS
	n     int
	rises int     // times in a row that the energy rose
	last  float64 // energy, hartree
}

func (g *guided) Next(in []float64, out scf.Output) []float64 {
	f := g.field
	if g.n > 0 && out.Energy > g.last+1e-9 {
		g.rises++
	} else {
		g.rises = 0
	}
	g.n, g.last = g.n+1, out.Energy
	f.damping, f.shift, f.smear = 0, 0, 0
	if f.residual > calm {
		f.damping = g.way.damping
	}
	if f.residual > near {
		f.smear = g.way.smear
		f.shift = g.way.shift
		if f.gap < narrow || g.rises > 1 {
			f.shift = max(f.shift, narrowShift)
		}
	}
	next := g.diis.Next(in, out)
	if g.n <= g.way.plain {
		return out.State
	}
	return next
}
