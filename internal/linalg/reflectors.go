package linalg

// reflectors multiplies Householder reflections together, in blocks, so that
// most of the work is matrix products.
//
// Source: R. Schreiber, C. Van Loan, SIAM J. Sci. Stat. Comput. 1989, 10, 53:
// a product of reflections 1 - tau u u^T is 1 - U^T T U, the vectors being the
// rows of U and T an upper triangle.
type reflectors struct {
	work          Workspace
	gram, t       []float64 // reflectorBlock squared
	left, product []float64 // n rows of reflectorBlock numbers
}

// reflectorBlock is how many reflections are put together.
const reflectorBlock = 32

func newReflectors(n int) reflectors {
	const b = reflectorBlock
	return reflectors{
		gram: make([]float64, b*b), t: make([]float64, b*b),
		left: make([]float64, n*b), product: make([]float64, n*b),
	}
}

// transformation writes H_1 H_2 ... H_(n-1), the transpose of the matrix whose
// columns are the tridiagonal basis, into z, n rows of ld numbers; H_i acts on
// the first i coordinates.
func (r *reduction) transformation(z []float64) {
	n := r.n
	for i := range n {
		row := z[i*r.ld : (i+1)*r.ld]
		clear(row)
		row[i] = 1
	}
	for from := 1; from < n; from += reflectorBlock {
		r.multiplyBlock(z, from, min(from+reflectorBlock, n))
	}
}

// multiplyBlock multiplies z, which is not yet more than the unit matrix from
// row and column from-1 on, by H_from ... H_(to-1) from the right.
func (r *reduction) multiplyBlock(z []float64, from, to int) {
	const b = reflectorBlock
	f := &r.reflectors
	count, size := to-from, to-1 // reflections, and coordinates that they touch
	u := r.m[from*r.ld:]         // rows: the vectors
	f.work.Gemm(false, true, count, count, size, 1, u, r.ld, u, r.ld, 0, f.gram, b)
	f.triangle(r.tau[from:to])
	f.work.Gemm(false, true, size, count, size, 1, z, r.ld, u, r.ld, 0, f.left, b)
	f.work.Gemm(false, false, size, count, count, 1, f.left, b, f.t, b, 0, f.product, b)
	f.work.Gemm(false, false, size, size, count, -1, f.product, b, u, r.ld, 1, z, r.ld)
}

// triangle computes T from the inner products of the vectors, in gram.
func (f *reflectors) triangle(tau []float64) {
	const b = reflectorBlock
	clear(f.t)
	for j, tauJ := range tau {
		f.t[j*b+j] = tauJ
		for i := range j {
			sum := 0.0
			for k := i; k < j; k++ {
				sum += f.t[i*b+k] * f.gram[k*b+j]
			}
			f.t[i*b+j] = -tauJ * sum
		}
	}
}
