package geom

import "math"

// largest returns the largest eigenvalue of a symmetric 4x4 matrix and its
// eigenvector of unit length.
func largest(a [4][4]float64) (float64, [4]float64) {
	var v [4][4]float64
	for i := range v {
		v[i][i] = 1
	}
	diagonalise(&a, &v)
	best := 0
	for i := 1; i < 4; i++ {
		if a[i][i] > a[best][best] {
			best = i
		}
	}
	return a[best][best], [4]float64{v[0][best], v[1][best], v[2][best], v[3][best]}
}

// extremes returns the smallest and the largest eigenvalue.
func extremes(a [4][4]float64) (low, high float64) {
	diagonalise(&a, nil)
	low = min(a[0][0], a[1][1], a[2][2], a[3][3])
	high = max(a[0][0], a[1][1], a[2][2], a[3][3])
	return low, high
}

// diagonalise turns a into its diagonal form by rotations of Jacobi, and, where
// v is not nil, multiplies the rotations into its columns. It does not care
// for equal eigenvalues, which symmetric shapes have.
// Source: Golub, Van Loan, Matrix Computations (4th ed., 2013), section 8.5.
func diagonalise(a, v *[4][4]float64) {
	const sweeps = 30
	for range sweeps {
		var off, all float64
		for i := range 4 {
			all += a[i][i] * a[i][i]
			for j := range i {
				off += a[i][j] * a[i][j]
			}
		}
		if off <= 1e-30*all || off == 0 {
			return
		}
		for p := range 3 {
			for q := p + 1; q < 4; q++ {
				turn(a, v, p, q)
			}
		}
	}
}

// turn makes a[p][q] zero by one rotation.
func turn(a, v *[4][4]float64, p, q int) {
	if a[p][q] == 0 {
		return
	}
	theta := (a[q][q] - a[p][p]) / (2 * a[p][q])
	t := math.Copysign(1, theta) / (math.Abs(theta) + math.Sqrt(theta*theta+1))
	c := 1 / math.Sqrt(t*t+1)
	s := t * c
	for k := range 4 {
		kp, kq := a[k][p], a[k][q]
		a[k][p], a[k][q] = c*kp-s*kq, s*kp+c*kq
	}
	for k := range 4 {
		pk, qk := a[p][k], a[q][k]
		a[p][k], a[q][k] = c*pk-s*qk, s*pk+c*qk
	}
	if v == nil {
		return
	}
	for k := range 4 {
		kp, kq := v[k][p], v[k][q]
		v[k][p], v[k][q] = c*kp-s*kq, s*kp+c*kq
	}
}
