package linalg

import (
	"math"
	"math/rand/v2"
	"testing"
)

// L L^T is the matrix, and L X = B holds, whatever the kernel.
func TestCholeskyAndSolve(t *testing.T) {
	for _, k := range available() {
		t.Run(k.name, func(t *testing.T) {
			defer func(old *kernel) { active = old }(active)
			active = k
			for _, n := range []int{1, 7, 48, 61, 200} {
				checkCholesky(t, n, 33)
			}
		})
	}
}

func checkCholesky(t *testing.T, n, columns int) {
	t.Helper()
	r := rand.New(rand.NewPCG(1, uint64(n)))
	m, a := make([]float64, n*n), make([]float64, n*n)
	for i := range m {
		m[i] = r.NormFloat64()
	}
	var w Workspace
	w.Gemm(false, true, n, n, n, 1, m, n, m, n, 0, a, n)
	for i := range n {
		a[i*n+i]++
	}
	l := append([]float64(nil), a...)
	dropped, err := w.Cholesky(l, n, 1e-14)
	if err != nil || len(dropped) > 0 {
		t.Fatal(dropped, err)
	}
	back := make([]float64, n*n)
	w.Gemm(false, true, n, n, n, 1, l, n, l, n, 0, back, n)
	for i := range a {
		if math.Abs(a[i]-back[i]) > 1e-11*float64(n) {
			t.Fatalf("n = %d: element %d is %g, want %g", n, i, back[i], a[i])
		}
	}
	x, b := make([]float64, n*columns), make([]float64, n*columns)
	for i := range x {
		x[i] = r.NormFloat64()
	}
	w.Gemm(false, false, n, columns, n, 1, l, n, x, columns, 0, b, columns)
	w.SolveLower(l, n, b, columns, columns)
	for i := range x {
		if math.Abs(x[i]-b[i]) > 1e-9 {
			t.Fatalf("n = %d: solution %d is %g, want %g", n, i, b[i], x[i])
		}
	}
	y := make([]float64, n)
	w.Gemm(true, false, n, 1, n, 1, l, n, x, columns, 0, y, 1)
	SolveLowerTransposed(l, n, y)
	for i := range y {
		if math.Abs(x[i*columns]-y[i]) > 1e-9 {
			t.Fatalf("n = %d: transposed solution %d is %g, want %g", n, i, y[i], x[i*columns])
		}
	}
}

// A row that repeats another is found and left out; the rest is as without it.
func TestCholeskyDrops(t *testing.T) {
	const n = 60
	r := rand.New(rand.NewPCG(3, 4))
	v := make([]float64, n*n)
	for i := range v {
		v[i] = r.NormFloat64()
	}
	copy(v[50*n:51*n], v[3*n:4*n])
	a := make([]float64, n*n)
	var w Workspace
	w.Gemm(false, true, n, n, n, 1, v, n, v, n, 0, a, n)
	l := append([]float64(nil), a...)
	dropped, err := w.Cholesky(l, n, 1e-12)
	if err != nil || len(dropped) != 1 || dropped[0] != 50 {
		t.Fatalf("dropped %v, %v; want row 50", dropped, err)
	}
	back := make([]float64, n*n)
	w.Gemm(false, true, n, n, n, 1, l, n, l, n, 0, back, n)
	for i := range n {
		for j := range n {
			if i != 50 && j != 50 && math.Abs(a[i*n+j]-back[i*n+j]) > 1e-10 {
				t.Fatalf("element %d, %d is %g, want %g", i, j, back[i*n+j], a[i*n+j])
			}
		}
	}
}
