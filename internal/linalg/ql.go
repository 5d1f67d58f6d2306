package linalg

import (
	"errors"
	"math"
)

// ErrNotConverged comes from an eigenproblem whose iteration did not end. No
// finite matrix is known that does this.
var ErrNotConverged = errors.New("linalg: eigenvalue iteration not converged")

// ErrNotFinite comes from a matrix with an infinity or a NaN in it.
var ErrNotFinite = errors.New("linalg: matrix is not finite")

const (
	epsilon = 0x1p-52
	// maxSweeps is the number of sweeps allowed for each eigenvalue on average;
	// about 1.7 are needed.
	maxSweeps = 30
)

// diagonalise turns the tridiagonal matrix with diagonal d and off-diagonal e,
// len(e) == len(d), the last of e unused, into diagonal form, in d, and applies
// the rotations that this takes to the rows of z.
//
// It is the QL algorithm with implicit shifts, or QR where the block's far end
// is the heavier one: A. Dubrulle, Numer. Math. 1970, 15, 450; J. H. Wilkinson,
// C. Reinsch, Handbook for Automatic Computation II (1971), II/4.
func (r *rotations) diagonalise(d, e, z []float64, ld, columns int) error {
	sweeps := 0
	for start := 0; start < len(d); {
		end := blockEnd(d, e, start)
		if end == start {
			start++
			continue
		}
		if sweeps++; sweeps > maxSweeps*len(d) {
			return ErrNotConverged
		}
		if math.Abs(d[end]) < math.Abs(d[start]) {
			r.begin(start, 1, z, ld, columns)
			r.sweepDown(d, e, start, end)
		} else {
			r.begin(end, -1, z, ld, columns)
			r.sweepUp(d, e, start, end)
		}
	}
	r.flush(z, ld, columns)
	return nil
}

// blockEnd returns the last index of the block at start that does not fall
// apart, and clears the off-diagonal behind it.
func blockEnd(d, e []float64, start int) int {
	for i := start; i < len(d)-1; i++ {
		if a := math.Abs(e[i]); a <= epsilon*(math.Abs(d[i])+math.Abs(d[i+1])) || a < tiny {
			e[i] = 0
			return i
		}
	}
	return len(d) - 1
}

// tiny is nothing in a matrix whose largest number is about one, and has a
// square that is not zero.
const tiny = 1e-150

// sweepUp is one QL sweep over the block from start to end: it makes
// e[start] small.
func (r *rotations) sweepUp(d, e []float64, start, end int) {
	g := d[end] - d[start] + shift(d[start], d[start+1], e[start])
	s, c, p := 1.0, 1.0, 0.0
	for i := end - 1; i >= start; i-- {
		f, b := s*e[i], c*e[i]
		var h float64
		c, s, h = rotation(g, f)
		if i < end-1 {
			e[i+1] = h
		}
		g = d[i+1] - p
		t := (d[i]-g)*s + 2*c*b
		p = s * t
		d[i+1] = g + p
		g = c*t - b
		r.add(c, s)
	}
	d[start] -= p
	e[start] = g
}

// sweepDown is one QR sweep, the mirror image: it makes e[end-1] small.
func (r *rotations) sweepDown(d, e []float64, start, end int) {
	g := d[start] - d[end] + shift(d[end], d[end-1], e[end-1])
	s, c, p := 1.0, 1.0, 0.0
	for i := start; i < end; i++ {
		f, b := s*e[i], c*e[i]
		var h float64
		c, s, h = rotation(g, f)
		if i > start {
			e[i-1] = h
		}
		g = d[i] - p
		t := (d[i+1]-g)*s + 2*c*b
		p = s * t
		d[i] = g + p
		g = c*t - b
		r.add(c, s)
	}
	d[end] -= p
	e[end-1] = g
}

// shift returns how far below a the eigenvalue of the block (a e; e b) lies
// that is nearer to a (Wilkinson's shift).
func shift(a, b, e float64) float64 {
	g := (b - a) / (2 * e)
	return e / (g + math.Copysign(math.Sqrt(g*g+1), g))
}

// rotation returns cosine and sine that turn (g, f) into (h, 0).
func rotation(g, f float64) (c, s, h float64) {
	h = math.Sqrt(g*g + f*f)
	if h < tiny {
		return 1, 0, h
	}
	inverse := 1 / h
	return g * inverse, f * inverse, h
}
