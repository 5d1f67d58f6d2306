package scf

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/blas/gonum"
)

// A Broyden mixes a state by the modified Broyden method: all iterations so
// far give a picture of how the residual answers to the state. The picture may
// be taken along to a neighbouring problem (Continue), which then needs about
// two thirds of the iterations.
//
// Source: D. D. Johnson, Phys. Rev. B 1988, 38, 12807.
type Broyden struct {
	damping float64

	state, before, residual []float64 // next state; last state and residual
	steps                   [][]float64
	changes                 [][]float64 // normalised changes of the residual
	weights                 []float64
	overlaps                [][]float64 // of changes k and l <= k
	count                   int         // changes known
	begun                   bool        // state and residual of a last iteration are known
	matrix, right           []float64
}

var _ Mixer = (*Broyden)(nil)

// NewBroyden returns a mixer for states of n numbers that begins with steps of
// damping (0 to 1) times the residual.
func NewBroyden(n int, damping float64) *Broyden {
	return &Broyden{damping: damping, state: make([]float64, n), before: make([]float64, n), residual: make([]float64, n)}
}

// Restart forgets all iterations and keeps the memory for them.
func (b *Broyden) Restart(damping float64) {
	b.count, b.begun, b.damping = 0, false, damping
}

// Continue begins a problem that is close to the last one: the picture of the
// residual's answer stays, as far as the last keep changes give it.
func (b *Broyden) Continue(keep int) {
	b.begun = false
	drop := b.count - keep
	if drop <= 0 {
		return
	}
	rotate(b.changes, drop, b.count)
	rotate(b.steps, drop, b.count)
	copy(b.weights, b.weights[drop:b.count])
	for k := range keep {
		copy(b.overlaps[k], b.overlaps[k+drop][drop:k+drop+1])
	}
	b.count = keep
}

// rotate moves the first drop of count vectors behind the others.
func rotate(x [][]float64, drop, count int) {
	slices.Reverse(x[:drop])
	slices.Reverse(x[drop:count])
	slices.Reverse(x[:count])
}

// Next implements Mixer. Residual and state have the mixer's length; panics
// otherwise.
func (b *Broyden) Next(in []float64, out Output) []float64 {
	if len(in) != len(b.state) || len(out.Residual) != len(b.state) {
		panic("scf: Broyden mixer is for another length")
	}
	if b.begun {
		b.remember(in, out.Residual)
	}
	b.begun = true
	copy(b.before, in)
	copy(b.residual, out.Residual)
	for i := range b.state {
		b.state[i] = in[i] + b.damping*out.Residual[i]
	}
	if b.count > 0 {
		b.correct(out.Residual)
	}
	return b.state
}

// remember enters the change since the last iteration.
func (b *Broyden) remember(in, residual []float64) {
	k := b.count
	b.count++
	if k == len(b.changes) {
		b.changes = append(b.changes, make([]float64, len(b.state)))
		b.steps = append(b.steps, make([]float64, len(b.state)))
		b.overlaps = append(b.overlaps, make([]float64, k+1))
		b.weights = append(b.weights, 0)
	}
	change, step := b.changes[k], b.steps[k]
	for i := range change {
		change[i] = residual[i] - b.residual[i]
	}
	norm := max(math.Sqrt(inner(change, change)), 2.2e-16)
	for i := range change {
		change[i] /= norm
		step[i] = b.damping*change[i] + (in[i]-b.before[i])/norm
	}
	b.weights[k] = min(max(0.01/math.Sqrt(inner(residual, residual)), 1), 1e5)
	for l := range k + 1 {
		b.overlaps[k][l] = inner(change, b.changes[l])
	}
}

// correct takes off the part of the residual that the past explains
// (eqs. 13-15).
func (b *Broyden) correct(residual []float64) {
	n := b.count
	if cap(b.matrix) < n*n {
		b.matrix, b.right = make([]float64, 4*n*n), make([]float64, 2*n)
	}
	matrix, right := b.matrix[:n*n], b.right[:n]
	for k := range n {
		right[k] = b.weights[k] * inner(b.changes[k], residual)
		for l := range k + 1 {
			matrix[k*n+l] = b.weights[k] * b.weights[l] * b.overlaps[k][l]
		}
		matrix[k*n+k] += 0.01 * 0.01
	}
	solveSymmetric(matrix, right, n)
	for k := range n {
		gonum.Implementation{}.Daxpy(len(b.state), -b.weights[k]*right[k], b.steps[k], 1, b.state, 1)
	}
}

// solveSymmetric solves a x = x in place for a positive definite a, of which
// the lower triangle is given and destroyed, by a = L D L^T.
func solveSymmetric(a, x []float64, n int) {
	for j := range n {
		d := a[j*n+j]
		for k := range j {
			d -= a[j*n+k] * a[j*n+k] * a[k*n+k]
		}
		a[j*n+j] = d
		for i := j + 1; i < n; i++ {
			v := a[i*n+j]
			for k := range j {
				v -= a[i*n+k] * a[j*n+k] * a[k*n+k]
			}
			a[i*n+j] = v / d
		}
	}
	for i := range n {
		for k := range i {
			x[i] -= a[i*n+k] * x[k]
		}
	}
	for i := n - 1; i >= 0; i-- {
		x[i] /= a[i*n+i]
		for k := i + 1; k < n; k++ {
			x[i] -= a[k*n+i] * x[k]
		}
	}
}

func inner(x, y []float64) float64 {
	return gonum.Implementation{}.Ddot(len(x), x, 1, y, 1)
}
