package forcefield

import (
	"context"

	"torsieve/internal/relax"
)

// slope is the surface as the optimiser wants it; it allocates nothing.
type slope struct{ s *Surface }

func (f slope) Gradient(ctx context.Context, grad, x []float64) (float64, error) {
	return f.s.sum(ctx, nil, grad, x)
}

// Slope returns the surface as the optimiser wants it: energy and gradient
// without the parts, and without allocating. It uses s and goes with it.
func (s *Surface) Slope() relax.Surface { return slope{s} }

// mostModelled is the number of atoms up to which a model Hessian is worth its
// cubic cost.
const mostModelled = 250

// Minimise relaxes x (3N, bohr) in place; see relax.Minimise. It starts from a
// model Hessian, and keeps its memory for the next call.
func (s *Surface) Minimise(ctx context.Context, x []float64, set relax.Settings) (relax.Result, error) {
	s.check(x)
	if s.minimiser == nil {
		s.minimiser = relax.NewMinimiser(len(x))
	}
	if set.Numbers = s.tables.numbers; len(set.Numbers) > mostModelled {
		set.Numbers = nil
	}
	return s.minimiser.Minimise(ctx, slope{s}, x, set)
}
