package relax

import (
	"context"
	"math"

	"gonum.org/v1/gonum/floats"
)

const (
	armijo  = 1e-4 // least share of the promised descent
	trials  = 12   // points tried along one direction
	refused = 4    // errors of the surface in a row that are taken for an answer
)

// cartesian minimises x by L-BFGS from the point that res and m.grad describe.
func (m *Minimiser) cartesian(ctx context.Context, s Surface, x []float64, set Settings, res *Result) error {
	if m.history == nil {
		m.history = newHistory(len(x), memory)
	}
	m.history.reset()
	m.prepareModel(x, set.Numbers)
	change := math.Inf(1)
	for !set.satisfied(*res, change) {
		if res.Gradients >= set.MaxGradients {
			res.Status = GradientLimit
			return nil
		}
		before := res.Energy
		moved, err := m.step(ctx, s, x, set, res)
		if err != nil || !moved {
			return err
		}
		change = res.Energy - before
	}
	res.Status = Converged
	return nil
}

// satisfied judges the accepted point. A gradient ten times below its limits
// needs no energy change: there may be no step to measure it by.
func (set Settings) satisfied(r Result, change float64) bool {
	if set.EnergyChange <= 0 || math.Abs(change) <= set.EnergyChange {
		return set.under(r, 1)
	}
	return set.under(r, 0.1)
}

// step makes one step downhill and takes it into x, res and the history. It
// returns false, with res.Status set, where there is no lower point.
func (m *Minimiser) step(ctx context.Context, s Surface, x []float64, set Settings, res *Result) (bool, error) {
	for {
		copy(m.dir, m.grad)
		fresh := m.history.used == 0
		m.history.direction(m.dir, m.firstGuess)
		slope := floats.Dot(m.dir, m.grad)
		if !(slope < 0) && !fresh { // the history is spoiled
			m.history.reset()
			continue
		}
		moved, status, err := m.search(ctx, s, x, slope, set, res)
		if moved || err != nil {
			return moved, err
		}
		if fresh || status == GradientLimit {
			res.Status = status
			return false, nil
		}
		m.history.reset()
	}
}

// firstGuess applies the guess of the inverse Hessian: the model where there is
// one, otherwise a multiple of the unit matrix.
func (m *Minimiser) firstGuess(d []float64) {
	if m.model.ready() {
		m.model.solve(d)
		return
	}
	f := m.history.scale()
	if f == 0 {
		f = 1 // hartree/bohr^2: a bond; the cap on the step does the rest
	}
	floats.Scale(f, d)
}

// search goes along m.dir until the energy has fallen enough, at most trials
// times. The first length is 1, cut down to the longest allowed step.
func (m *Minimiser) search(ctx context.Context, s Surface, x []float64, slope float64, set Settings, res *Result) (bool, Status, error) {
	t := math.Min(1, set.MaxStep/longest(m.dir))
	status, failures := Flat, 0
	for range trials {
		if res.Gradients >= set.MaxGradients {
			return false, GradientLimit, nil
		}
		floats.AddScaledTo(m.trial, x, t, m.dir)
		energy, err := s.Gradient(ctx, m.trialGrad, m.trial)
		res.Gradients++
		if err != nil {
			if failures++; ctx.Err() != nil || failures == refused {
				return false, status, err
			}
			t *= 0.2
			continue
		}
		failures = 0
		if !finite(energy, m.trialGrad) {
			status = Exploded
			t *= 0.1
			continue
		}
		slope2 := floats.Dot(m.dir, m.trialGrad)
		if accept(res.Energy, energy, t, slope, slope2, set.Noise) {
			m.history.add(x, m.grad, m.trial, m.trialGrad)
			copy(x, m.trial)
			m.grad, m.trialGrad = m.trialGrad, m.grad
			res.record(energy, m.grad)
			return true, Converged, nil
		}
		status = Flat
		t = shorter(t, res.Energy, energy, slope, slope2)
	}
	return false, status, nil
}

// accept asks for Armijo's share of the descent or, where the energies differ
// by no more than noise, for a slope that has clearly fallen: close to the
// minimum the gradient has digits left when the energy has none.
// Source: W. W. Hager, H. Zhang, SIAM J. Optim. 2005, 16, 170, eq. 4.1.
func accept(e0, e1, t, slope, slope2, noise float64) bool {
	if e1 <= e0+armijo*t*slope {
		return true
	}
	return e1 <= e0+noise && slope2 <= (2*armijo-1)*slope && slope2 >= 0.9*slope
}

// shorter returns the minimum of the cubic through both energies and slopes,
// kept between a tenth and a half of t.
// Source: Nocedal, Wright, Numerical Optimization (2nd ed., 2006), eq. 3.59.
func shorter(t, e0, e1, slope, slope2 float64) float64 {
	d1 := slope + slope2 - 3*(e1-e0)/t
	root := d1*d1 - slope*slope2
	next := t / 2
	if root >= 0 {
		d2 := math.Sqrt(root)
		next = t - t*(slope2+d2-d1)/(slope2-slope+2*d2)
	}
	if !(next > 0.1*t) {
		return 0.1 * t
	}
	return math.Min(next, 0.5*t)
}

// longest returns how far the atom moves that moves most.
func longest(d []float64) float64 {
	var most float64
	for i := 0; i < len(d); i += 3 {
		most = math.Max(most, d[i]*d[i]+d[i+1]*d[i+1]+d[i+2]*d[i+2])
	}
	return math.Sqrt(most)
}
