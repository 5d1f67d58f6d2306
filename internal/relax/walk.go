package relax

import (
	"math"

	"gonum.org/v1/gonum/floats"
)

const (
	walks      = 6    // corrections of a step at most
	closeToEnd = 0.01 // bohr: such a correction is the last
)

// A walker turns steps in internal coordinates into geometries: atoms that a
// torsion moves go round on arcs, not straight on.
type walker struct {
	want, rest []float64 // change of the internal coordinates; what is left of it, weighted
	fix        []float64 // correction of the Cartesian coordinates
	matrix     []float64 // n*n
}

// walk writes into y where the step takes x, and takes there to it; here is the
// frame at x. It corrects x + step until the internal coordinates have changed
// as B step says, as nearly as they can: they are more than there are
// Cartesian ones, and the stiff ones have the say.
// Source of the iteration: Pulay, Fogarasi, J. Chem. Phys. 1992, 96, 2856.
func (w *walker) walk(s *scheme, here, there *frame, y, x, step []float64) {
	w.want, w.rest = sized(w.want, len(s.coords)), sized(w.rest, len(s.coords))
	here.down(s, w.want, step)
	floats.AddTo(y, x, step)
	there.set(s, y)
	last := math.Inf(1)
	for range walks {
		here.changes(s, w.rest, there)
		for c, k := range s.stiffness {
			w.rest[c] = k * (w.want[c] - w.rest[c])
		}
		there.up(s, w.fix, w.rest)
		there.square(s, w.matrix, s.stiffness, ridge)
		if !cholesky(here.n, w.matrix) {
			return
		}
		solveCholesky(here.n, w.matrix, w.fix)
		way := longest(w.fix)
		if !(way < last) {
			return // it does not come nearer
		}
		last = way
		floats.Add(y, w.fix)
		there.set(s, y)
		if way < closeToEnd {
			return
		}
	}
}
