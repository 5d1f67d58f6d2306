package linalg

import (
	"math"

	gonum "gonum.org/v1/gonum/blas/gonum"
)

const (
	choleskyBlock = 48
	solveBlock    = 16 // rows that are solved one by one
)

// Cholesky overwrites the lower triangle of the symmetric a (n*n numbers) with L,
// L L^T = a, and the upper one with zeros. Only the lower triangle is read.
//
// Where a pivot is below tiny times the diagonal element that it came from, the
// row belongs to a combination that the rows before it make up already: it is
// left out. L then has one on the diagonal there and zeros below, and the row's
// number is in dropped; the caller clears that row of whatever it solves for.
// Errors: ErrNotFinite.
func (w *Workspace) Cholesky(a []float64, n int, tiny float64) (dropped []int, err error) {
	if len(a) != n*n {
		panic("linalg: matrix of the wrong size")
	}
	diagonal := make([]float64, n)
	for i := range diagonal {
		diagonal[i] = a[i*n+i]
	}
	for k := 0; k < n; k += choleskyBlock {
		end := min(k+choleskyBlock, n)
		for j := k; j < end; j++ {
			pivot := a[j*n+j] - dot(a[j*n+k:j*n+j], a[j*n+k:j*n+j])
			if math.IsNaN(pivot) || math.IsInf(pivot, 0) {
				return nil, ErrNotFinite
			}
			if !(pivot > tiny*diagonal[j]) {
				dropped = append(dropped, j)
				clear(a[j*n : j*n+j])
				a[j*n+j] = 1
				for i := j + 1; i < n; i++ {
					a[i*n+j] = 0
				}
				continue
			}
			root := math.Sqrt(pivot)
			a[j*n+j] = root
			row := a[j*n+k : j*n+j]
			for i := j + 1; i < n; i++ {
				a[i*n+j] = (a[i*n+j] - dot(a[i*n+k:i*n+j], row)) / root
			}
		}
		w.updateTrailing(a, n, k, end)
	}
	for i := range n {
		clear(a[i*n+i+1 : (i+1)*n])
	}
	return dropped, nil
}

// updateTrailing takes the product of columns k..end off the triangle below them.
func (w *Workspace) updateTrailing(a []float64, n, k, end int) {
	const block = 192
	for i := end; i < n; i += block {
		rows := min(block, n-i)
		w.Gemm(false, true, rows, i+rows-end, end-k, -1, a[i*n+k:], n, a[end*n+k:], n, 1, a[i*n+end:], n)
	}
}

// SolveLower overwrites b, n rows of columns numbers ldb apart, with the solution
// X of L X = b, l holding the lower triangular L row by row.
func (w *Workspace) SolveLower(l []float64, n int, b []float64, columns, ldb int) {
	checkMatrix(n, n, l, n)
	checkMatrix(n, columns, b, ldb)
	w.solveLower(l, n, 0, n, b, columns, ldb)
}

// solveLower solves for rows lo..hi, from which those before are taken off.
func (w *Workspace) solveLower(l []float64, n, lo, hi int, b []float64, columns, ldb int) {
	if hi-lo <= solveBlock {
		for i := lo; i < hi; i++ {
			row := b[i*ldb : i*ldb+columns]
			for j := lo; j < i; j++ {
				gonum.Implementation{}.Daxpy(columns, -l[i*n+j], b[j*ldb:j*ldb+columns], 1, row, 1)
			}
			gonum.Implementation{}.Dscal(columns, 1/l[i*n+i], row, 1)
		}
		return
	}
	mid := lo + (hi-lo)/2/solveBlock*solveBlock
	if mid == lo {
		mid = lo + solveBlock
	}
	w.solveLower(l, n, lo, mid, b, columns, ldb)
	w.Gemm(false, false, hi-mid, columns, mid-lo, -1, l[mid*n+lo:], n, b[lo*ldb:], ldb, 1, b[mid*ldb:], ldb)
	w.solveLower(l, n, mid, hi, b, columns, ldb)
}

// SolveLowerTransposed overwrites the vector x with the solution of L^T y = x.
func SolveLowerTransposed(l []float64, n int, x []float64) {
	for i := n - 1; i >= 0; i-- {
		x[i] /= l[i*n+i]
		v := x[i]
		for j, c := range l[i*n : i*n+i] {
			x[j] -= v * c
		}
	}
}
