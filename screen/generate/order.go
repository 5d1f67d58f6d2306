package generate

import (
	"context"
	"math"

	"torsieve/dedupe"
)

// orderLimit is the number of renumberings that are tried for each of the many
// distances that order needs: an upper bound does where there are more.
const orderLimit = 64

// order picks at most limit candidates from a list that is sorted by energy, so
// that each prefix is a good choice of its size: the lowest first, then always
// the one that brings all shapes of the list, each by its worth, closest to the
// nearest one picked, in the mean over their heavy atoms' RMSD.
//
// Source: the greedy algorithm for locating facilities, within 1 - 1/e of the
// best choice of each size: G. L. Nemhauser, L. A. Wolsey, M. L. Fisher, Math.
// Program. 1978, 14, 265.
func (s *search) order(ctx context.Context, list []candidate, limit int) ([]candidate, error) {
	xs := make([][]float64, len(list))
	worth := make([]float64, len(list))
	for k, e := range list {
		xs[k] = e.x
		worth[k] = math.Exp((list[0].energy - e.energy) / s.o.EnergyScale)
	}
	comparer := dedupe.NewComparer(s.m, dedupe.Options{Handed: s.o.MirrorImages, Limit: orderLimit})
	distances, err := comparer.Distances(ctx, xs)
	if err != nil || len(list) == 0 {
		return nil, err
	}
	picks := cover(distances, worth, min(limit, len(list)))
	out := make([]candidate, len(picks))
	for n, k := range picks {
		out[n] = list[k]
	}
	return out, nil
}

// cover picks points, the first one first and then always the one that lowers
// the sum of worth times distance to the nearest pick most; ties by number.
func cover(distance [][]float64, worth []float64, limit int) []int {
	n := len(worth)
	nearest := append([]float64(nil), distance[0]...)
	taken := make([]bool, n)
	taken[0] = true
	picks := []int{0}
	for len(picks) < limit {
		best, most := -1, -1.0
		for k := range n {
			if taken[k] {
				continue
			}
			var gain float64
			for i, d := range distance[k] {
				if d < nearest[i] {
					gain += worth[i] * (nearest[i] - d)
				}
			}
			if gain > most {
				best, most = k, gain
			}
		}
		taken[best] = true
		picks = append(picks, best)
		for i, d := range distance[best] {
			nearest[i] = math.Min(nearest[i], d)
		}
	}
	return picks
}
