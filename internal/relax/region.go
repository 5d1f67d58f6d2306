package relax

import (
	"math"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/gonum"
	"gonum.org/v1/gonum/floats"
	lapack "gonum.org/v1/gonum/lapack/gonum"
)

// A region finds the lowest point of a quadratic function within a radius.
type region struct {
	n      int
	curve  []float64 // n*n, lower triangle: the curvature
	metric []float64 // n*n, lower triangle: what measures lengths
	factor []float64 // n*n, Cholesky's factor of curve + mu metric
	step   []float64
	length float64   // of step
	mark   []float64 // metric times step
	solved []float64
}

func newRegion(n int) *region {
	return &region{
		n: n, curve: make([]float64, n*n), metric: make([]float64, n*n), factor: make([]float64, n*n),
		step: make([]float64, n), mark: make([]float64, n), solved: make([]float64, n),
	}
}

// within fills step with the lowest point for the gradient g, its length being
// at most radius to within a tenth, and returns how far down the whole
// parabola would go. False says that the matrices are not positive.
// Source: J. J. More, D. C. Sorensen, SIAM J. Sci. Stat. Comput. 1983, 4, 553, as
// in Nocedal, Wright, Numerical Optimization (2nd ed., 2006), algorithm 4.3.
func (r *region) within(g []float64, radius float64) (below float64, ok bool) {
	mu := 0.0
	for try := 0; try < 20; try++ {
		if !r.solve(g, mu) {
			return 0, false
		}
		if try == 0 {
			below = -0.5 * floats.Dot(g, r.step)
		}
		if r.length <= 1.1*radius {
			break
		}
		copy(r.solved, r.mark)
		solveCholesky(r.n, r.factor, r.solved)
		mu += r.length * r.length / floats.Dot(r.mark, r.solved) * (r.length - radius) / radius
	}
	return below, true
}

// solve fills step with -(curve + mu metric)^-1 g, and length.
func (r *region) solve(g []float64, mu float64) bool {
	for i := range r.n {
		row := r.factor[i*r.n : i*r.n+i+1]
		floats.AddScaledTo(row, r.curve[i*r.n:i*r.n+i+1], mu, r.metric[i*r.n:i*r.n+i+1])
	}
	if !cholesky(r.n, r.factor) {
		return false
	}
	floats.ScaleTo(r.step, -1, g)
	solveCholesky(r.n, r.factor, r.step)
	gonum.Implementation{}.Dsymv(blas.Lower, r.n, 1, r.metric, r.n, r.step, 1, 0, r.mark, 1)
	r.length = math.Sqrt(math.Max(0, floats.Dot(r.mark, r.step)))
	return true
}

// shorten brings the step down to a share of its length.
func (r *region) shorten(share float64) {
	floats.Scale(share, r.step)
	r.length *= share
}

// cholesky factorises the lower triangle of a in place.
func cholesky(n int, a []float64) bool {
	return lapack.Implementation{}.Dpotrf(blas.Lower, n, a, n)
}

// solveCholesky replaces d by the inverse of the factorised matrix times d.
func solveCholesky(n int, factor, d []float64) {
	var impl gonum.Implementation
	impl.Dtrsv(blas.Lower, blas.NoTrans, blas.NonUnit, n, factor, n, d, 1)
	impl.Dtrsv(blas.Lower, blas.Trans, blas.NonUnit, n, factor, n, d, 1)
}
