package linalg

import "math"

// Canonical returns vectors, as rows of n numbers, with x_k S x_l = 1 for
// k = l and else 0, that span all of the space in which the positive
// semidefinite S (n*n numbers) has eigenvalues above smallest: fewer than n
// where S is nearly singular. Errors are those of Eigen.Solve.
//
// Source: P.-O. Löwdin, Adv. Quantum Chem. 1970, 5, 185 (canonical
// orthonormalisation).
func Canonical(s []float64, n int, smallest float64) (x []float64, rows int, err error) {
	if len(s) != n*n {
		panic("linalg: matrix of the wrong size")
	}
	w, z, scratch := make([]float64, n), make([]float64, n*n), make([]float64, n*n)
	copy(scratch, s)
	if err := NewEigen(n).Solve(scratch, w, z); err != nil {
		return nil, 0, err
	}
	dropped := 0
	for dropped < n && !(w[dropped] > smallest) {
		dropped++
	}
	for k := dropped; k < n; k++ {
		scale := 1 / math.Sqrt(w[k])
		for i := range n {
			z[k*n+i] *= scale
		}
	}
	return z[dropped*n:], n - dropped, nil
}
