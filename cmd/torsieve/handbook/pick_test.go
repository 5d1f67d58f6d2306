package handbook

import (
	"context"
	"math"

	"torsieve/internal/units"
	"torsieve/screen/ensemble"
)

// A pick is a place on the energy surface: the points that may stand for it, and
// how their energies (kcal/mol) become one.
type pick struct {
	points func(ctx context.Context, sub *subject) ([]*point, error)
	reduce func(sub *subject, points []*point, energies []float64) float64
	shapes []shape // that points asks for
}

func least(_ *subject, _ []*point, energies []float64) float64 {
	low := math.Inf(1)
	for _, e := range energies {
		low = math.Min(low, e)
	}
	return low
}

func most(_ *subject, _ []*point, energies []float64) float64 {
	high := math.Inf(-1)
	for _, e := range energies {
		high = math.Max(high, e)
	}
	return high
}

// near keeps the points that a state is made of: within 4 kcal/mol of the
// lowest. What lies higher is under a thousandth of it at room temperature, and
// beyond what the tiers disagree by.
func near(points []*point) []*point {
	low := math.Inf(1)
	for _, p := range points {
		low = math.Min(low, p.energy)
	}
	var kept []*point
	for _, p := range points {
		if p.energy < low+4 {
			kept = append(kept, p)
		}
	}
	return kept
}

// minimum is the lowest minimum of a shape.
func minimum(turns ...turn) pick {
	s := shape(turns)
	return pick{func(ctx context.Context, sub *subject) ([]*point, error) {
		points, err := sub.minimaOf(ctx, s)
		return near(points), err
	}, least, []shape{s}}
}

// state is the free energy of all minima of a shape at 298.15 K, from their
// electronic energies and the number of copies of each.
func state(turns ...turn) pick {
	p := minimum(turns...)
	p.reduce = func(sub *subject, points []*point, energies []float64) float64 {
		xs := make([][]float64, len(points))
		for n, p := range points {
			xs[n] = p.x
		}
		copies, _ := ensemble.Copies(sub.m, xs)
		states := make([]ensemble.State, len(points))
		for n, e := range energies {
			states[n] = ensemble.State{Energy: e * units.KcalPerMol, Copies: float64(copies[n])}
		}
		return ensemble.Weigh(states, 298.15).FreeEnergy / units.KcalPerMol
	}
	return p
}

// highest is the highest of all minima.
func highest() pick {
	return pick{func(_ context.Context, sub *subject) ([]*point, error) { return sub.minima, nil }, most, nil}
}

// held is the lowest point where the dihedrals are as told.
func held(turns ...turn) pick { return saddle(shape(turns), keep(turns)...) }

// saddle is the lowest point under holds, on the side where s is.
func saddle(s shape, holds ...hold) pick {
	return pick{func(ctx context.Context, sub *subject) ([]*point, error) {
		p, err := sub.held(ctx, s, holds)
		return []*point{p}, err
	}, least, []shape{s}}
}

// lower is the lower of two saddles.
func lower(a, b pick) pick { return either(a, b, least) }

// upper is the higher of two saddles.
func upper(a, b pick) pick { return either(a, b, most) }

func either(a, b pick, reduce func(*subject, []*point, []float64) float64) pick {
	return pick{func(ctx context.Context, sub *subject) ([]*point, error) {
		p, err := a.points(ctx, sub)
		if err != nil {
			return nil, err
		}
		q, err := b.points(ctx, sub)
		return append(p, q...), err
	}, reduce, append(a.shapes, b.shapes...)}
}

// barrierTop is the highest of the lowest points at some values of a dihedral: a
// barrier whose place symmetry does not fix.
func barrierTop(d dihedral, degrees ...float64) pick {
	var shapes []shape
	for _, v := range degrees {
		shapes = append(shapes, shape{turn{d, v, usual}})
	}
	return pick{func(ctx context.Context, sub *subject) ([]*point, error) {
		var points []*point
		for _, s := range shapes {
			p, err := sub.held(ctx, s, keep(s))
			if err != nil {
				return nil, err
			}
			points = append(points, p)
		}
		return points, nil
	}, most, shapes}
}
