package linalg

import (
	"sync"

	"gonum.org/v1/gonum/blas"
	gonum "gonum.org/v1/gonum/blas/gonum"
)

// tile is a micro-kernel: micro adds the product of a packed panel of rows of A
// and a packed panel of columns of B to a tile of C.
type tile struct {
	rows, columns int
	micro         func(k int, a, b, c *float64, ldc int)
	// gather is micro for rows of B, a whole panel wide, that stand where rows
	// says, ldb numbers apart.
	gather func(k int, a, b *float64, rows *int32, ldb int, c *float64, ldc int)
}

// A Workspace is scratch memory for products, for one goroutine. The zero value
// is ready; it grows to what the largest product needs and stays so.
type Workspace struct {
	a, b, edge []float64
	scaled     []float64
	half       []float64
}

var workspaces = sync.Pool{New: func() any { return new(Workspace) }}

// Gemm computes C = alpha op(A) op(B) + beta C, with memory from a pool; see
// Workspace.Gemm.
func Gemm(transA, transB bool, m, n, k int, alpha float64, a []float64, lda int, b []float64, ldb int, beta float64, c []float64, ldc int) {
	w := workspaces.Get().(*Workspace)
	w.Gemm(transA, transB, m, n, k, alpha, a, lda, b, ldb, beta, c, ldc)
	workspaces.Put(w)
}

// Gemm computes C = alpha op(A) op(B) + beta C, where op is the transpose if so
// wanted, op(A) has m rows and k columns, op(B) k rows and n columns, and C m
// rows and n columns; lda, ldb and ldc are the distances between rows in
// memory. C must not overlap A or B. If beta is 0, what is in C does not matter.
func (w *Workspace) Gemm(transA, transB bool, m, n, k int, alpha float64, a []float64, lda int, b []float64, ldb int, beta float64, c []float64, ldc int) {
	rowsA, columnsA, rowsB, columnsB := m, k, k, n
	if transA {
		rowsA, columnsA = k, m
	}
	if transB {
		rowsB, columnsB = n, k
	}
	checkMatrix(rowsA, columnsA, a, lda)
	checkMatrix(rowsB, columnsB, b, ldb)
	checkMatrix(m, n, c, ldc)
	if m == 0 || n == 0 {
		return
	}
	scaleMatrix(m, n, beta, c, ldc)
	if k == 0 || alpha == 0 {
		return
	}
	if active.gemm.micro != nil {
		w.blocked(active.gemm, product{m, n, k, alpha, operand{a, lda, transA, nil}, operand{b, ldb, transB, nil}, c, ldc})
		return
	}
	gonum.Implementation{}.Dgemm(trans(transA), trans(transB), m, n, k, alpha, a, lda, b, ldb, 1, c, ldc)
}

func checkMatrix(rows, columns int, x []float64, ld int) {
	if rows < 0 || columns < 0 || ld < columns || rows > 0 && columns > 0 && len(x) < (rows-1)*ld+columns {
		panic("linalg: matrix of the wrong size")
	}
}

func scaleMatrix(m, n int, beta float64, c []float64, ldc int) {
	if beta == 1 {
		return
	}
	for i := range m {
		row := c[i*ldc : i*ldc+n]
		if beta == 0 {
			clear(row)
			continue
		}
		for j := range row {
			row[j] *= beta
		}
	}
}

func trans(t bool) blas.Transpose {
	if t {
		return blas.Trans
	}
	return blas.NoTrans
}

// AddSquare adds the lower triangle of X X^T, X having n rows of k numbers, to the
// lower triangle of C, n by n. What is above the diagonal may change too.
func (w *Workspace) AddSquare(c, x []float64, n, k int) {
	checkMatrix(n, k, x, k)
	checkMatrix(n, n, c, n)
	if n == 0 || k == 0 {
		return
	}
	if active.gemm.micro != nil {
		w.square(active.gemm, c, x, n, k)
		return
	}
	const block = 96
	for from := 0; from < n; from += block {
		to := min(from+block, n)
		w.Gemm(false, true, to-from, to, k, 1, x[from*k:], k, x, k, 1, c[from*n:], n)
	}
}

// WeightedOuter computes P = sum_k weights[k] c_k c_k^T, c_k being the row
// c[k*n:(k+1)*n]: a density matrix, if the weights are occupations. Rows of
// weight zero cost nothing if they come last. P holds n*n numbers and is
// exactly symmetric.
func (w *Workspace) WeightedOuter(p, c, weights []float64, n int) {
	if len(p) != n*n || len(c) < len(weights)*n {
		panic("linalg: matrix of the wrong size")
	}
	rows := len(weights)
	for rows > 0 && weights[rows-1] == 0 {
		rows--
	}
	w.scaled = grow(w.scaled, rows*n)
	for k, f := range weights[:rows] {
		for i, v := range c[k*n : (k+1)*n] {
			w.scaled[k*n+i] = f * v
		}
	}
	w.SymmetricOuter(p, w.scaled, c, rows, n)
}

// SymmetricOuter computes P = sum_k a_k b_k^T, a_k and b_k being rows of n
// numbers, of which the caller knows that the sum is symmetric. P holds n*n
// numbers and is exactly symmetric.
func (w *Workspace) SymmetricOuter(p, a, b []float64, rows, n int) {
	for from := 0; from < n; from += symmetricBlock {
		to := min(from+symmetricBlock, n)
		w.Gemm(true, false, to-from, to, rows, 1, a[from:], n, b, n, 0, p[from*n:], n)
	}
	mirror(p, n)
}

// symmetricBlock is the number of rows in which symmetric products are done, to
// leave out most of the half above the diagonal.
const symmetricBlock = 96

// mirror copies the lower triangle onto the upper one.
func mirror(p []float64, n int) {
	for i := range n {
		for j := range i {
			p[j*n+i] = p[i*n+j]
		}
	}
}

// grow returns a slice of the wanted length, of x's memory if that suffices.
func grow(x []float64, length int) []float64 {
	if cap(x) < length {
		return make([]float64, length)
	}
	return x[:length]
}
