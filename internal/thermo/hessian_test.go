package thermo

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"torsieve/internal/relax"
)

// bowl is the surface g.(x-x0) + (x-x0)'H(x-x0)/2 with a random symmetric H.
type bowl struct {
	x0, slope, hessian []float64
}

func newBowl(n int) *bowl {
	r := rand.New(rand.NewPCG(3, 7))
	b := &bowl{x0: make([]float64, n), slope: make([]float64, n), hessian: make([]float64, n*n)}
	for i := range n {
		b.x0[i], b.slope[i] = 3*r.NormFloat64(), 1e-3*r.NormFloat64()
		for j := range i + 1 {
			h := r.NormFloat64()
			b.hessian[i*n+j], b.hessian[j*n+i] = h, h
		}
	}
	return b
}

func (b *bowl) Gradient(_ context.Context, grad, x []float64) (float64, error) {
	n, energy := len(x), 2.0
	for i := range n {
		curved := 0.0
		for j := range n {
			curved += b.hessian[i*n+j] * (x[j] - b.x0[j])
		}
		grad[i] = b.slope[i] + curved
		energy += (b.slope[i] + curved/2) * (x[i] - b.x0[i])
	}
	return energy, nil
}

// Central differences of the gradient are exact for a quadratic surface, for any
// step, to the rounding of coordinates of size 10 over the step.
func TestQuadraticSurface(t *testing.T) {
	b := newBowl(12)
	for _, step := range []float64{0, 1e-3, 0.1} {
		x := slices.Clone(b.x0)
		h, err := Differences(t.Context(), b, x, step)
		if err != nil {
			t.Fatal(err)
		}
		for k, want := range b.hessian {
			if math.Abs(h.Matrix[k]-want) > 1e-11 {
				t.Errorf("step %g: element %d is %.14f, want %.14f", step, k, h.Matrix[k], want)
			}
		}
		if h.Energy != 2 || math.Abs(h.Gradient-rms(b.slope)) > 1e-18 || h.Asymmetry > 1e-12 || h.Gradients != 25 {
			t.Errorf("step %g: energy %g, gradient %g, asymmetry %g, %d gradients", step, h.Energy, h.Gradient, h.Asymmetry, h.Gradients)
		}
		if !slices.Equal(x, b.x0) {
			t.Error("the geometry was changed")
		}
	}
}

// The matrix is symmetric to the last bit, and Asymmetry tells the error: a
// gradient with independent errors of size s gives elements with errors of
// s/(sqrt 2 step) before the averaging and s/(2 step) after it.
func TestAsymmetryIsNoise(t *testing.T) {
	const n, size, step = 30, 1e-6, 0.01
	b := newBowl(n)
	r := rand.New(rand.NewPCG(1, 2))
	noisy := relax.Func(func(ctx context.Context, grad, x []float64) (float64, error) {
		energy, err := b.Gradient(ctx, grad, x)
		for i := range grad {
			grad[i] += size * r.NormFloat64()
		}
		return energy, err
	})
	h, err := Differences(t.Context(), noisy, b.x0, step)
	if err != nil {
		t.Fatal(err)
	}
	var sum float64
	for i := range n {
		for j := range i {
			if h.Matrix[i*n+j] != h.Matrix[j*n+i] {
				t.Fatalf("elements %d,%d and %d,%d differ", i, j, j, i)
			}
			d := h.Matrix[i*n+j] - b.hessian[i*n+j]
			sum += d * d
		}
	}
	pairs := float64(n * (n - 1) / 2) // 435: a standard deviation is known to 3.4 %
	want := size / (2 * step)
	if e := math.Sqrt(sum / pairs); math.Abs(e/want-1) > 0.14 {
		t.Errorf("error of the elements %.3g, theory %.3g", e, want)
	}
	if math.Abs(h.Asymmetry/want-1) > 0.14 { // four standard deviations
		t.Errorf("asymmetry %.3g, theory %.3g", h.Asymmetry, want)
	}
}

// The centre first, then up and down along each coordinate, one at a time.
func TestOrderOfPoints(t *testing.T) {
	x := []float64{1, 2, 4, 8, 16, 32}
	var seen [][]float64
	s := relax.Func(func(_ context.Context, _, y []float64) (float64, error) {
		seen = append(seen, slices.Clone(y))
		return 0, nil
	})
	if _, err := Differences(t.Context(), s, x, 0.5); err != nil {
		t.Fatal(err)
	}
	want := [][]float64{x}
	for i := range x {
		for _, step := range []float64{0.5, -0.5} {
			y := slices.Clone(x)
			y[i] += step
			want = append(want, y)
		}
	}
	if !slices.EqualFunc(seen, want, slices.Equal[[]float64]) {
		t.Errorf("points %v, want %v", seen, want)
	}
}

// What a surface says reaches the caller, with the atom; so does the end of a
// context, and a gradient that is not finite.
func TestErrorsOfTheSurface(t *testing.T) {
	broken := errors.New("broken")
	for _, tc := range []struct {
		call   int // at which the surface fails
		err    error
		poison float64
		want   error
		text   string
	}{
		{1, broken, 0, broken, "as it stands"},
		{2, broken, 0, broken, "atom 1 moved by 0.01 bohr along x"},
		{13, broken, 0, broken, "atom 2 moved by -0.01 bohr along z"},
		{5, context.Canceled, 0, context.Canceled, "atom 1"},
		{1, nil, math.NaN(), relax.ErrExploded, "as it stands"},
		{7, nil, math.Inf(1), relax.ErrExploded, "atom 1 moved by -0.01 bohr along z"},
	} {
		calls := 0
		s := relax.Func(func(_ context.Context, grad, _ []float64) (float64, error) {
			clear(grad)
			if calls++; calls == tc.call {
				grad[3] = tc.poison
				return 0, tc.err
			}
			return 0, nil
		})
		h, err := Differences(t.Context(), s, make([]float64, 6), 0.01)
		if !errors.Is(err, tc.want) || !strings.Contains(err.Error(), tc.text) || h.Matrix != nil {
			t.Errorf("call %d: error %v, want %v with %q", tc.call, err, tc.want, tc.text)
		}
		if calls != tc.call {
			t.Errorf("%d gradients, the one numbered %d failed", calls, tc.call)
		}
	}
}

// The matrix, two rows of scratch and what comes with them are all that is
// allocated, however many gradients there are.
func TestDifferencesAllocate(t *testing.T) {
	b := newBowl(30)
	if n := testing.AllocsPerRun(5, func() {
		if _, err := Differences(t.Context(), b, b.x0, 0); err != nil {
			t.Fatal(err)
		}
	}); n > 6 {
		t.Errorf("%g allocations for 61 gradients", n)
	}
}
