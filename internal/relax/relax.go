// Package relax is the optimiser of the tiers that have gradients. It has two
// ways down. Where a gradient costs little: L-BFGS in Cartesian coordinates with
// a cap on the step, a line search that uses the slope, and, where the atomic
// numbers are given, a model Hessian as its first guess of the curvature. Where
// a gradient costs much: steps in internal coordinates within a radius of trust,
// with a Hessian that learns.
//
// Both are deterministic and allocate nothing once a minimisation runs.
package relax

import (
	"context"
	"errors"
	"fmt"
	"math"
)

// A Surface gives an energy and its gradient.
//
// Gradient writes dE/dx into grad, len(grad) == len(x), and neither keeps nor
// changes x. It returns ctx.Err() soon after ctx ends; any other error is about
// x alone, and the minimiser answers it with a shorter step where it can.
type Surface interface {
	Gradient(ctx context.Context, grad, x []float64) (energy float64, err error)
}

// A Func is a function that serves as a Surface.
type Func func(ctx context.Context, grad, x []float64) (float64, error)

// Gradient calls f.
func (f Func) Gradient(ctx context.Context, grad, x []float64) (float64, error) {
	return f(ctx, grad, x)
}

// Settings say when to stop and how far to step. A criterion of 0 does not
// count; at least one of the gradient criteria must be set. Energies in
// hartree, lengths in bohr.
type Settings struct {
	MaxGradients int     // evaluations; 0: 50 + 10 per atom
	RMSGradient  float64 // root mean square over the components
	MaxGradient  float64 // largest component
	EnergyChange float64 // of the last step; L-BFGS alone
	Descent      float64 // to the minimum, as the learned Hessian foresees it; internal coordinates alone
	MaxStep      float64 // longest way of one atom in one step; 0: 0.4; L-BFGS alone
	Noise        float64 // by how much the surface's energy may be wrong; 0: 1e-10

	// Numbers are the atomic numbers for the model Hessian; nil goes without.
	// It saves steps where a gradient costs more than a solution of 3N linear
	// equations.
	Numbers []int

	// Internal goes by internal coordinates: a third of the gradients, and some
	// milliseconds of its own for each one of a molecule of 50 atoms. It wants a
	// surface on which a molecule may be moved and turned freely: molecules keep
	// their place, and what the gradient has along such motions does not count.
	// Where internal coordinates fail, or without Numbers, it goes by L-BFGS.
	Internal bool
}

// A Result says how a minimisation ended. Energy and gradient are those of the
// geometry that is handed back.
type Result struct {
	Energy      float64 // hartree
	Gradients   int     // evaluations of the surface
	RMSGradient float64 // hartree/bohr
	MaxGradient float64 // largest component, hartree/bohr
	Status      Status
}

// Minimise moves x (3N, bohr) downhill in place until set is satisfied. When it
// returns, x is the last accepted geometry, whatever happened.
//
// The error is ctx.Err(), or the surface's own where no step could avoid it;
// how a minimisation without error ended is in Result.Status. Panics if x is
// not made of triples, or if no gradient criterion is set.
func Minimise(ctx context.Context, s Surface, x []float64, set Settings) (Result, error) {
	return NewMinimiser(len(x)).Minimise(ctx, s, x, set)
}

// A Minimiser keeps the memory of a minimisation for the next one of the same
// size. One goroutine at a time.
type Minimiser struct {
	history   *history // of L-BFGS
	model     *model
	newton    *newton   // of internal coordinates
	grad, dir []float64 // at the accepted point; where to go
	trial     []float64 // the point being tried, and its gradient
	trialGrad []float64
}

// NewMinimiser prepares for n coordinates.
func NewMinimiser(n int) *Minimiser {
	return &Minimiser{
		grad:      make([]float64, n),
		dir:       make([]float64, n),
		trial:     make([]float64, n),
		trialGrad: make([]float64, n),
	}
}

// Minimise is the function of this name with the Minimiser's memory; x must
// have the length that NewMinimiser was told.
func (m *Minimiser) Minimise(ctx context.Context, s Surface, x []float64, set Settings) (Result, error) {
	set = set.complete(len(x))
	if len(x) != len(m.grad) {
		panic(fmt.Sprintf("relax: %d coordinates for a minimiser of %d", len(x), len(m.grad)))
	}
	var res Result
	energy, err := s.Gradient(ctx, m.grad, x)
	res.Gradients = 1
	if err != nil {
		return res, err
	}
	res.record(energy, m.grad)
	if !finite(energy, m.grad) {
		res.Status = Exploded
		return res, nil
	}
	if set.Internal && set.Numbers != nil {
		err := m.internal(ctx, s, x, set, &res)
		if !errors.Is(err, errLost) {
			return res, err
		}
	}
	err = m.cartesian(ctx, s, x, set, &res)
	return res, err
}

// complete fills the defaults in and refuses settings that could never end.
func (set Settings) complete(n int) Settings {
	if n%3 != 0 || set.Numbers != nil && 3*len(set.Numbers) != n {
		panic(fmt.Sprintf("relax: %d coordinates, %d atoms", n, len(set.Numbers)))
	}
	if set.RMSGradient <= 0 && set.MaxGradient <= 0 {
		panic("relax: no gradient criterion is set")
	}
	if set.MaxGradients == 0 {
		set.MaxGradients = 50 + 10*n/3
	}
	if set.MaxStep == 0 {
		set.MaxStep = 0.4
	}
	if set.Noise == 0 {
		set.Noise = 1e-10
	}
	return set
}

// under says whether the gradient is below f times its limits.
func (set Settings) under(r Result, f float64) bool {
	return (set.RMSGradient <= 0 || r.RMSGradient <= f*set.RMSGradient) &&
		(set.MaxGradient <= 0 || r.MaxGradient <= f*set.MaxGradient)
}

// record takes the accepted point over.
func (r *Result) record(energy float64, grad []float64) {
	r.Energy = energy
	var sum, largest float64
	for _, g := range grad {
		sum += g * g
		largest = math.Max(largest, math.Abs(g))
	}
	r.MaxGradient = largest
	r.RMSGradient = math.Sqrt(sum / math.Max(1, float64(len(grad))))
}

func finite(energy float64, grad []float64) bool {
	sum := energy
	for _, g := range grad {
		sum += math.Abs(g)
	}
	return !math.IsNaN(sum) && !math.IsInf(sum, 0)
}
