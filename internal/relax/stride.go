package relax

import (
	"context"
	"math"

	"gonum.org/v1/gonum/floats"
)

// learnable is how many times the promise the energy may rise for the point to
// tell of the curvature at the minimum: beyond it atoms have collided.
const learnable = 2

// internal minimises x from the point that res and m.grad describe.
func (m *Minimiser) internal(ctx context.Context, s Surface, x []float64, set Settings, res *Result) error {
	if m.newton == nil {
		m.newton = newNewton(len(x) / 3)
	}
	w := m.newton
	if err := w.begin(x, m.grad, set.Numbers); err != nil {
		return err
	}
	res.record(res.Energy, m.grad)
	for {
		below, err := w.plan(m.grad)
		if err != nil {
			return err
		}
		if set.under(*res, 1) && (set.Descent <= 0 || below <= set.Descent) {
			res.Status = Converged
			return nil
		}
		moved, err := m.stride(ctx, s, x, set, res)
		if err != nil || !moved {
			return err
		}
		if w.scheme.outgrown(x) {
			if err := w.begin(x, m.grad, set.Numbers); err != nil {
				return err
			}
		}
	}
}

// stride tries steps until one goes down. It returns false, with res.Status
// set, where none does.
func (m *Minimiser) stride(ctx context.Context, s Surface, x []float64, set Settings, res *Result) (bool, error) {
	w := m.newton
	status, failures, again := Flat, 0, false
	for {
		if res.Gradients >= set.MaxGradients {
			res.Status = GradientLimit
			return false, nil
		}
		w.walker.walk(&w.scheme, w.here, w.there, m.trial, x, w.region.step)
		w.here.changes(&w.scheme, w.dq, w.there)
		promise := w.curvature.promise(w.gq, w.dq)
		energy, err := s.Gradient(ctx, m.trialGrad, m.trial)
		res.Gradients++
		switch {
		case err != nil:
			if failures++; ctx.Err() != nil || failures == refused {
				return false, err
			}
			w.radius = 0.25 * w.region.length
		case !finite(energy, m.trialGrad):
			status, failures = Exploded, 0
			w.radius = 0.1 * w.region.length
		default:
			status, failures = Flat, 0
			down, err := m.land(x, energy, promise, set.Noise, res)
			if down || err != nil {
				return down, err
			}
		}
		if w.radius < lastRadius {
			if again {
				res.Status = status
				return false, nil
			}
			again = true // with what was learned forgotten
			if err := w.begin(x, m.grad, set.Numbers); err != nil {
				return false, err
			}
		}
		if _, err := w.plan(m.grad); err != nil {
			return false, err
		}
	}
}

// land learns from the point tried and takes it over if it is lower.
func (m *Minimiser) land(x []float64, energy, promise, noise float64, res *Result) (bool, error) {
	w := m.newton
	change := energy - res.Energy
	w.judge(promise, change, noise)
	if err := w.inner(w.gq2, w.there, m.trialGrad); err != nil {
		return false, err
	}
	if change < learnable*math.Abs(promise) {
		w.curvature.learn(w.dq, w.gq, w.gq2)
	}
	if change >= 0 && (change > noise || floats.Norm(m.trialGrad, 2) >= floats.Norm(m.grad, 2)) {
		return false, nil
	}
	copy(x, m.trial)
	m.grad, m.trialGrad = m.trialGrad, m.grad
	w.gq, w.gq2 = w.gq2, w.gq
	w.here, w.there = w.there, w.here
	res.record(energy, m.grad)
	return true, nil
}
