package linalg

import (
	"fmt"
	"math"
)

// Generalised solves F c = e S c for symmetric F and positive definite S of one
// size, with many F for each S. It owns its scratch memory and serves one
// goroutine at a time; nothing is allocated after the first solution.
type Generalised struct {
	n       int
	eigen   *Eigen
	work    Workspace
	inverse []float64 // of the lower Cholesky factor of S
	pivot   float64
	a, b    []float64
}

// NewGeneralised prepares for matrices of n rows.
func NewGeneralised(n int) *Generalised {
	return &Generalised{
		n: n, eigen: NewEigen(n),
		inverse: make([]float64, n*n), a: make([]float64, n*n), b: make([]float64, n*n),
	}
}

// A NotPositiveError says that a matrix that should be positive definite is
// not, or only within rounding.
type NotPositiveError struct {
	Row   int     // whose pivot is wrong
	Pivot float64 // what was left of the diagonal there, at most 0, or NaN
}

func (e *NotPositiveError) Error() string {
	return fmt.Sprintf("linalg: matrix is not positive definite: pivot %g in row %d", e.Pivot, e.Row)
}

// Factor takes over S, n*n numbers of which the lower triangle is read. The
// error is a *NotPositiveError.
func (g *Generalised) Factor(s []float64) error {
	n := g.n
	if len(s) != n*n {
		panic("linalg: matrix of the wrong size")
	}
	if n == 0 {
		g.pivot = 1
		return nil
	}
	copy(g.inverse, s)
	pivot, ok := g.work.InverseFactor(g.inverse, n)
	if !ok {
		return g.findPivot(s)
	}
	g.pivot = pivot
	return nil
}

// SmallestPivot returns, after Factor, the square of the smallest diagonal
// element of the Cholesky factor: for an overlap matrix of normalised
// functions, how much of a function the ones before it cannot replace. Small
// numbers warn of near linear dependence.
func (g *Generalised) SmallestPivot() float64 { return g.pivot }

// Orthogonal returns, after Factor, vectors x_k with x_k S x_l = 1 for k = l and
// else 0, as rows: the inverse of the Cholesky factor. The slice is the
// solver's own and good until the next Factor.
func (g *Generalised) Orthogonal() []float64 { return g.inverse }

// findPivot decomposes s, which is known not to be positive definite, slowly.
func (g *Generalised) findPivot(s []float64) error {
	n, l := g.n, g.a
	for i := range n {
		for j := range i + 1 {
			sum := s[i*n+j]
			for k := range j {
				sum -= l[i*n+k] * l[j*n+k]
			}
			if i != j {
				l[i*n+j] = sum / l[j*n+j]
				continue
			}
			if !(sum > 0) {
				return &NotPositiveError{Row: i, Pivot: sum}
			}
			l[i*n+i] = math.Sqrt(sum)
		}
	}
	return &NotPositiveError{Row: n - 1, Pivot: 0}
}

// Solve writes the eigenvalues of the symmetric F, n*n numbers, against the S of Factor into
// w, in rising order, and the eigenvectors into the rows of c: c[k*n:(k+1)*n]
// belongs to w[k], and c_k S c_l is one for k = l and else zero. f stays as it
// is. Errors are those of Eigen.Solve.
func (g *Generalised) Solve(f, w, c []float64) error {
	n := g.n
	if len(f) != n*n || len(c) != n*n || len(w) != n {
		panic("linalg: eigenproblem of the wrong size")
	}
	if n == 0 {
		return nil
	}
	g.transform(f)
	if err := g.eigen.Solve(g.b, w, g.a); err != nil {
		return err
	}
	g.transformBack(c)
	return nil
}

// triangleBlock is the size of the blocks in which products with a triangle are
// done, to leave out most of its zeros.
const triangleBlock = 48

// transform computes the lower triangle of inverse F inverse^T, in b.
func (g *Generalised) transform(f []float64) {
	n := g.n
	g.work.LowerTimes(g.a, g.inverse, f, n, n)
	for from := 0; from < n; from += triangleBlock {
		to := min(from+triangleBlock, n)
		g.work.Gemm(false, true, n-from, to-from, to, 1, g.a[from*n:], n, g.inverse[from*n:], n, 0, g.b[from*n+from:], n)
	}
}

// transformBack computes C = A inverse, A having the eigenvectors as rows.
func (g *Generalised) transformBack(c []float64) {
	n := g.n
	for from := 0; from < n; from += triangleBlock {
		to := min(from+triangleBlock, n)
		g.work.Gemm(false, false, n, to-from, n-from, 1, g.a[from:], n, g.inverse[from*n+from:], n, 0, c[from:], n)
	}
}
