package linalg

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/blas"
	gonum "gonum.org/v1/gonum/blas/gonum"
)

// gemmSlow is the definition of the product.
func gemmSlow(transA, transB bool, m, n, k int, alpha float64, a []float64, lda int, b []float64, ldb int, beta float64, c []float64, ldc int) {
	for i := range m {
		for j := range n {
			sum := 0.0
			for l := range k {
				var u, v float64
				if transA {
					u = a[l*lda+i]
				} else {
					u = a[i*lda+l]
				}
				if transB {
					v = b[j*ldb+l]
				} else {
					v = b[l*ldb+j]
				}
				sum += u * v
			}
			c[i*ldc+j] = alpha*sum + beta*c[i*ldc+j]
		}
	}
}

var gemmSizes = [][3]int{
	{1, 1, 1}, {1, 24, 5}, {8, 24, 256}, {7, 23, 3}, {9, 25, 257}, {4, 12, 1}, {17, 29, 31}, {97, 101, 300}, {100, 5, 64}, {3, 130, 70}, {0, 4, 2}, {5, 0, 2},
}

func TestGemm(t *testing.T) {
	everyKernel(t, func(t *testing.T) {
		r := newRand(1)
		w := new(Workspace)
		for _, size := range gemmSizes {
			m, n, k := size[0], size[1], size[2]
			for trial := range 12 {
				transA, transB := trial&1 == 1, trial&2 == 2
				alpha, beta := []float64{1, -0.7, 2.5}[trial/4], []float64{0, 1, -1.3}[trial/4]
				lda, ldb, ldc := k+3, n+1, n+5
				rowsA, rowsB := m, k
				if transA {
					lda, rowsA = m+3, k
				}
				if transB {
					ldb, rowsB = k+1, n
				}
				a, b := randomMatrix(r, rowsA*lda), randomMatrix(r, rowsB*ldb)
				c := randomMatrix(r, m*ldc)
				want := append([]float64(nil), c...)
				if beta == 0 {
					poison(c) // must not matter, except between the rows
					for i := range m {
						copy(c[i*ldc+n:(i+1)*ldc], want[i*ldc+n:(i+1)*ldc])
					}
				}
				gemmSlow(transA, transB, m, n, k, alpha, a, lda, b, ldb, beta, want, ldc)
				poison(w.a, w.b, w.edge)
				w.Gemm(transA, transB, m, n, k, alpha, a, lda, b, ldb, beta, c, ldc)
				for i := range c {
					if !(math.Abs(c[i]-want[i]) <= 1e-13*float64(k+1)) {
						t.Fatalf("%v %v %v alpha %g beta %g: number %d is %g, want %g", size, transA, transB, alpha, beta, i, c[i], want[i])
					}
				}
			}
		}
	})
}

// Larger than every block, against gonum.
func TestGemmLarge(t *testing.T) {
	everyKernel(t, func(t *testing.T) {
		r := newRand(2)
		m, n, k := 211, 1600, 530
		a, b := randomMatrix(r, m*k), randomMatrix(r, k*n)
		got, want := make([]float64, m*n), make([]float64, m*n)
		Gemm(false, false, m, n, k, 1, a, k, b, n, 0, got, n)
		gonum.Implementation{}.Dgemm(blas.NoTrans, blas.NoTrans, m, n, k, 1, a, k, b, n, 0, want, n)
		for i := range got {
			if !(math.Abs(got[i]-want[i]) <= 1e-11) {
				t.Fatalf("number %d is %g, gonum has %g", i, got[i], want[i])
			}
		}
	})
}

func TestGemmPanics(t *testing.T) {
	defer func() {
		if recover() == nil {
			t.Error("no panic for a matrix that is too short")
		}
	}()
	Gemm(false, false, 2, 2, 2, 1, make([]float64, 3), 2, make([]float64, 4), 2, 0, make([]float64, 4), 2)
}

func TestWeightedOuter(t *testing.T) {
	everyKernel(t, func(t *testing.T) {
		r := newRand(3)
		w := new(Workspace)
		for _, n := range []int{1, 2, 30, 97, 130, 200} {
			c, p := randomMatrix(r, n*n), make([]float64, n*n)
			weights := make([]float64, n)
			for k := range n/2 + 1 {
				weights[k] = 2 - 0.01*float64(k) - 1.5*float64(k%2)
			}
			poison(p, w.scaled)
			w.WeightedOuter(p, c, weights, n)
			for trial := range 50 {
				i, j := trial*7%n, trial*11%n
				want := 0.0
				for k, f := range weights {
					want += f * c[k*n+i] * c[k*n+j]
				}
				if !(math.Abs(p[i*n+j]-want) <= 1e-12*float64(n)) || p[i*n+j] != p[j*n+i] {
					t.Fatalf("n = %d: P(%d,%d) = %g, P(%d,%d) = %g, want %g", n, i, j, p[i*n+j], j, i, p[j*n+i], want)
				}
			}
		}
	})
}

func TestGemmAllocates(t *testing.T) {
	everyKernel(t, func(t *testing.T) {
		const n = 50
		a, b := make([]float64, n*n), make([]float64, n*n)
		w := new(Workspace)
		run := func() {
			w.Gemm(false, true, n, n, n, 1, a, n, a, n, 0, b, n)
			w.WeightedOuter(b, a, a[:n], n)
		}
		run()
		if got := testing.AllocsPerRun(10, run); got != 0 {
			t.Errorf("%g allocations, want none", got)
		}
	})
}

func BenchmarkGemm(b *testing.B) {
	for _, k := range available() {
		for _, n := range []int{60, 120, 240, 500} {
			b.Run(fmt.Sprintf("kernel=%s/n=%d", k.name, n), func(b *testing.B) {
				defer func(before *kernel) { active = before }(active)
				active = k
				r := newRand(4)
				x, y, z := randomMatrix(r, n*n), randomMatrix(r, n*n), make([]float64, n*n)
				w := new(Workspace)
				b.ReportAllocs()
				for b.Loop() {
					w.Gemm(false, false, n, n, n, 1, x, n, y, n, 0, z, n)
				}
				flops := 2 * float64(n) * float64(n) * float64(n)
				b.ReportMetric(flops*float64(b.N)/b.Elapsed().Seconds()/1e9, "GFLOP/s")
			})
		}
	}
}

func TestAddSquare(t *testing.T) {
	for _, kern := range available() {
		defer func(old *kernel) { active = old }(active)
		active = kern
		for _, size := range [][2]int{{1, 1}, {50, 300}, {201, 257}} {
			n, k := size[0], size[1]
			r := rand.New(rand.NewPCG(7, uint64(n)))
			x, c := make([]float64, n*k), make([]float64, n*n)
			for i := range x {
				x[i] = r.NormFloat64()
			}
			for i := range c {
				c[i] = 1
			}
			var w Workspace
			w.AddSquare(c, x, n, k)
			for i := range n {
				for j := range i + 1 {
					if want := 1 + dot(x[i*k:(i+1)*k], x[j*k:]); math.Abs(c[i*n+j]-want) > 1e-10 {
						t.Fatalf("%s, n = %d: element %d, %d is %g, want %g", kern.name, n, i, j, c[i*n+j], want)
					}
				}
			}
		}
	}
}
