package relax

import (
	"context"
	"errors"
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/floats"
)

// cluster is the Lennard-Jones energy with a well of depth 0.05 hartree at 4 bohr.
func cluster(_ context.Context, grad, x []float64) (float64, error) {
	const depth, away = 0.05, 4.0
	var e float64
	clear(grad)
	for i := 0; i < len(x); i += 3 {
		for j := 0; j < i; j += 3 {
			d := [3]float64{x[i] - x[j], x[i+1] - x[j+1], x[i+2] - x[j+2]}
			r2 := inner(d, d)
			s := math.Pow(away*away/r2, 3)
			e += depth * (s*s - 2*s)
			f := -12 * depth * (s*s - s) / r2
			for k := range 3 {
				grad[i+k] += f * d[k]
				grad[j+k] -= f * d[k]
			}
		}
	}
	return e, nil
}

func argon(n int) []int {
	numbers := make([]int, n)
	for i := range numbers {
		numbers[i] = 18
	}
	return numbers
}

var (
	four  = []float64{0, 0, 0, 4.2, 0.1, 0, 1.9, 3.4, 0.2, 2.1, 1.3, 3.6}
	seven = []float64{ // two above and below of five in a ring, pushed about
		3.4, 0.1, 0.2, 1.0, 3.3, -0.1, -2.8, 2.0, 0.1, -2.7, -2.1, 0.2, 1.1, -3.2, -0.2, 0.1, 0, 2.2, -0.1, 0.2, -2.0,
	}
	inside = Settings{RMSGradient: 1e-7, MaxGradients: 200, Internal: true}
)

// The energies of the lowest clusters in depths of the well: D. J. Wales, J. P. K.
// Doye, J. Phys. Chem. A 1997, 101, 5111, table 1 (from memory).
func TestClustersOfAtoms(t *testing.T) {
	for _, c := range []struct {
		x      []float64
		depths float64
	}{{four, -6}, {seven, -16.505384}} {
		x := append([]float64(nil), c.x...)
		set := inside
		set.Numbers = argon(len(x) / 3)
		res, err := Minimise(t.Context(), Func(cluster), x, set)
		if err != nil || res.Status != Converged {
			t.Fatalf("%+v, %v", res, err)
		}
		if got := res.Energy / 0.05; math.Abs(got-c.depths) > 1e-6 {
			t.Errorf("%d atoms: %.7f depths in %d gradients, want %g", len(x)/3, got, res.Gradients, c.depths)
		}
	}
}

// TestSchemesAreComplete counts the motions that the internal coordinates span:
// 3N-6, or 3N-5 on a line.
func TestSchemesAreComplete(t *testing.T) {
	for _, c := range []struct {
		name    string
		numbers []int
		x       []float64
		places  bool
	}{
		{"one atom", []int{2}, []float64{1, 2, 3}, false},
		{"hydrogen", []int{1, 1}, []float64{0, 0, 0, 0, 1, 1}, false},
		{"water", []int{8, 1, 1}, []float64{0, 0, 0, 1.8, 0, 0, -0.5, 1.7, 0}, false},
		{"carbon dioxide", []int{8, 6, 8}, []float64{-2.2, 0, 0, 0, 0, 0, 2.2, 0, 0}, false},
		{"ethyne", ethyneNumbers, ethyne, false},
		{"a chain", chainNumbers, chain, false},
		{"allene", []int{6, 6, 6, 1, 1, 1, 1}, []float64{
			-2.47, 0, 0, 0, 0, 0, 2.47, 0, 0, -3.5, 1.75, 0, -3.5, -1.75, 0, 3.5, 0, 1.75, 3.5, 0, -1.75,
		}, false},
		{"formaldehyde", []int{6, 8, 1, 1}, []float64{0, 0, 0, 2.3, 0, 0, -1.1, 1.8, 0, -1.1, -1.8, 0}, false},
		{"two waters", []int{8, 1, 1, 8, 1, 1}, []float64{
			0, 0, 0, 1.8, 0, 0, -0.5, 1.7, 0, 5.5, 0.1, 0, 6.1, 1.2, 1.3, 6, 0.9, -1.5,
		}, false},
		{"a flat cross", []int{54, 9, 9, 9, 9}, []float64{0, 0, 0, 3.7, 0, 0, -3.7, 0, 0, 0, 3.7, 0, 0, -3.7, 0}, false},
		{"a flat kite", []int{54, 9, 9, 9, 9}, []float64{0, 0, 0, 3.4, 1.5, 0, -3.4, 1.5, 0, 0, 3.7, 0, 0, -3.7, 0}, true},
	} {
		t.Run(c.name, func(t *testing.T) {
			w := newNewton(len(c.numbers))
			if err := w.begin(c.x, make([]float64, len(c.x)), c.numbers); err != nil {
				t.Fatal(err)
			}
			if !w.complete() {
				t.Error("a motion is missing")
			}
			isPlace := func(c coordinate) bool { return c.kind == place }
			if got := slices.ContainsFunc(w.scheme.coords, isPlace); got != c.places {
				t.Errorf("Cartesian coordinates: %v, want %v", got, c.places)
			}
		})
	}
}

// TestWalkReachesTheStep turns a chain about its bond: the hydrogens must go
// round, without stretching a bond.
func TestWalkReachesTheStep(t *testing.T) {
	w := newNewton(len(chainNumbers))
	g := make([]float64, len(chain))
	if err := w.begin(chain, g, chainNumbers); err != nil {
		t.Fatal(err)
	}
	q := make([]float64, len(w.scheme.coords))
	for i, c := range w.scheme.coords {
		if c.kind == torsion {
			q[i] = w.scheme.weight[i]
		}
	}
	w.here.up(&w.scheme, w.region.step, q)
	w.here.down(&w.scheme, q, w.region.step)
	floats.Scale(0.6/floats.Norm(q, math.Inf(1)), w.region.step)
	y := make([]float64, len(chain))
	w.walker.walk(&w.scheme, w.here, w.there, y, chain, w.region.step)
	w.here.changes(&w.scheme, w.dq, w.there)
	for i, c := range w.scheme.coords {
		if off := math.Abs(w.dq[i] - w.walker.want[i]); c.kind == stretch && off > 2e-3 || off > 0.1 {
			t.Errorf("coordinate %d of kind %d changes by %.4f, want %.4f", i, c.kind, w.dq[i], w.walker.want[i])
		}
	}
}

// TestCurvatureOfAParabola: after steps along all directions the learned
// Hessian is the true one.
func TestCurvatureOfAParabola(t *testing.T) {
	want := []float64{2, 0.3, 0.1, 0.3, 1, -0.2, 0.1, -0.2, 0.5}
	var c curvature
	c.guess([]float64{1, 1, 1})
	zero, g, dq := make([]float64, 3), make([]float64, 3), make([]float64, 3)
	for range 40 {
		for i := range dq {
			clear(dq)
			dq[i], dq[(i+1)%3] = 0.1, 0.03
			for r := range g {
				g[r] = floats.Dot(want[3*r:3*r+3], dq)
			}
			c.promise(zero, dq)
			c.learn(dq, zero, g)
		}
	}
	if !floats.EqualApprox(c.h, want, 1e-6) {
		t.Errorf("learned %v, want %v", c.h, want)
	}
}

// TestCurvatureStaysPositive: a step with negative curvature must not make h so.
func TestCurvatureStaysPositive(t *testing.T) {
	var c curvature
	c.guess([]float64{1, 1})
	g := []float64{0, 0}
	dq := []float64{0.1, 0}
	c.promise(g, dq)
	c.learn(dq, g, []float64{-0.3, 0.1})
	if det := c.h[0]*c.h[3] - c.h[1]*c.h[2]; c.h[0] <= 0 || det <= 0 {
		t.Errorf("h is %v", c.h)
	}
}

// TestRegionKeepsToTheRadius: inside, the bottom of the parabola; on the edge, the
// lowest point of it, where step and slope go together.
func TestRegionKeepsToTheRadius(t *testing.T) {
	r := newRegion(2)
	r.curve, r.metric = []float64{2, 0, 0.5, 0.3}, []float64{1, 0, 0, 3}
	g := []float64{0.3, -0.2}
	if _, ok := r.within(g, 1e3); !ok {
		t.Fatal("not positive")
	}
	bottom := append([]float64(nil), r.step...)
	if want := []float64{2*bottom[0] + 0.5*bottom[1], 0.5*bottom[0] + 0.3*bottom[1]}; math.Abs(want[0]+g[0]) > 1e-12 || math.Abs(want[1]+g[1]) > 1e-12 {
		t.Errorf("the slope at the bottom is %g, %g", want[0]+g[0], want[1]+g[1])
	}
	r.within(g, 0.2)
	if r.length > 0.22 || r.length < 0.19 {
		t.Errorf("length %g, want 0.2", r.length)
	}
}

// TestInternalEnds: faults of the surface end a minimisation as they should.
func TestInternalEnds(t *testing.T) {
	boom := errors.New("boom")
	for _, c := range []struct {
		name    string
		surface Func
		limit   int
		status  Status
		err     error
	}{
		{"too few gradients", cluster, 3, GradientLimit, nil},
		{"errors all along", failing(cluster, 2, boom), 0, 0, boom},
		{"nowhere finite", failing(cluster, 2, nil), 0, Exploded, nil},
		{"a slope that leads nowhere", func(_ context.Context, grad, _ []float64) (float64, error) {
			_, err := cluster(t.Context(), grad, four) // whatever x is
			return 1, err
		}, 0, Flat, nil},
	} {
		t.Run(c.name, func(t *testing.T) {
			set := inside
			set.MaxGradients, set.Numbers = c.limit, argon(4)
			x := append([]float64(nil), four...)
			res, err := Minimise(t.Context(), c.surface, x, set)
			if !errors.Is(err, c.err) || c.err == nil && res.Status != c.status {
				t.Errorf("status %v, error %v after %d gradients; want %v, %v", res.Status, err, res.Gradients, c.status, c.err)
			}
			for _, v := range x {
				if math.IsNaN(v) {
					t.Error("a coordinate is not a number")
				}
			}
		})
	}
}

// failing answers from the n-th call on with err, or without one with infinity.
func failing(f Func, n int, err error) Func {
	calls := 0
	return func(ctx context.Context, grad, x []float64) (float64, error) {
		e, _ := f(ctx, grad, x)
		if calls++; calls >= n {
			return math.Inf(1), err
		}
		return e, nil
	}
}

// TestInternalTurnsWithTheMolecule: a turned start takes the same way.
func TestInternalTurnsWithTheMolecule(t *testing.T) {
	run := func(x []float64) Result {
		set := Settings{RMSGradient: 1e-4, Internal: true, Numbers: argon(7)}
		res, err := Minimise(t.Context(), Func(cluster), x, set)
		if err != nil {
			t.Fatal(err)
		}
		return res
	}
	turned := make([]float64, len(seven))
	for i := 0; i < len(seven); i += 3 {
		c, s := math.Cos(0.7), math.Sin(0.7)
		turned[i], turned[i+1], turned[i+2] = c*seven[i]-s*seven[i+1]+3, s*seven[i]+c*seven[i+1]-1, seven[i+2]+2
	}
	a, b := run(append([]float64(nil), seven...)), run(turned)
	if a.Gradients != b.Gradients || math.Abs(a.Energy-b.Energy) > 1e-9 {
		t.Errorf("%+v, turned %+v", a, b)
	}
}

// TestInternalWithoutCoordinates: two atoms on one spot have no internal
// coordinates; the descent goes on by L-BFGS.
func TestInternalWithoutCoordinates(t *testing.T) {
	x := []float64{0, 0, 0, 0, 0, 0, 5, 5, 5}
	set := Settings{RMSGradient: 1e-6, MaxGradients: 1000, Internal: true, Numbers: []int{6, 6, 6}}
	res, err := Minimise(t.Context(), Func(quadratic), x, set)
	if err != nil || res.Status != Converged {
		t.Errorf("%+v, %v", res, err)
	}
}
