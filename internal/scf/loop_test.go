package scf

import (
	"context"
	"errors"
	"math"
	"testing"
)

// A map with a known fixed point: out_i = a_i tanh(sum_j c_ij in_j) + b_i, with
// slopes at which plain iteration swings up.
type swing struct {
	n             int
	out, residual []float64
}

func (s *swing) step(in []float64) (Output, error) {
	var energy float64
	for i := range s.n {
		s.out[i] = -1.7*math.Tanh(in[i]-0.3*in[(i+1)%s.n]) + 0.4*float64(i)
		s.residual[i] = s.out[i] - in[i]
		energy += s.out[i] * s.out[i]
	}
	return Output{State: s.out, Residual: s.residual, Energy: energy}, nil
}

func newSwing(n int) *swing {
	return &swing{n: n, out: make([]float64, n), residual: make([]float64, n)}
}

func TestBroydenFindsFixedPoint(t *testing.T) {
	s := newSwing(6)
	mixer := NewBroyden(6, 0.4)
	loop := Loop{Step: s.step, Mixer: mixer, Done: Within(1e-12, 1e-13), MaxIter: 60}
	first, it, err := loop.Solve(t.Context(), make([]float64, 6))
	if err != nil {
		t.Fatalf("after %d iterations, residual %g: %v", it.N, it.Residual, err)
	}
	fixed := append([]float64(nil), first...)
	out, _ := s.step(fixed)
	if r := rms(out.Residual); r > 1e-12 {
		t.Errorf("residual at the fixed point %g", r)
	}
	// a used mixer that is restarted is like a new one
	mixer.Restart(0.4)
	again, it2, err := loop.Solve(t.Context(), make([]float64, 6))
	if err != nil || it2 != it {
		t.Errorf("second run %+v, %v; first %+v", it2, err, it)
	}
	for i := range again {
		if again[i] != fixed[i] {
			t.Errorf("second run ends at %v, first at %v", again, fixed)
			break
		}
	}
}

// A mixer that knows a neighbouring problem needs fewer iterations, and the
// oldest part of what it knows can be dropped.
func TestBroydenContinues(t *testing.T) {
	for _, keep := range []int{40, 8} {
		s := newSwing(6)
		mixer := NewBroyden(6, 0.4)
		loop := Loop{Step: s.step, Mixer: mixer, Done: Within(1e-10, 1e-11), MaxIter: 60}
		state, first, err := loop.Solve(t.Context(), make([]float64, 6))
		if err != nil {
			t.Fatal(err)
		}
		near := append([]float64(nil), state...)
		for i := range near {
			near[i] += 0.01 * float64(i%3-1)
		}
		fresh := Loop{Step: s.step, Mixer: NewBroyden(6, 0.4), Done: loop.Done, MaxIter: 60}
		_, alone, err := fresh.Solve(t.Context(), near)
		if err != nil {
			t.Fatal(err)
		}
		mixer.Continue(keep)
		again, second, err := loop.Solve(t.Context(), near)
		if err != nil {
			t.Fatal(err)
		}
		if out, _ := s.step(append([]float64(nil), again...)); rms(out.Residual) > 1e-9 {
			t.Errorf("keep %d: ends with residual %g", keep, rms(out.Residual))
		}
		if second.N >= alone.N {
			t.Errorf("keep %d: %d iterations, %d without the picture, %d at first", keep, second.N, alone.N, first.N)
		}
	}
}

// On a linear problem of n unknowns, the picture is complete after n+1 steps.
func TestBroydenLinear(t *testing.T) {
	matrix := [3][3]float64{{-2, 0.3, 0}, {0.5, 0.2, 1}, {0, -1, 0.6}}
	residual, state := make([]float64, 3), make([]float64, 3)
	step := func(in []float64) (Output, error) {
		for i := range 3 {
			state[i] = float64(i) - 1
			for j := range 3 {
				state[i] += matrix[i][j] * in[j]
			}
			residual[i] = state[i] - in[i]
		}
		return Output{State: state, Residual: residual}, nil
	}
	loop := Loop{Step: step, Mixer: NewBroyden(3, 0.4), Done: Within(1, 1e-6), MaxIter: 12}
	if _, it, err := loop.Solve(t.Context(), make([]float64, 3)); err != nil {
		t.Errorf("residual %g after %d iterations: %v", it.Residual, it.N, err)
	}
}

func TestLoopEnds(t *testing.T) {
	boom := errors.New("boom")
	plain := mixerFunc(func(in []float64, out Output) []float64 { return in })
	value := func(energy, residual float64, err error) Step {
		return func([]float64) (Output, error) {
			return Output{State: []float64{1}, Residual: []float64{residual}, Energy: energy}, err
		}
	}
	cancelled, cancel := context.WithCancel(t.Context())
	cancel()
	for name, tc := range map[string]struct {
		ctx  context.Context
		step Step
		want error
		n    int
	}{
		"never":     {t.Context(), value(1, 1, nil), ErrNotConverged, 5},
		"at once":   {t.Context(), value(0, 0, nil), nil, 1},
		"nan":       {t.Context(), value(math.NaN(), 1, nil), ErrNotFinite, 1},
		"inf":       {t.Context(), value(1, math.Inf(1), nil), ErrNotFinite, 1},
		"step":      {t.Context(), value(1, 1, boom), boom, 0},
		"cancelled": {cancelled, value(0, 0, nil), context.Canceled, 0},
	} {
		t.Run(name, func(t *testing.T) {
			watched := 0
			loop := Loop{Step: tc.step, Mixer: plain, Done: Within(1e-6, 1e-6), MaxIter: 5, Watch: func(Iteration) { watched++ }}
			_, it, err := loop.Solve(tc.ctx, []float64{0})
			if !errors.Is(err, tc.want) || it.N != tc.n || watched != tc.n {
				t.Errorf("iteration %d, watched %d, error %v; want %d, %v", it.N, watched, err, tc.n, tc.want)
			}
		})
	}
}

type mixerFunc func(in []float64, out Output) []float64

func (f mixerFunc) Next(in []float64, out Output) []float64 { return f(in, out) }
