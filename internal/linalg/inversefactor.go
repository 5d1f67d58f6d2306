package linalg

import "math"

// factorBlock is the size from which on a matrix is factorised in two halves.
const factorBlock = 24

// InverseFactor turns the symmetric positive definite matrix a, n rows of n
// numbers of which the lower triangle is read, into the inverse of its lower
// Cholesky factor, zeros above the diagonal. It returns the smallest pivot, the
// square of the smallest diagonal element of the factor; where ok is false the
// matrix is not positive definite, and a is spoilt.
func (w *Workspace) InverseFactor(a []float64, n int) (smallest float64, ok bool) {
	checkMatrix(n, n, a, n)
	w.half = grow(w.half, (n-n/2)*n/2)
	return w.inverseFactor(a, n, n)
}

// inverseFactor works on n rows that are ld apart. From the inverse factor I of
// the first half, with the rows B below it: the factor's L = B I^T, the rest
// less L L^T has the inverse factor J, and between them stands -J L I. All but
// the smallest blocks are matrix products.
func (w *Workspace) inverseFactor(a []float64, n, ld int) (smallest float64, ok bool) {
	if n <= factorBlock {
		return inverseFactorSmall(a, n, ld)
	}
	h := n / 2 &^ 7
	r := n - h
	below, rest := a[h*ld:], a[h*ld+h:]
	first, ok := w.inverseFactor(a, h, ld)
	if !ok {
		return 0, false
	}
	half := w.half[:r*h]
	w.Gemm(false, true, r, h, h, 1, below, ld, a, ld, 0, half, h)
	for i := range r {
		copy(below[i*ld:i*ld+h], half[i*h:(i+1)*h])
	}
	w.Gemm(false, true, r, r, h, -1, half, h, below, ld, 1, rest, ld)
	second, ok := w.inverseFactor(rest, r, ld)
	if !ok {
		return 0, false
	}
	w.Gemm(false, false, r, h, h, 1, below, ld, a, ld, 0, half, h)
	w.Gemm(false, false, r, h, r, -1, rest, ld, half, h, 0, below, ld)
	for i := range h {
		clear(a[i*ld+h : i*ld+n])
	}
	return min(first, second), true
}

// inverseFactorSmall does so number by number.
func inverseFactorSmall(a []float64, n, ld int) (smallest float64, ok bool) {
	smallest = math.Inf(1)
	for i := range n {
		row := a[i*ld : i*ld+n]
		for j := range i {
			other := a[j*ld : j*ld+j]
			row[j] = (row[j] - dot(row[:j], other)) / a[j*ld+j]
		}
		pivot := row[i] - dot(row[:i], row[:i])
		if !(pivot > 0) {
			return 0, false
		}
		smallest = min(smallest, pivot)
		row[i] = math.Sqrt(pivot)
		clear(row[i+1:])
	}
	for j := range n {
		a[j*ld+j] = 1 / a[j*ld+j]
		for i := j + 1; i < n; i++ {
			var sum float64
			for k := j; k < i; k++ {
				sum += a[i*ld+k] * a[k*ld+j]
			}
			a[i*ld+j] = -sum / a[i*ld+i]
		}
	}
	return smallest, true
}

// LowerTimes computes C = L B, L being a lower triangle, m rows of m numbers
// with zeros above the diagonal, and B and C m rows of n numbers.
func (w *Workspace) LowerTimes(c, l, b []float64, m, n int) {
	for from := 0; from < m; from += triangleBlock {
		to := min(from+triangleBlock, m)
		w.Gemm(false, false, to-from, n, to, 1, l[from*m:], m, b, n, 0, c[from*n:], n)
	}
}

// Congruence computes the symmetric C = A F A^T for a symmetric F; all are n
// rows of n numbers. C is exactly symmetric.
func (w *Workspace) Congruence(c, a, f []float64, n int) {
	w.scaled = grow(w.scaled, n*n)
	w.Gemm(false, false, n, n, n, 1, a, n, f, n, 0, w.scaled, n)
	w.SymmetricProduct(c, w.scaled, a, n, n)
}

// SymmetricProduct computes C = A B^T, m rows of m numbers, which the caller
// knows to be symmetric; A and B have m rows of k numbers. C is exactly
// symmetric.
func (w *Workspace) SymmetricProduct(c, a, b []float64, m, k int) {
	for from := 0; from < m; from += symmetricBlock {
		to := min(from+symmetricBlock, m)
		w.Gemm(false, true, to-from, to, k, 1, a[from*k:], k, b, k, 0, c[from*m:], m)
	}
	mirror(c, m)
}
