package embed

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"torsieve/internal/gradcheck"
)

func random(seed uint64) *rand.Rand { return rand.New(rand.NewPCG(seed, 1)) }

// points in general position, 3n.
func points(n int, seed uint64) []float64 {
	r := random(seed)
	x := make([]float64, 3*n)
	for i := range x {
		x[i] = 5 * r.Float64()
	}
	return x
}

func length(x []float64, i, j int) float64 {
	return math.Sqrt(sq(x[3*i]-x[3*j]) + sq(x[3*i+1]-x[3*j+1]) + sq(x[3*i+2]-x[3*j+2]))
}

// Triangles worked out by hand.
func TestSmoothTriangles(t *testing.T) {
	b := NewBounds(3)
	b.Set(0, 1, 1, 2)
	b.Set(1, 2, 5, 6)
	if err := b.Smooth(); err != nil {
		t.Fatal(err)
	}
	if l, u := b.At(0, 2); l != 3 || u != 8 {
		t.Errorf("third side %g to %g, want 3 to 8", l, u)
	}
	b = NewBounds(3)
	b.Set(0, 1, 1, 1)
	b.Set(1, 2, 1, 1)
	b.Set(0, 2, 3, 4)
	var c *Contradiction
	if err := b.Smooth(); !errors.As(err, &c) || c.I != 0 || c.J != 2 {
		t.Errorf("sides 1, 1 and 3: %v, want a contradiction of atoms 1 and 3", err)
	}
}

// Bounds that exact distances satisfy are still satisfied after smoothing, and
// no triangle can tighten them further.
func TestSmoothKeepsDistances(t *testing.T) {
	const n = 12
	x := points(n, 3)
	r := random(4)
	b := NewBounds(n)
	for i := range n {
		for j := range i {
			d := length(x, i, j)
			switch r.IntN(3) {
			case 0:
				b.Set(i, j, d*(1-0.2*r.Float64()), d*(1+0.2*r.Float64()))
			case 1:
				b.Set(i, j, d*r.Float64(), Far)
			}
		}
	}
	if err := b.Smooth(); err != nil {
		t.Fatal(err)
	}
	again := b.Clone()
	if err := again.Smooth(); err != nil {
		t.Fatal(err)
	}
	for i := range n {
		for j := range i {
			l, u := b.At(i, j)
			if d := length(x, i, j); d < l-1e-12 || d > u+1e-12 {
				t.Errorf("pair %d %d: %g is not within %g to %g", i, j, d, l, u)
			}
			if _, u2 := again.At(i, j); u2 < u-1e-12 {
				t.Errorf("pair %d %d: the upper bound %g became %g when done again", i, j, u, u2)
			}
		}
	}
}

// Exact distances give back the points (Crippen, Havel 1988, theorem 6.3): all
// distances are reproduced.
func TestMetricOfExactDistances(t *testing.T) {
	const n = 9
	x := points(n, 5)
	d := make([]float64, n*n)
	for i := range n {
		for j := range n {
			d[i*n+j] = sq(length(x, i, j))
		}
	}
	y, err := metric(d, n, random(1))
	if err != nil {
		t.Fatal(err)
	}
	for i := range n {
		for j := range i {
			var sum float64
			for k := range 3 { // the fourth is noise
				sum += sq(y[dimensions*i+k] - y[dimensions*j+k])
			}
			if got := math.Sqrt(sum); math.Abs(got-length(x, i, j)) > 1e-9 {
				t.Errorf("distance %d %d: %g, want %g", i, j, got, length(x, i, j))
			}
		}
	}
}

func TestErrorFunctionGradient(t *testing.T) {
	const n = 6
	b := NewBounds(n)
	r := random(9)
	for i := range n {
		for j := range i {
			d := 1 + 3*r.Float64()
			b.Set(i, j, d, d+0.5)
		}
	}
	f := newErrorFunction(&Problem{
		Bounds: b,
		Chiral: []Volume{{[4]int{0, 1, 2, 3}, 20, 30}, {[4]int{1, 4, 2, 5}, -9, -5}},
		Planar: []Volume{{[4]int{2, 3, 4, 5}, 0, 0}},
		Twist:  []Volume{{[4]int{0, 2, 4, 5}, 3, 4}},
	})
	f.weights = weights{chiral: 0.7, planar: 0.4, fourth: 1.3}
	x := make([]float64, 3*n+(n+2)/3*3)
	for i := range 4 * n {
		x[i] = 4 * r.Float64()
	}
	gradcheck.Run(t, x, 1e-4, 1e-8, func(x, grad []float64) float64 { return f.value(grad, x) })
}

// A carbon with four neighbours, 1.1 angstrom each: handedness comes out as
// asked, and the volume is that of a regular tetrahedron, 3.079201 times the
// cube of the arm.
func TestHandedness(t *testing.T) {
	const arm = 2.08 // bohr
	edge := arm * math.Sqrt(8.0/3)
	b := NewBounds(5)
	for i := 1; i < 5; i++ {
		b.Set(0, i, arm, arm)
		for j := 1; j < i; j++ {
			b.Set(i, j, edge-0.01, edge+0.01)
		}
	}
	if err := b.Smooth(); err != nil {
		t.Fatal(err)
	}
	want := 3.079201 * arm * arm * arm
	for seed := range uint64(20) {
		for _, sign := range []float64{1, -1} {
			v := Volume{P: [4]int{1, 2, 3, 4}, Low: 0.6 * want, High: 1.1 * want}
			if sign < 0 {
				v.Low, v.High = -v.High, -v.Low
			}
			p := &Problem{Bounds: b, Chiral: []Volume{v}}
			x, err := p.Once(context.Background(), random(seed))
			if err != nil {
				t.Errorf("seed %d, sign %g: %v", seed, sign, err)
				continue
			}
			if got := v.at(x); math.Abs(got-sign*want) > 0.02*want {
				t.Errorf("seed %d: volume %g, want %g", seed, got, sign*want)
			}
		}
	}
}

// Bounds that leave nothing open give back the distances.
func TestOnceMeetsTightBounds(t *testing.T) {
	const n = 10
	x := points(n, 21)
	b := NewBounds(n)
	for i := range n {
		for j := range i {
			d := length(x, i, j)
			b.Set(i, j, d-1e-3, d+1e-3)
		}
	}
	y, err := (&Problem{Bounds: b}).Once(context.Background(), random(2))
	if err != nil {
		t.Fatal(err)
	}
	for i := range n {
		for j := range i {
			if d := length(x, i, j); math.Abs(length(y, i, j)-d) > 0.05 {
				t.Errorf("distance %d %d: %g, want %g", i, j, length(y, i, j), d)
			}
		}
	}
}

// Two wishes that exclude each other come back as the failure that they are.
func TestImpossibleHandedness(t *testing.T) {
	b := NewBounds(4)
	for i := range 4 {
		for j := range i {
			b.Set(i, j, 2.9, 3)
		}
	}
	p := &Problem{Bounds: b, Chiral: []Volume{
		{P: [4]int{0, 1, 2, 3}, Low: 10, High: 30}, {P: [4]int{1, 0, 2, 3}, Low: 10, High: 30},
	}}
	_, err := p.Once(context.Background(), random(1))
	var f *Failure
	if !errors.As(err, &f) || f.Chiral < 0 {
		t.Errorf("two opposite volumes: %v, want a failure of handedness", err)
	}
}

func TestOnceStopsWithContext(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	b := NewBounds(30)
	if err := b.Smooth(); err != nil {
		t.Fatal(err)
	}
	if _, err := (&Problem{Bounds: b}).Once(ctx, random(1)); !errors.Is(err, context.Canceled) {
		t.Errorf("error %v, want %v", err, context.Canceled)
	}
}
