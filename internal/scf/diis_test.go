package scf

import (
	"math"
	"testing"
)

// A linear map x -> A x + b has its fixed point where DIIS must arrive after
// one iteration more than there are dimensions.
func TestDIISSolvesLinearMaps(t *testing.T) {
	a := [3][3]float64{{0.5, 0.3, -0.2}, {0.1, -0.7, 0.4}, {-0.3, 0.2, 0.9}}
	b := [3]float64{1, -2, 0.5}
	step := func(in []float64) (Output, error) {
		out := Output{State: make([]float64, 3), Residual: make([]float64, 3)}
		for i := range 3 {
			out.State[i] = b[i]
			for j := range 3 {
				out.State[i] += a[i][j] * in[j]
			}
			out.Residual[i] = out.State[i] - in[i]
			out.Energy += out.State[i]
		}
		return out, nil
	}
	for _, keep := range []int{4, 6} {
		var last Iteration
		loop := Loop{Step: step, Mixer: NewDIIS(3, keep), MaxIter: 6,
			Done: func(it Iteration) bool { last = it; return it.Residual < 1e-12 }}
		x, _, err := loop.Solve(t.Context(), []float64{1, 1, 1})
		if err != nil {
			t.Fatalf("keep %d: %v after %d iterations, residual %g", keep, err, last.N, last.Residual)
		}
		for i := range 3 {
			r := b[i] - x[i]
			for j := range 3 {
				r += a[i][j] * x[j]
			}
			if math.Abs(r) > 1e-11 {
				t.Errorf("keep %d: x[%d] is off the fixed point by %g", keep, i, r)
			}
		}
	}
}

// The weights are those of the plain equations [B -1; -1 0] of the paper, here
// for two residuals, where they have a closed form.
func TestDIISWeightsOfTwo(t *testing.T) {
	d := NewDIIS(1, 8)
	d.Next(nil, Output{State: []float64{10}, Residual: []float64{1, 0}})
	got := d.Next(nil, Output{State: []float64{20}, Residual: []float64{-0.25, 1e-3}})[0]
	b11, b12, b22 := 1.0, -0.25, 0.0625+1e-6
	c1 := (b22 - b12) / (b11 + b22 - 2*b12)
	if want := 10*c1 + 20*(1-c1); math.Abs(got-want) > 1e-12 {
		t.Errorf("got %.15g, want %.15g", got, want)
	}
}

func TestDIISDropsWhatIsSingular(t *testing.T) {
	d := NewDIIS(1, 8)
	d.Next(nil, Output{State: []float64{1}, Residual: []float64{1, 0}})
	d.Next(nil, Output{State: []float64{2}, Residual: []float64{1, 0}}) // the same again
	got := d.Next(nil, Output{State: []float64{4}, Residual: []float64{0, 1}})[0]
	if math.Abs(got-3) > 1e-12 {
		t.Errorf("got %g, want the mean 3 of the two that differ", got)
	}
	if got := d.Next(nil, Output{State: []float64{7}, Residual: []float64{0, 0}})[0]; got != 7 {
		t.Errorf("got %g, want the state without a residual, 7", got)
	}
}

func TestDIISAllocatesNothingLater(t *testing.T) {
	d := NewDIIS(2, 3)
	x := 1.0
	next := func() {
		x = math.Mod(x*1.7+0.3, 1)
		d.Next(nil, Output{State: []float64{x, 1}, Residual: []float64{x - 0.5, 1 - x*x}})
	}
	for range 8 {
		next()
	}
	if n := testing.AllocsPerRun(50, next); n > 0 {
		t.Errorf("%g allocations an iteration", n)
	}
	d.Restart()
	if got := d.Next(nil, Output{State: []float64{5, 6}, Residual: []float64{1, 1}}); got[0] != 5 || got[1] != 6 {
		t.Errorf("after Restart: %v, want the only state there is", got)
	}
}
