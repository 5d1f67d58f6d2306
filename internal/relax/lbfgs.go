package relax

import "gonum.org/v1/gonum/floats"

// memory is how many steps the history keeps. Torsions coupled through
// crowding need many: with 12 a ligand took twice as many gradients.
const memory = 80

// A history holds the last steps and changes of gradient, which stand for the
// inverse Hessian: L-BFGS.
// Source: J. Nocedal, Math. Comput. 1980, 35, 773; the two loops as in Nocedal,
// Wright, Numerical Optimization (2nd ed., 2006), algorithm 7.4.
type history struct {
	s, y  [][]float64 // steps and changes of gradient; a ring buffer
	rho   []float64   // 1/(y.s)
	alpha []float64
	used  int // pairs held
	next  int // where the next pair goes
}

func newHistory(n, pairs int) *history {
	h := &history{rho: make([]float64, pairs), alpha: make([]float64, pairs)}
	for range pairs {
		h.s = append(h.s, make([]float64, n))
		h.y = append(h.y, make([]float64, n))
	}
	return h
}

func (h *history) reset() { h.used, h.next = 0, 0 }

// add keeps the pair from (x, g) to (x2, g2), unless the curvature along it is
// not clearly positive: such a pair would spoil the inverse.
func (h *history) add(x, g, x2, g2 []float64) {
	s, y := h.s[h.next], h.y[h.next]
	floats.SubTo(s, x2, x)
	floats.SubTo(y, g2, g)
	sy := floats.Dot(s, y)
	if sy <= 1e-4*floats.Dot(s, s)*softest {
		return
	}
	h.rho[h.next] = 1 / sy
	h.next = (h.next + 1) % len(h.s)
	h.used = min(h.used+1, len(h.s))
}

// softest is the curvature, in hartree/bohr^2, below which a direction tells
// nothing: a torsion of a ligand has some 0.001.
const softest = 1e-3

// index returns the place of the pair that is age steps old, 0 the youngest.
func (h *history) index(age int) int { return (h.next - 1 - age + 2*len(h.s)) % len(h.s) }

// direction replaces the gradient in d by the step -H g. first applies the
// guess of the inverse Hessian in place.
func (h *history) direction(d []float64, first func(d []float64)) {
	for age := range h.used {
		k := h.index(age)
		h.alpha[k] = h.rho[k] * floats.Dot(h.s[k], d)
		floats.AddScaled(d, -h.alpha[k], h.y[k])
	}
	first(d)
	for age := h.used - 1; age >= 0; age-- {
		k := h.index(age)
		beta := h.rho[k] * floats.Dot(h.y[k], d)
		floats.AddScaled(d, h.alpha[k]-beta, h.s[k])
	}
	floats.Scale(-1, d)
}

// scale returns the curvature of the youngest pair as a length of the inverse,
// (s.y)/(y.y), or 0 where there is none.
func (h *history) scale() float64 {
	if h.used == 0 {
		return 0
	}
	k := h.index(0)
	return 1 / (h.rho[k] * floats.Dot(h.y[k], h.y[k]))
}
