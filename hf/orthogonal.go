package hf

import (
	"fmt"
	"math"

	"torsieve/internal/linalg"
)

// dependent is the eigenvalue of the overlap matrix under which a combination
// of functions counts as linearly dependent and is left out.
const dependent = 1e-7

// An orthogonal basis holds the rows X with X S X^T = 1 (canonical
// orthogonalisation; P.-O. Lowdin, Adv. Phys. 1956, 5, 1).
type orthogonal struct {
	n        int // functions
	rows     int // of X; fewer than n where functions are linearly dependent
	x        []float64
	smallest float64 // eigenvalue of S

	work linalg.Workspace
	half []float64
}

// newOrthogonal takes the n by n overlap matrix.
func newOrthogonal(s []float64, n int) (*orthogonal, error) {
	o := &orthogonal{n: n, x: make([]float64, n*n)}
	values, a := make([]float64, n), append([]float64(nil), s...)
	if err := linalg.NewEigen(n).Solve(a, values, o.x); err != nil {
		return nil, fmt.Errorf("hf: overlap matrix: %w", err)
	}
	o.smallest = values[0]
	for k, v := range values {
		if v < dependent {
			continue
		}
		src, dst := o.x[k*n:(k+1)*n], o.x[o.rows*n:(o.rows+1)*n]
		f := 1 / math.Sqrt(v)
		for i := range dst {
			dst[i] = f * src[i]
		}
		o.rows++
	}
	o.x = o.x[:o.rows*n]
	o.half = make([]float64, o.rows*n)
	return o, nil
}

// transform writes X F X^T into dst, rows by rows.
func (o *orthogonal) transform(dst, f []float64) {
	m, n := o.rows, o.n
	o.work.Gemm(false, false, m, n, n, 1, o.x, n, f, n, 0, o.half, n)
	o.work.Gemm(false, true, m, m, n, 1, o.half, n, o.x, n, 0, dst, m)
}

// orbitals writes the first k rows of z, which are over the rows of X, as rows
// over functions into c.
func (o *orthogonal) orbitals(c, z []float64, k int) {
	if k > 0 {
		o.work.Gemm(false, false, k, o.n, o.rows, 1, z, o.rows, o.x, o.n, 0, c, o.n)
	}
}
