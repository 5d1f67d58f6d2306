package relax

import (
	"errors"
	"math"
)

// A newton minimises in internal coordinates: the Hessian is a guess that
// learns, each step the best one within a radius that follows from how well the
// last one was foreseen. It takes a third of the gradients of L-BFGS in Cartesian
// coordinates, and a time of its own that grows with the cube of the atoms.
type newton struct {
	scheme      scheme
	here, there *frame // at the accepted point and at the one tried
	curvature   curvature
	region      *region
	walker      walker
	dq, gq, gq2 []float64 // step and gradients in internal coordinates
	solved      []float64
	hb          []float64 // 2*m*n, scratch
	radius      float64
}

const (
	firstRadius = 0.6  // bohr and rad, torsions of a bond counting once
	lastRadius  = 1e-4 // below it a step tells nothing
	mostRadius  = 1.5
	longestStep = 1.2  // bohr, of one atom
	ridge       = 1e-6 // hartree/bohr^2, for the sake of the factorisation
	lostPivot   = 1e-6 // of the metric: a motion that no coordinate has
)

func newNewton(atoms int) *newton {
	n := 3 * atoms
	return &newton{
		scheme: scheme{bonds: newNet(atoms)}, here: newFrame(n), there: newFrame(n), region: newRegion(n),
		walker: walker{fix: make([]float64, n), matrix: make([]float64, n*n)}, solved: make([]float64, n),
	}
}

// errLost says that internal coordinates do not describe the geometry.
var errLost = errors.New("relax: no internal coordinates")

// begin chooses coordinates at x and forgets what was learned.
func (w *newton) begin(x, grad []float64, numbers []int) error {
	s := &w.scheme
	s.choose(x, numbers)
	w.here.set(s, x)
	if !w.complete() {
		s.places()
		w.here.set(s, x)
	}
	m := len(s.coords)
	w.curvature.guess(s.stiffness)
	w.dq, w.gq, w.gq2 = sized(w.dq, m), sized(w.gq, m), sized(w.gq2, m)
	w.hb = sized(w.hb, 2*m*len(x))
	w.radius = firstRadius
	return w.inner(w.gq, w.here, grad)
}

// complete says whether the coordinates have all motions but the rigid ones.
func (w *newton) complete() bool {
	a := w.region.factor
	n := w.here.n
	w.here.square(&w.scheme, a, w.scheme.weight, 1e-3*lostPivot)
	if !cholesky(n, a) {
		return false
	}
	for i := range n {
		if p := a[i*n+i]; p*p < lostPivot {
			return false
		}
	}
	return true
}

// inner takes the rigid motions out of the gradient g and writes it in internal
// coordinates, W B (B^T W B)^-1 g, with the weights W.
func (w *newton) inner(gq []float64, f *frame, g []float64) error {
	f.internalOnly(g)
	a := w.region.factor
	f.square(&w.scheme, a, w.scheme.weight, 1e-3*lostPivot)
	if !cholesky(f.n, a) {
		return errLost
	}
	copy(w.solved, g)
	solveCholesky(f.n, a, w.solved)
	f.down(&w.scheme, gq, w.solved)
	for c, v := range w.scheme.weight {
		gq[c] *= v
	}
	return nil
}

// plan finds the next step, and returns how far the energy would fall on the
// way to the bottom of the parabola.
func (w *newton) plan(g []float64) (float64, error) {
	w.here.project(&w.scheme, w.region.curve, w.curvature.h, w.hb, ridge)
	w.here.square(&w.scheme, w.region.metric, w.scheme.weight, 0)
	below, ok := w.region.within(g, w.radius)
	if !ok {
		return 0, errLost
	}
	if l := longest(w.region.step); l > longestStep {
		w.region.shorten(longestStep / l)
	}
	return below, nil
}

// judge sets the radius by the promised change of energy and the true one.
// Source: Nocedal, Wright, Numerical Optimization (2nd ed., 2006), algorithm 4.1.
func (w *newton) judge(promise, change, noise float64) {
	if math.Abs(promise) < noise && math.Abs(change) < noise {
		return
	}
	switch ratio := change / promise; {
	case !(ratio > 0.25) || promise > 0:
		w.radius = 0.35 * w.region.length
	case ratio > 0.7 && w.region.length > 0.8*w.radius:
		w.radius = math.Min(2*w.radius, mostRadius)
	}
}
