package linalg

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// checkEigen fails where A z = w z or the orthonormality of the rows of z is
// off by more than tol times the largest eigenvalue, or 1.
func checkEigen(t *testing.T, what string, a, w, z []float64, tol float64) {
	t.Helper()
	n := len(w)
	scale := math.Max(1e-300, largest(w))
	az, zz := make([]float64, n*n), make([]float64, n*n)
	gemmSlow(false, false, n, n, n, 1, z, n, a, n, 0, az, n)
	gemmSlow(false, true, n, n, n, 1, z, n, z, n, 0, zz, n)
	for k := range n {
		for i := range n {
			az[k*n+i] -= w[k] * z[k*n+i]
		}
		zz[k*n+k]--
		if k > 0 && !(w[k] >= w[k-1]) {
			t.Errorf("%s: eigenvalues out of order: %g, %g", what, w[k-1], w[k])
		}
	}
	if r := largest(az) / scale; !(r <= tol) {
		t.Errorf("%s: residual %.1e", what, r)
	}
	if o := largest(zz); !(o <= tol) {
		t.Errorf("%s: orthogonality %.1e", what, o)
	}
}

func solve(t *testing.T, e *Eigen, a []float64) (w, z []float64) {
	t.Helper()
	n := e.n
	w, z = make([]float64, n), make([]float64, n*n)
	r := e.reduction
	poison(r.m, r.tau, r.u, r.v, r.w, r.product, r.d, r.e, r.reflectors.gram, r.reflectors.t, r.reflectors.left, r.reflectors.product)
	poison(e.z, e.rotations.cs, w, z)
	if err := e.Solve(slices.Clone(a), w, z); err != nil {
		t.Fatal(err)
	}
	return w, z
}

func TestEigen(t *testing.T) {
	everyKernel(t, func(t *testing.T) {
		for _, n := range []int{1, 2, 3, 5, 8, 17, 31, 32, 33, 64, 65, 120, 129, 241, 256} {
			a := randomSymmetric(newRand(uint64(n)), n)
			w, z := solve(t, NewEigen(n), a)
			checkEigen(t, fmt.Sprintf("n = %d", n), a, w, z, 1e-13)

			var judge mat.EigenSym
			if !judge.Factorize(mat.NewSymDense(n, slices.Clone(a)), false) {
				t.Fatal("gonum fails")
			}
			for i, want := range judge.Values(nil) {
				if math.Abs(w[i]-want) > 1e-12*math.Max(1, largest(w)) {
					t.Errorf("n = %d: eigenvalue %d is %g, gonum has %g", n, i, w[i], want)
				}
			}
		}
	})
}

// A Toeplitz matrix (2 on, -1 beside the diagonal) has the eigenvalues
// 4 sin^2(k pi/(2(n+1))): the discrete wave equation.
func TestEigenChain(t *testing.T) {
	everyKernel(t, func(t *testing.T) {
		const n = 75
		a := make([]float64, n*n)
		for i := range n {
			a[i*n+i] = 2
			if i > 0 {
				a[i*n+i-1], a[(i-1)*n+i] = -1, -1
			}
		}
		w, z := solve(t, NewEigen(n), a)
		checkEigen(t, "chain", a, w, z, 1e-13)
		for k, got := range w {
			s := math.Sin(float64(k+1) * math.Pi / (2 * (n + 1)))
			if want := 4 * s * s; math.Abs(got-want) > 1e-14 {
				t.Errorf("eigenvalue %d is %.16g, want %.16g", k, got, want)
			}
		}
	})
}

// Matrices that are hard for one reason or another.
func TestEigenHard(t *testing.T) {
	n := 60
	r := newRand(5)
	shapes := map[string]func(i, j int) float64{
		"zero":        func(i, j int) float64 { return 0 },
		"unit":        func(i, j int) float64 { return float64(boolInt(i == j)) },
		"diagonal":    func(i, j int) float64 { return float64(boolInt(i == j)) * math.Sin(float64(i)) },
		"rank one":    func(i, j int) float64 { return float64((i + 1) * (j + 1)) },
		"graded":      func(i, j int) float64 { return math.Pow(10, -0.3*float64(i+j)) },
		"graded back": func(i, j int) float64 { return math.Pow(10, 0.3*float64(i+j-2*n)) },
		"blocks":      func(i, j int) float64 { return float64(boolInt(i/7 == j/7)) * math.Cos(float64(i*j)) },
		"large":       func(i, j int) float64 { return 1e120 * math.Cos(float64(i*j)) },
		"small":       func(i, j int) float64 { return 1e-120 * math.Cos(float64(i*j)) },
		"close":       func(i, j int) float64 { return float64(boolInt(i == j)) + 1e-9*math.Cos(float64(i*j)) },
		"Wilkinson":   func(i, j int) float64 { return wilkinson(i, j, n) },
		"noise":       func(i, j int) float64 { return 0 },
	}
	names := make([]string, 0, len(shapes))
	for name := range shapes {
		names = append(names, name)
	}
	slices.Sort(names)
	everyKernel(t, func(t *testing.T) {
		for _, name := range names {
			a := make([]float64, n*n)
			for i := range n {
				for j := range i + 1 {
					a[i*n+j] = shapes[name](i, j)
					if name == "noise" { // equal eigenvalues but for rounding
						a[i*n+j] = float64(boolInt(i == j)) + 1e-16*r.NormFloat64()
					}
					a[j*n+i] = a[i*n+j]
				}
			}
			w, z := solve(t, NewEigen(n), a)
			checkEigen(t, name, a, w, z, 1e-13)
		}
	})
}

// wilkinson is W+, with pairs of eigenvalues that almost agree.
func wilkinson(i, j, n int) float64 {
	switch i - j {
	case 0:
		return math.Abs(float64(i) - float64(n-1)/2)
	case 1, -1:
		return 1
	}
	return 0
}

func boolInt(b bool) int {
	if b {
		return 1
	}
	return 0
}

func TestEigenRefusesNaN(t *testing.T) {
	everyKernel(t, func(t *testing.T) {
		for _, bad := range []float64{math.NaN(), math.Inf(1)} {
			for _, n := range []int{1, 2, 40} {
				a := randomSymmetric(newRand(6), n)
				a[(n-1)*n+n/2], a[n/2*n+n-1] = bad, bad
				if err := NewEigen(n).Solve(a, make([]float64, n), make([]float64, n*n)); !errors.Is(err, ErrNotFinite) {
					t.Errorf("n = %d with %g: error %v, want %v", n, bad, err, ErrNotFinite)
				}
			}
		}
	})
}

// The same matrix twice gives the same bits, whatever was in scratch memory.
func TestEigenRepeats(t *testing.T) {
	everyKernel(t, func(t *testing.T) {
		const n = 70
		a, e := randomSymmetric(newRand(7), n), NewEigen(n)
		w, z := solve(t, e, a)
		w2, z2 := solve(t, e, a)
		if !slices.Equal(w, w2) || !slices.Equal(z, z2) {
			t.Error("results differ")
		}
		copy(z2, a)
		if err := e.Solve(z2, w2, z2); err != nil || !slices.Equal(z, z2) {
			t.Errorf("results differ in the matrix's own memory, error %v", err)
		}
		if active == &portable {
			return // gonum's product starts goroutines
		}
		b := make([]float64, n*n)
		if got := testing.AllocsPerRun(5, func() { copy(b, a); _ = e.Solve(b, w, z) }); got != 0 {
			t.Errorf("%g allocations, want none", got)
		}
	})
}

func BenchmarkEigenSym(b *testing.B) {
	for _, k := range available() {
		for _, n := range []int{60, 120, 240, 500} {
			b.Run(fmt.Sprintf("kernel=%s/n=%d", k.name, n), func(b *testing.B) {
				defer func(before *kernel) { active = before }(active)
				active = k
				a := randomSymmetric(newRand(8), n)
				e, scratch := NewEigen(n), make([]float64, n*n)
				w, z := make([]float64, n), make([]float64, n*n)
				b.ReportAllocs()
				for b.Loop() {
					copy(scratch, a)
					if err := e.Solve(scratch, w, z); err != nil {
						b.Fatal(err)
					}
				}
				// Nine cubes are the usual count for all eigenvectors.
				flops := 9 * float64(n) * float64(n) * float64(n)
				b.ReportMetric(flops*float64(b.N)/b.Elapsed().Seconds()/1e9, "GFLOP/s")
			})
		}
	}
}
