// Package gauss computes integrals over contracted Gaussian shells, for the
// semi-empirical tier and for Hartree-Fock alike.
//
// Order of functions inside a shell, in every matrix of this project: s; p as
// x, y, z; l >= 2 as real solid harmonics m = -l..l without Condon-Shortley
// sign (d: xy, yz, z2, xz, x2-y2), or, for a Cartesian d shell, xx, xy, xz,
// yy, yz, zz. Matrices are stored row by row.
package gauss

// A Shell is one contracted shell of Gaussians of one angular momentum.
//
// Its function with powers i+j+k = L is
//
//	(x-Ax)^i (y-Ay)^j (z-Az)^k sum_p Coefs[p] exp(-Exps[p] r^2)
//
// so Coefs already hold the norms of primitives and contraction. The centre is
// atom number Atom; coordinates (3N, bohr) are handed to each function apart,
// because they change while the shells stay.
type Shell struct {
	Atom      int
	L         int
	Exps      []float64 // 1/bohr^2
	Coefs     []float64
	Cartesian bool // six d functions instead of five; never set for L < 2
}

// Size returns the number of basis functions of the shell.
func (s *Shell) Size() int {
	if s.Cartesian {
		return (s.L + 1) * (s.L + 2) / 2
	}
	return 2*s.L + 1
}
