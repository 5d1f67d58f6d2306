package scf

import "math"

// Within returns a Done that holds when the energy changed by less than energy
// (hartree) and the rms residual is below residual. The first iteration, which
// has nothing to compare with, counts its whole energy as the change.
func Within(energy, residual float64) func(Iteration) bool {
	return func(it Iteration) bool {
		return math.Abs(it.Change) < energy && it.Residual < residual
	}
}
