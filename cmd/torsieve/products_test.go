package main

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/blas64"
	"gonum.org/v1/gonum/blas/gonum"
	lapack "gonum.org/v1/gonum/lapack/gonum"
)

// The product that gonum is handed is gonum's, whatever the shapes.
func TestFastProductsAreProducts(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	matrix := func(n int) []float64 {
		x := make([]float64, n)
		for i := range x {
			x[i] = r.NormFloat64()
		}
		return x
	}
	for _, size := range [][3]int{{1, 1, 1}, {7, 3, 5}, {33, 17, 29}, {64, 40, 80}} {
		m, n, k := size[0], size[1], size[2]
		for _, ta := range []blas.Transpose{blas.NoTrans, blas.Trans} {
			for _, tb := range []blas.Transpose{blas.NoTrans, blas.Trans} {
				lda, ldb, ldc := k+2, n+1, n+3
				a, b := matrix(m*lda), matrix(k*ldb)
				if ta == blas.Trans {
					lda = m + 2
					a = matrix(k * lda)
				}
				if tb == blas.Trans {
					ldb = k + 1
					b = matrix(n * ldb)
				}
				c := matrix(m * ldc)
				want := append([]float64(nil), c...)
				gonum.Implementation{}.Dgemm(ta, tb, m, n, k, 1.5, a, lda, b, ldb, -0.5, want, ldc)
				fastProducts{}.Dgemm(ta, tb, m, n, k, 1.5, a, lda, b, ldb, -0.5, c, ldc)
				for i := range c {
					if math.Abs(c[i]-want[i]) > 1e-12*float64(k+1) {
						t.Fatalf("%d x %d x %d, %c %c: element %d is %g, want %g", m, n, k, ta, tb, i, c[i], want[i])
					}
				}
			}
		}
	}
}

// A factorisation of gonum's with it gives the matrix back.
func TestFactorisationWithFastProducts(t *testing.T) {
	before := blas64.Implementation()
	blas64.Use(fastProducts{})
	defer blas64.Use(before)
	const n = 150
	r := rand.New(rand.NewPCG(5, 6))
	x := make([]float64, n*n)
	for i := range x {
		x[i] = r.NormFloat64()
	}
	a := make([]float64, n*n)
	gonum.Implementation{}.Dgemm(blas.NoTrans, blas.Trans, n, n, n, 1, x, n, x, n, 0, a, n)
	for i := range n {
		a[i*n+i] += n
	}
	l := append([]float64(nil), a...)
	if !(lapack.Implementation{}).Dpotrf(blas.Lower, n, l, n) {
		t.Fatal("not positive definite")
	}
	for i := range n {
		for j := range i + 1 {
			var sum float64
			for k := range j + 1 {
				sum += l[i*n+k] * l[j*n+k]
			}
			if math.Abs(sum-a[i*n+j]) > 1e-10*n {
				t.Fatalf("element %d, %d is %g, want %g", i, j, sum, a[i*n+j])
			}
		}
	}
}
