package embed

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"

	"torsieve/internal/relax"
)

// A Problem says what coordinates must fulfil. Its Bounds are smoothed already.
type Problem struct {
	Bounds *Bounds
	Chiral []Volume // handedness, held from the start
	Planar []Volume // four points in one plane, asked for at the end
	Twist  []Volume // wished for, as the shape of a ring; not checked
}

// accuracy that is asked of an embedding; the force field does the rest.
const (
	largestViolation = 0.57 // bohr, of one distance bound
	largestPlanar    = 4.0  // bohr^3, volume over what Planar allows
)

// A Failure says which part of a problem an attempt could not fulfil.
type Failure struct {
	Distance *[2]int // the pair that is off most, if it is distances
	By       float64 // bohr
	Chiral   int     // index into Problem.Chiral, -1 if it is not handedness
	Planar   int     // index into Problem.Planar, -1 if it is not planarity
	Err      error   // another cause
}

func (f *Failure) Error() string {
	switch {
	case f.Err != nil:
		return f.Err.Error()
	case f.Chiral >= 0:
		return fmt.Sprintf("handedness %d came out wrong", f.Chiral)
	case f.Planar >= 0:
		return fmt.Sprintf("plane %d came out bent", f.Planar)
	}
	return fmt.Sprintf("atoms %d and %d are off by %.2f bohr", f.Distance[0]+1, f.Distance[1]+1, f.By)
}

func (f *Failure) Unwrap() error { return f.Err }

// Once makes one attempt from random distances and returns 3n coordinates in
// bohr, or a *Failure, or ctx.Err().
func (p *Problem) Once(ctx context.Context, r *rand.Rand) ([]float64, error) {
	n := p.Bounds.n
	if n == 1 {
		return make([]float64, 3), nil
	}
	d := make([]float64, n*n)
	p.Bounds.sample(r, d)
	start, err := metric(d, n, r)
	if err != nil {
		return nil, &Failure{Chiral: -1, Planar: -1, Err: err}
	}
	x := make([]float64, 3*n+(n+2)/3*3)
	for i := range n {
		copy(x[3*i:3*i+3], start[dimensions*i:])
		x[3*n+i] = start[dimensions*i+3]
	}
	f := newErrorFunction(p)
	m := relax.NewMinimiser(len(x))
	for _, s := range []stage{
		{weights{chiral: 1, fourth: 0.1}, 400},
		{weights{chiral: 0.2, fourth: 1, planar: 0.2}, 300},
		{weights{chiral: 0.2, fourth: 10, planar: 1}, 200},
	} {
		f.weights = s.weights
		if err := s.run(ctx, f, m, x); err != nil {
			return nil, err
		}
		if bad := p.wrongHand(x); bad >= 0 {
			return nil, &Failure{Chiral: bad, Planar: -1}
		}
	}
	x = x[: 3*n : 3*n]
	return x, p.check(x)
}

type stage struct {
	weights weights
	steps   int
}

func (s stage) run(ctx context.Context, f *errorFunction, m *relax.Minimiser, x []float64) error {
	surface := relax.Func(func(ctx context.Context, grad, x []float64) (float64, error) {
		clear(grad)
		return f.value(grad, x), ctx.Err()
	})
	_, err := m.Minimise(ctx, surface, x, relax.Settings{
		MaxGradients: s.steps, RMSGradient: 1e-4, EnergyChange: 1e-5, MaxStep: 3,
	})
	if err != nil && ctx.Err() == nil {
		return &Failure{Chiral: -1, Planar: -1, Err: err}
	}
	return err
}

// wrongHand returns the first volume whose sign is not the one asked for, or -1.
func (p *Problem) wrongHand(x []float64) int {
	for k, v := range p.Chiral {
		if volume := v.at(x); v.Low > 0 && volume < 0.3*v.Low || v.High < 0 && volume > 0.3*v.High {
			return k
		}
	}
	return -1
}

// check judges coordinates in three dimensions.
func (p *Problem) check(x []float64) error {
	worst, pair := 0.0, [2]int{}
	n := p.Bounds.n
	for i := range n {
		for j := range i {
			l, u := p.Bounds.At(i, j)
			d := math.Sqrt(sq(x[3*i]-x[3*j]) + sq(x[3*i+1]-x[3*j+1]) + sq(x[3*i+2]-x[3*j+2]))
			if off := math.Max(l-d, d-u); off > worst {
				worst, pair = off, [2]int{j, i}
			}
		}
	}
	if worst > largestViolation {
		return &Failure{Distance: &pair, By: worst, Chiral: -1, Planar: -1}
	}
	for k, v := range p.Planar {
		volume := v.at(x)
		if math.Max(v.Low-volume, volume-v.High) > largestPlanar {
			return &Failure{Chiral: -1, Planar: k}
		}
	}
	return nil
}

func sq(x float64) float64 { return x * x }
