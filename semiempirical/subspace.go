package semiempirical

import (
	"math"

	"torsieve/internal/linalg"
)

// A subspace finds the occupied orbitals of a Fock matrix F that is close to
// one whose orbitals are known, for less than a solution from the start. It is
// exact within a tolerance that the caller states, not an approximation, and
// says so when it does not get there.
//
// In the known orbitals, the occupied (o) first, the new occupied space is
// spanned by each occupied orbital i plus X_ai of the virtual ones (v), X being
// the small solution of
//
//	F_vo + F_vv X - X F_oo - X F_ov X = 0
//
// (G. W. Stewart, SIAM Rev. 1973, 15, 727). It is found by iteration: the left
// side over the difference of the diagonal elements F_aa - F_ii is taken off X.
type subspace struct {
	n, occupied int
	f           []float64 // F in the known orbitals
	level       []float64 // its diagonal
	x           []float64 // virtual x occupied
	next, inner []float64
	c           []float64 // occupied new orbitals, row by row
	work        []float64 // n*n
}

func newSubspace(n, occupied int) *subspace {
	return &subspace{
		n: n, occupied: occupied,
		f: make([]float64, n*n), level: make([]float64, n), work: make([]float64, n*n),
		x: make([]float64, (n-occupied)*occupied), next: make([]float64, (n-occupied)*occupied),
		inner: make([]float64, occupied*occupied),
		c:     make([]float64, occupied*n),
	}
}

// start says that the known orbitals are those of a full solution.
func (s *subspace) start() { clear(s.x) }

// carry makes the known orbitals orthonormal with the overlap matrix of a
// geometry close to their own, by the Cholesky factor of their overlaps, which
// leaves each where it was but for what it has of those before. ok is false
// where that is no small change; then the orbitals are as they were.
func (s *subspace) carry(o *orbitals, overlap []float64) (ok bool) {
	o.work.Congruence(s.f, o.c, overlap, s.n)
	if smallest, ok := o.work.InverseFactor(s.f, s.n); !ok || smallest < leastLeft {
		return false
	}
	o.work.LowerTimes(s.work, s.f, o.c, s.n, s.n)
	copy(o.c, s.work)
	return true
}

// leastLeft is the smallest share of an orbital that must be left beside the
// others at the next geometry.
const leastLeft = 0.5

// Limits of subspace.solve.
const (
	subspaceSteps = 10
	largestTurn   = 0.2 // of an orbital towards another; beyond it the iteration is slow
)

// solve finds the new occupied orbitals of f to within tol in X and returns how
// many steps it took; ok is false where the matrices are too far apart.
func (s *subspace) solve(o *orbitals, f []float64, tol float64) (steps int, ok bool) {
	if !separated(o.energy, s.occupied, o.kT, tol) {
		return 0, false
	}
	o.work.Congruence(s.f, o.c, f, s.n)
	for k := range s.level {
		s.level[k] = s.f[k*s.n+k]
	}
	if !separated(s.level, s.occupied, o.kT, tol) {
		return 0, false
	}
	before := 0.0
	for step := range subspaceSteps {
		largest, moved := s.iterate(&o.work)
		if !(largest < largestTurn) {
			return step, false
		}
		// what is left falls by the same factor as the last steps did
		if rate := moved / before; moved < tol || rate < 0.5 && moved*rate < 0.5*tol {
			return step, s.orbitals(o)
		}
		before = moved
	}
	return subspaceSteps, false
}

// separated says whether the gap between occupied and virtual levels is so wide
// that at the electrons' temperature all occupations are whole numbers to
// within tol.
func separated(level []float64, occupied int, kT, tol float64) bool {
	top, bottom := edges(level, occupied)
	return bottom-top > -2*kT*math.Log(tol)
}

// edges returns the highest of the occupied levels and the lowest of the others.
func edges(level []float64, occupied int) (top, bottom float64) {
	top, bottom = math.Inf(-1), math.Inf(1)
	for _, e := range level[:occupied] {
		top = max(top, e)
	}
	for _, e := range level[occupied:] {
		bottom = min(bottom, e)
	}
	return top, bottom
}

// iterate takes one step and returns the largest element of X and the largest
// change.
func (s *subspace) iterate(work *linalg.Workspace) (largest, moved float64) {
	n, occ := s.n, s.occupied
	virt := n - occ
	vo := s.f[occ*n:] // rows of n, the first occ columns; F_vv behind
	for i := range occ {
		copy(s.inner[i*occ:(i+1)*occ], s.f[i*n:i*n+occ])
	}
	work.Gemm(true, false, occ, occ, virt, 1, vo, n, s.x, occ, 1, s.inner, occ)
	for a := range virt {
		copy(s.next[a*occ:(a+1)*occ], vo[a*n:a*n+occ])
	}
	work.Gemm(false, false, virt, occ, virt, 1, vo[occ:], n, s.x, occ, 1, s.next, occ)
	work.Gemm(false, false, virt, occ, occ, -1, s.x, occ, s.inner, occ, 1, s.next, occ)
	low := s.level[:occ]
	for a, high := range s.level[occ:] {
		row, next := s.x[a*occ:(a+1)*occ], s.next[a*occ:(a+1)*occ]
		for i, e := range low {
			d := next[i] / (high - e)
			v := row[i] - d
			moved = max(moved, math.Abs(d))
			largest = max(largest, math.Abs(v))
			row[i] = v
		}
	}
	return largest, moved
}

// orbitals writes orthonormal combinations of C_o + X^T C_v into c: with the
// Cholesky factor L of 1 + X^T X, its inverse times them. ok is false where X is
// not finite.
func (s *subspace) orbitals(o *orbitals) (ok bool) {
	n, occ := s.n, s.occupied
	virt := n - occ
	clear(s.inner)
	for i := range occ {
		s.inner[i*occ+i] = 1
	}
	o.work.Gemm(true, false, occ, occ, virt, 1, s.x, occ, s.x, occ, 1, s.inner, occ)
	if _, ok := o.work.InverseFactor(s.inner, occ); !ok {
		return false
	}
	bare := s.work[:occ*n]
	copy(bare, o.c)
	o.work.Gemm(true, false, occ, n, virt, 1, s.x, occ, o.c[occ*n:], n, 1, bare, n)
	o.work.LowerTimes(s.c, s.inner, bare, occ, n)
	return true
}

// energyDensity writes 2 C^T (C F C^T) C.
func (s *subspace) energyDensity(o *orbitals, w, f []float64) {
	n, occ := s.n, s.occupied
	cf := s.work[:occ*n]
	o.work.Gemm(false, false, occ, n, n, 2, s.c, n, f, n, 0, cf, n)
	o.work.SymmetricProduct(s.inner, cf, s.c, occ, n)
	o.work.Gemm(false, false, occ, n, occ, 1, s.inner, occ, s.c, n, 0, cf, n)
	o.work.SymmetricOuter(w, cf, s.c, occ, n)
}
