package linalg

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"testing"
)

// overlapLike returns a positive definite matrix with ones on the diagonal.
func overlapLike(n int, decay float64) []float64 {
	s := make([]float64, n*n)
	for i := range n {
		for j := range n {
			d := decay * float64(i-j)
			s[i*n+j] = math.Exp(-d * d)
		}
	}
	return s
}

func TestGeneralised(t *testing.T) {
	everyKernel(t, func(t *testing.T) {
		for _, n := range []int{1, 2, 13, 60, 131} {
			f, s := randomSymmetric(newRand(uint64(n)), n), overlapLike(n, 1.1)
			g := NewGeneralised(n)
			poison(g.inverse, g.a, g.b)
			if err := g.Factor(s); err != nil {
				t.Fatal(err)
			}
			w, c := make([]float64, n), make([]float64, n*n)
			keep := slices.Clone(f)
			poison(g.a, g.b, c, w)
			if err := g.Solve(f, w, c); err != nil {
				t.Fatal(err)
			}
			if !slices.Equal(f, keep) {
				t.Error("the matrix was changed")
			}
			checkGeneralised(t, n, f, s, w, c)

			x, xs, one := g.Orthogonal(), make([]float64, n*n), make([]float64, n*n)
			gemmSlow(false, false, n, n, n, 1, x, n, s, n, 0, xs, n)
			gemmSlow(false, true, n, n, n, 1, xs, n, x, n, 0, one, n)
			for k := range n {
				one[k*n+k]--
			}
			if o := largest(one); !(o <= 1e-12) {
				t.Errorf("n = %d: orthogonality of the Cholesky vectors %.1e", n, o)
			}
		}
	})
}

func checkGeneralised(t *testing.T, n int, f, s, w, c []float64) {
	t.Helper()
	cf, cs, one := make([]float64, n*n), make([]float64, n*n), make([]float64, n*n)
	gemmSlow(false, false, n, n, n, 1, c, n, f, n, 0, cf, n)
	gemmSlow(false, false, n, n, n, 1, c, n, s, n, 0, cs, n)
	gemmSlow(false, true, n, n, n, 1, cs, n, c, n, 0, one, n)
	for k := range n {
		one[k*n+k]--
		for i := range n {
			cf[k*n+i] -= w[k] * cs[k*n+i]
		}
	}
	if r := largest(cf) / largest(w); !(r <= 1e-12) {
		t.Errorf("n = %d: residual %.1e", n, r)
	}
	if o := largest(one); !(o <= 1e-12) {
		t.Errorf("n = %d: orthogonality %.1e", n, o)
	}
}

// Two normalised functions with the overlap s: 1/(1-s) and 1/(1+s) times the
// energies of the sum and the difference (a textbook's H2+). Diagonal a,
// off-diagonal b: (a+b)/(1+s) and (a-b)/(1-s).
func TestGeneralisedTwoFunctions(t *testing.T) {
	const a, b, s = -1.1, -0.9, 0.6
	g := NewGeneralised(2)
	if err := g.Factor([]float64{1, s, s, 1}); err != nil {
		t.Fatal(err)
	}
	w, c := make([]float64, 2), make([]float64, 4)
	if err := g.Solve([]float64{a, b, b, a}, w, c); err != nil {
		t.Fatal(err)
	}
	if math.Abs(w[0]-(a+b)/(1+s)) > 1e-14 || math.Abs(w[1]-(a-b)/(1-s)) > 1e-14 {
		t.Errorf("eigenvalues %v", w)
	}
	if got := g.SmallestPivot(); math.Abs(got-(1-s*s)) > 1e-15 {
		t.Errorf("smallest pivot %g, want %g", got, 1-s*s)
	}
}

func TestGeneralisedAllocates(t *testing.T) {
	for _, k := range available() {
		if k == &portable {
			continue // gonum's product starts goroutines
		}
		t.Run("kernel="+k.name, func(t *testing.T) {
			defer func(before *kernel) { active = before }(active)
			active = k
			const n = 100
			f, s := randomSymmetric(newRand(10), n), overlapLike(n, 1.1)
			g, w, c := NewGeneralised(n), make([]float64, n), make([]float64, n*n)
			if err := g.Factor(s); err != nil {
				t.Fatal(err)
			}
			if got := testing.AllocsPerRun(5, func() { _ = g.Solve(f, w, c) }); got != 0 {
				t.Errorf("%g allocations a solution, want none", got)
			}
		})
	}
}

func TestFactorRefuses(t *testing.T) {
	for _, tc := range []struct {
		s   []float64
		row int
	}{
		{[]float64{1, 1, 1, 1}, 1},
		{[]float64{1, 2, 2, 1}, 1},
		{[]float64{math.NaN(), 0, 0, 1}, 0},
		{[]float64{1, math.NaN(), math.NaN(), 1}, 1},
	} {
		var wrong *NotPositiveError
		if err := NewGeneralised(2).Factor(tc.s); !errors.As(err, &wrong) || wrong.Row != tc.row || wrong.Pivot > 0 {
			t.Errorf("%v: error %v, want one for row %d", tc.s, err, tc.row)
		}
	}
}

// Inverse factors, products with a triangle and congruences of all sizes of
// blocks, by their definitions.
func TestInverseFactor(t *testing.T) {
	everyKernel(t, func(t *testing.T) {
		for _, n := range []int{0, 1, 24, 25, 31, 100, 131} {
			s := overlapLike(n, 1.1)
			x := slices.Clone(s)
			for i := range n {
				for j := i + 1; j < n; j++ {
					x[i*n+j] = math.NaN() // is not read
				}
			}
			var w Workspace
			smallest, ok := w.InverseFactor(x, n)
			if !ok || n > 0 && !(smallest > 0 && smallest <= 1) {
				t.Fatalf("n = %d: smallest pivot %g", n, smallest)
			}
			one, product, want := make([]float64, n*n), make([]float64, n*n), make([]float64, n*n)
			w.Congruence(one, x, s, n)
			w.LowerTimes(product, x, s, n, n)
			gemmSlow(false, false, n, n, n, 1, x, n, s, n, 0, want, n)
			for i := range n {
				one[i*n+i]--
				for j := range n {
					product[i*n+j] -= want[i*n+j]
					if j > i && x[i*n+j] != 0 {
						t.Fatalf("n = %d: the factor is no triangle", n)
					}
				}
			}
			if d, e := largest(one), largest(product); n > 0 && !(d <= 1e-12 && e <= 1e-12) {
				t.Errorf("n = %d: X S X^T - 1 is %.1e, X S by blocks off by %.1e", n, d, e)
			}
		}
	})
}

func BenchmarkGeneralised(b *testing.B) {
	for _, k := range available() {
		for _, n := range []int{60, 120, 240} {
			b.Run(fmt.Sprintf("kernel=%s/n=%d", k.name, n), func(b *testing.B) {
				defer func(before *kernel) { active = before }(active)
				active = k
				f, s := randomSymmetric(newRand(9), n), overlapLike(n, 1.1)
				g, w, c := NewGeneralised(n), make([]float64, n), make([]float64, n*n)
				if err := g.Factor(s); err != nil {
					b.Fatal(err)
				}
				b.ReportAllocs()
				for b.Loop() {
					if err := g.Solve(f, w, c); err != nil {
						b.Fatal(err)
					}
				}
			})
		}
	}
}
