package main

import (
	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/gonum"

	"torsieve/internal/linalg"
)

// fastProducts hands gonum the matrix product of internal/linalg, for the
// factorisations that are left to gonum. main alone registers it: a library has
// no say in what its user's products are done with.
type fastProducts struct{ gonum.Implementation }

// smallProduct is the number of multiplications below which gonum's own product
// takes no longer.
const smallProduct = 16 * 16 * 16

// Dgemm computes C = alpha op(A) op(B) + beta C, as gonum's does.
func (p fastProducts) Dgemm(ta, tb blas.Transpose, m, n, k int, alpha float64, a []float64, lda int, b []float64, ldb int, beta float64, c []float64, ldc int) {
	if m*n*k < smallProduct {
		p.Implementation.Dgemm(ta, tb, m, n, k, alpha, a, lda, b, ldb, beta, c, ldc)
		return
	}
	linalg.Gemm(ta != blas.NoTrans, tb != blas.NoTrans, m, n, k, alpha, a, lda, b, ldb, beta, c, ldc)
}
