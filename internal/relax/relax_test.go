package relax

import (
	"context"
	"errors"
	"math"
	"testing"
)

// rosenbrock is the sum over pairs of 100 (x2 - x1^2)^2 + (1 - x1)^2 scaled by
// f; its minimum is 0 at (1, ..., 1).
// Source: H. H. Rosenbrock, Comput. J. 1960, 3, 175.
func rosenbrock(f float64) Func {
	return func(_ context.Context, grad, x []float64) (float64, error) {
		var e float64
		clear(grad)
		for i := 0; i+1 < len(x); i += 2 {
			a, b := x[i+1]-x[i]*x[i], 1-x[i]
			e += f * (100*a*a + b*b)
			grad[i] += f * (-400*a*x[i] - 2*b)
			grad[i+1] += f * 200 * a
		}
		return e, nil
	}
}

// quadratic is 1/2 sum k_i (x_i - i)^2 with curvatures from 0.001 to 1
// hartree/bohr^2, the range between torsions and bonds.
func quadratic(_ context.Context, grad, x []float64) (float64, error) {
	var e float64
	for i := range x {
		k := math.Pow(10, -3*float64(i)/float64(len(x)-1))
		d := x[i] - float64(i%5)
		e += 0.5 * k * d * d
		grad[i] = k * d
	}
	return e, nil
}

var tight = Settings{RMSGradient: 1e-8, MaxGradient: 3e-8, MaxGradients: 1000}

func TestKnownMinima(t *testing.T) {
	for _, c := range []struct {
		name    string
		surface Func
		start   []float64
		minimum func(i int) float64
		tol     float64
	}{
		{"Rosenbrock", rosenbrock(1), []float64{-1.2, 1, -1.2, 1, 0, 3}, func(int) float64 { return 1 }, 1e-6},
		{"Rosenbrock, small", rosenbrock(1e-3), []float64{-1.2, 1, 2, -1, 0.3, 0.3}, func(int) float64 { return 1 }, 1e-3},
		{"quadratic", quadratic, make([]float64, 30), func(i int) float64 { return float64(i % 5) }, 1e-4},
	} {
		t.Run(c.name, func(t *testing.T) {
			x := append([]float64(nil), c.start...)
			res, err := Minimise(t.Context(), c.surface, x, tight)
			if err != nil || res.Status != Converged {
				t.Fatalf("status %v, error %v after %d gradients", res.Status, err, res.Gradients)
			}
			for i := range x {
				if math.Abs(x[i]-c.minimum(i)) > c.tol {
					t.Errorf("coordinate %d is %g, want %g", i, x[i], c.minimum(i))
				}
			}
			grad := make([]float64, len(x))
			energy, err := c.surface(t.Context(), grad, x)
			if err != nil || energy != res.Energy {
				t.Errorf("energy %g in the result, %g at x", res.Energy, energy)
			}
		})
	}
}

func TestStepIsCapped(t *testing.T) {
	last := make([]float64, 30)
	var most float64
	watch := Func(func(ctx context.Context, grad, x []float64) (float64, error) {
		for i := 0; i < len(x); i += 3 {
			most = math.Max(most, math.Sqrt(sq(x[i]-last[i])+sq(x[i+1]-last[i+1])+sq(x[i+2]-last[i+2])))
		}
		copy(last, x) // a quadratic accepts each point it is asked for
		return quadratic(ctx, grad, x)
	})
	set := tight
	set.MaxStep = 0.05
	if _, err := Minimise(t.Context(), watch, make([]float64, 30), set); err != nil {
		t.Fatal(err)
	}
	if most > 0.05*(1+1e-12) || most < 0.049 {
		t.Errorf("longest step %g, want 0.05", most)
	}
}

func sq(a float64) float64 { return a * a }

func TestEnds(t *testing.T) {
	boom := errors.New("boom")
	calls := 0
	ctx, cancel := context.WithCancel(t.Context())
	constant := func(e, g float64, err error) Func {
		return func(_ context.Context, grad, _ []float64) (float64, error) {
			for i := range grad {
				grad[i] = g
			}
			return e, err
		}
	}
	for _, c := range []struct {
		name    string
		surface Func
		ctx     context.Context
		limit   int
		status  Status
		err     error
	}{
		{"not finite at the start", constant(math.NaN(), 0, nil), t.Context(), 0, Exploded, nil},
		{"gradient not finite", constant(0, math.Inf(1), nil), t.Context(), 0, Exploded, nil},
		{"a slope that leads nowhere", constant(0, 1, nil), t.Context(), 0, Flat, nil},
		{"too few gradients", rosenbrock(1), t.Context(), 5, GradientLimit, nil},
		{"error at the start", constant(0, 0, boom), t.Context(), 0, 0, boom},
		{"error later on", func(ctx context.Context, grad, x []float64) (float64, error) {
			if calls++; calls > 4 {
				return 0, boom
			}
			return rosenbrock(1)(ctx, grad, x)
		}, t.Context(), 0, 0, boom},
		{"interrupted", func(ctx context.Context, grad, x []float64) (float64, error) {
			defer cancel()
			if ctx.Err() != nil {
				return 0, ctx.Err()
			}
			return rosenbrock(1)(ctx, grad, x)
		}, ctx, 0, 0, context.Canceled},
	} {
		t.Run(c.name, func(t *testing.T) {
			set := tight
			set.MaxGradients = c.limit
			x := []float64{-1.2, 1, 0.5}
			res, err := Minimise(c.ctx, c.surface, x, set)
			if !errors.Is(err, c.err) || (c.err == nil && res.Status != c.status) {
				t.Errorf("status %v, error %v; want %v, %v", res.Status, err, c.status, c.err)
			}
			for _, v := range x {
				if math.IsNaN(v) {
					t.Error("a coordinate is not a number")
				}
			}
		})
	}
}

// TestHolesAreAvoided puts a region with errors and one with infinities in the
// way: shorter steps must lead round the fault.
func TestHolesAreAvoided(t *testing.T) {
	for _, fault := range []struct {
		e   float64
		err error
	}{{math.Inf(1), nil}, {0, errors.New("no convergence")}} {
		surface := Func(func(ctx context.Context, grad, x []float64) (float64, error) {
			if x[0] < -0.02 {
				return fault.e, fault.err
			}
			return quadratic(ctx, grad, x)
		})
		x := []float64{0.4, 0, 0, 5, 5, 5}
		set := tight
		set.MaxStep = 3
		res, err := Minimise(t.Context(), surface, x, set)
		if err != nil || res.Status != Converged {
			t.Errorf("fault %v: status %v, error %v", fault, res.Status, err)
		}
	}
}

func TestEnergyChangeCriterion(t *testing.T) {
	loose := Settings{MaxGradient: 1e-2, MaxGradients: 1000}
	strict := loose
	strict.EnergyChange = 1e-12
	x, y := make([]float64, 30), make([]float64, 30)
	a, _ := Minimise(t.Context(), Func(quadratic), x, loose)
	b, _ := Minimise(t.Context(), Func(quadratic), y, strict)
	if a.Status != Converged || b.Status != Converged || b.Gradients <= a.Gradients {
		t.Errorf("%v after %d gradients, with the energy criterion %v after %d", a.Status, a.Gradients, b.Status, b.Gradients)
	}
}

func TestNoAllocationPerStep(t *testing.T) {
	m := NewMinimiser(30)
	x := make([]float64, 30)
	numbers := make([]int, 10)
	for i := range numbers {
		numbers[i] = 6
	}
	for _, set := range []Settings{{}, {Numbers: numbers}, {Numbers: numbers, Internal: true}} {
		run := func(limit int) float64 {
			set.RMSGradient, set.MaxGradients = 1e-12, limit
			return testing.AllocsPerRun(5, func() {
				for i := range x {
					x[i] = 2*float64(i) + math.Sin(float64(i))
				}
				if _, err := m.Minimise(t.Context(), Func(cluster), x, set); err != nil {
					t.Fatal(err)
				}
			})
		}
		if few, many := run(3), run(15); many > few {
			t.Errorf("%g allocations in 3 gradients, %g in 15", few, many)
		}
	}
}

func TestStatusErr(t *testing.T) {
	for s, want := range map[Status]error{Converged: nil, Flat: nil, GradientLimit: ErrGradientLimit, Exploded: ErrExploded} {
		if !errors.Is(s.Err(), want) {
			t.Errorf("%v: error %v, want %v", s, s.Err(), want)
		}
	}
}
