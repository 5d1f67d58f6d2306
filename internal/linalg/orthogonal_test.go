package linalg

import "testing"

func TestCanonical(t *testing.T) {
	everyKernel(t, func(t *testing.T) {
		// The last function is the sum of the first two, so the matrix has rank n-1.
		const n = 40
		s := overlapLike(n, 1.2)
		for i := range n - 1 {
			s[(n-1)*n+i] = s[i] + s[n+i]
			s[i*n+n-1] = s[(n-1)*n+i]
		}
		s[n*n-1] = s[0] + 2*s[1] + s[n+1]
		x, rows, err := Canonical(s, n, 1e-10)
		if err != nil || rows != n-1 {
			t.Fatalf("%d vectors, error %v, want %d", rows, err, n-1)
		}
		xs, one := make([]float64, rows*n), make([]float64, rows*rows)
		gemmSlow(false, false, rows, n, n, 1, x, n, s, n, 0, xs, n)
		gemmSlow(false, true, rows, rows, n, 1, xs, n, x, n, 0, one, rows)
		for k := range rows {
			one[k*rows+k]--
		}
		if o := largest(one); !(o <= 1e-12) {
			t.Errorf("orthogonality %.1e", o)
		}
	})
}
