package linalg

import (
	"math"
	"math/rand/v2"
	"testing"
)

// Rows chosen at random, in widths that are whole panels and not.
func TestGather(t *testing.T) {
	for _, k := range available() {
		defer func(old *kernel) { active = old }(active)
		active = k
		for _, n := range []int{50, 48} {
			checkGather(t, k.name, n)
		}
	}
}

func checkGather(t *testing.T, name string, n int) {
	t.Helper()
	r := rand.New(rand.NewPCG(5, 6))
	const m, lda, ldb, rows = 13, 17, 53, 300
	a, b := make([]float64, 400*lda), make([]float64, 500*ldb)
	for i := range a {
		a[i] = r.NormFloat64()
	}
	for i := range b {
		b[i] = r.NormFloat64()
	}
	var ra, rb []int32
	want, got := make([]float64, m*n), make([]float64, m*n)
	for i := range got {
		got[i] = r.NormFloat64()
		want[i] = 2 * got[i]
	}
	for range rows {
		i, j := r.IntN(400), r.IntN(500)
		ra, rb = append(ra, int32(i)), append(rb, int32(j))
		for p := range m {
			for q := range n {
				want[p*n+q] += a[i*lda+p] * b[j*ldb+q]
			}
		}
	}
	var w Workspace
	w.Gather(m, n, a, ra, lda, b, rb, ldb, 2, got, n)
	for i := range want {
		if math.Abs(got[i]-want[i]) > 1e-11 {
			t.Fatalf("%s, %d columns: element %d is %g, want %g", name, n, i, got[i], want[i])
		}
	}
}
