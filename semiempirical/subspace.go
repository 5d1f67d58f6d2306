package semiempirical

import "math"

// A subspace finds the occupied orbitals of a Fock matrix that is close to one
// whose orbitals are known, for less than a solution from the start. It is
// exact within a tolerance that the caller states, not an approximation, and
// says so when it does not get there.
//
// In the known orbitals (energies e) the new matrix is e plus the small E. The
// new occupied space is spanned by each occupied orbital i plus X_ai of the
// virtual ones, X being the small solution of
//
//	(e_a - e_i) X_ai + (E_vo + E_vv X - X E_oo - X E_ov X)_ai = 0
//
// (G. W. Stewart, SIAM Rev. 1973, 15, 727). It is found by iteration.
type subspace struct {
	n, occupied int
	known       []float64 // Fock matrix of the known orbitals
	e           []float64 // E; the first occupied rows and columns are E_oo
	x           []float64 // virtual x occupied
	next, inner []float64
	work        []float64 // n*n
	square      []float64 // X^T X, and two of its powers
	power       []float64
	other       []float64
	c           []float64 // occupied new orbitals, row by row
}

func newSubspace(n, occupied int) *subspace {
	return &subspace{
		n: n, occupied: occupied,
		known: make([]float64, n*n), e: make([]float64, n*n), work: make([]float64, n*n),
		x: make([]float64, (n-occupied)*occupied), next: make([]float64, (n-occupied)*occupied),
		inner: make([]float64, occupied*occupied), square: make([]float64, occupied*occupied),
		power: make([]float64, occupied*occupied), other: make([]float64, occupied*occupied),
		c: make([]float64, occupied*n),
	}
}

// start takes over a Fock matrix whose orbitals are known.
func (s *subspace) start(f []float64) {
	copy(s.known, f)
	clear(s.x)
}

// Limits of subspace.solve.
const (
	subspaceSteps = 7
	largestTurn   = 0.2 // of an orbital towards another; beyond it the power series below is slow
)

// solve finds the new occupied orbitals to within tol in X and returns how many
// steps it took; ok is false where the matrices are too far apart.
func (s *subspace) solve(o *orbitals, f []float64, tol float64) (steps int, ok bool) {
	if !s.separated(o, nil, tol) {
		return 0, false
	}
	s.change(o, f)
	if !s.separated(o, s.e, tol) {
		return 0, false
	}
	for step := range subspaceSteps {
		largest, moved := s.iterate(o)
		if !(largest < largestTurn) {
			return step, false
		}
		if moved < tol {
			s.orbitals(o, tol)
			return step, true
		}
	}
	return subspaceSteps, false
}

// change computes E.
func (s *subspace) change(o *orbitals, f []float64) {
	n, occ := s.n, s.occupied
	for i, v := range f {
		s.e[i] = v - s.known[i]
	}
	o.work.Gemm(false, false, n, n, n, 1, o.c, n, s.e, n, 0, s.work, n)
	// the block E_ov is E_vo turned and is not needed
	o.work.Gemm(false, true, occ, occ, n, 1, s.work, n, o.c, n, 0, s.e, n)
	o.work.Gemm(false, true, n-occ, n, n, 1, s.work[occ*n:], n, o.c, n, 0, s.e[occ*n:], n)
}

// separated says whether the gap between occupied and virtual levels, moved by
// the diagonal of shift (nil: not moved), is so wide that at the electrons'
// temperature all occupations are whole numbers to within tol.
func (s *subspace) separated(o *orbitals, shift []float64, tol float64) bool {
	top, bottom := math.Inf(-1), math.Inf(1)
	for k, e := range o.energy {
		if shift != nil {
			e += shift[k*s.n+k]
		}
		if k < s.occupied {
			top = max(top, e)
		} else {
			bottom = min(bottom, e)
		}
	}
	return bottom-top > -2*o.kT*math.Log(tol)
}

// iterate takes one step and returns the largest element of X and the largest
// change.
func (s *subspace) iterate(o *orbitals) (largest, moved float64) {
	n, occ := s.n, s.occupied
	virt := n - occ
	vo := s.e[occ*n:] // rows of n, the first occ columns; E_vv behind
	for i := range occ {
		copy(s.inner[i*occ:(i+1)*occ], s.e[i*n:i*n+occ])
	}
	o.work.Gemm(true, false, occ, occ, virt, 1, vo, n, s.x, occ, 1, s.inner, occ)
	for a := range virt {
		copy(s.next[a*occ:(a+1)*occ], vo[a*n:a*n+occ])
	}
	o.work.Gemm(false, false, virt, occ, virt, 1, vo[occ:], n, s.x, occ, 1, s.next, occ)
	o.work.Gemm(false, false, virt, occ, occ, -1, s.x, occ, s.inner, occ, 1, s.next, occ)
	low := o.energy[:occ]
	for a, high := range o.energy[occ:] {
		row, next := s.x[a*occ:(a+1)*occ], s.next[a*occ:(a+1)*occ]
		for i, e := range low {
			v := -next[i] / (high - e)
			moved = max(moved, math.Abs(v-row[i]))
			largest = max(largest, math.Abs(v))
			row[i] = v
		}
	}
	return largest, moved
}

// orbitals writes (1 + X^T X)^(-1/2) (C_o + X^T C_v) into c. The inverse root
// is a power series in X^T X, which is small.
func (s *subspace) orbitals(o *orbitals, tol float64) {
	n, occ := s.n, s.occupied
	virt := n - occ
	bare := s.work[:occ*n]
	copy(bare, o.c)
	o.work.Gemm(true, false, occ, n, virt, 1, s.x, occ, o.c[occ*n:], n, 1, bare, n)
	o.work.Gemm(true, false, occ, occ, virt, 1, s.x, occ, s.x, occ, 0, s.square, occ)
	root, power, other := s.inner, s.power, s.other
	clear(root)
	for i := range occ {
		root[i*occ+i] = 1
	}
	copy(power, s.square)
	first := maxAbs(power)
	factor := 1.0
	for k := 1.0; ; k++ {
		factor *= -(k - 0.5) / k // of (1+y)^(-1/2)
		for i, v := range power {
			root[i] += factor * v
		}
		// no element of the next power is larger than this
		if maxAbs(power)*first*float64(occ) < 0.01*tol || k > 60 {
			break
		}
		o.work.Gemm(false, false, occ, occ, occ, 1, s.square, occ, power, occ, 0, other, occ)
		power, other = other, power
	}
	o.work.Gemm(false, false, occ, n, occ, 1, root, occ, bare, n, 0, s.c, n)
}

// energyDensity writes 2 C^T (C F C^T) C.
func (s *subspace) energyDensity(o *orbitals, w, f []float64) {
	n, occ := s.n, s.occupied
	cf := s.work[:occ*n]
	o.work.Gemm(false, false, occ, n, n, 1, s.c, n, f, n, 0, cf, n)
	o.work.Gemm(false, true, occ, occ, n, 1, cf, n, s.c, n, 0, s.square, occ)
	o.work.Gemm(false, false, occ, n, occ, 2, s.square, occ, s.c, n, 0, cf, n)
	o.work.Gemm(true, false, n, n, occ, 1, s.c, n, cf, n, 0, w, n)
}

func maxAbs(x []float64) float64 {
	var m float64
	for _, v := range x {
		m = max(m, math.Abs(v))
	}
	return m
}
