package generate

import (
	"container/heap"
	"context"
	"math"

	"torsieve/dedupe"
)

// orderLimit is the number of renumberings that are tried for each of the many
// distances that order needs: an upper bound does where there are more.
const orderLimit = 64

// mostOrdered is how many candidates order looks at, the lowest: its time and its
// memory grow with their square.
const mostOrdered = 2400

// order picks at most limit candidates from a list that is sorted by energy, so
// that each prefix is a good choice of its size: the lowest first, then always
// the one that brings all shapes of the list, each by its worth, closest to the
// nearest one picked, in the mean over their heavy atoms' RMSD.
//
// Source: the greedy algorithm for locating facilities, within 1 - 1/e of the
// best choice of each size: G. L. Nemhauser, L. A. Wolsey, M. L. Fisher, Math.
// Program. 1978, 14, 265.
func (s *search) order(ctx context.Context, list []candidate, limit int) ([]candidate, error) {
	list = list[:min(len(list), mostOrdered)]
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
//
// What a point would bring never grows as others are picked, so an old value is
// a bound and only the points on top are looked at again: M. Minoux, in
// Optimization Techniques, Lecture Notes in Control and Information Sciences 7,
// 1978, 234.
func cover(distance [][]float64, worth []float64, limit int) []int {
	n := len(worth)
	nearest := append([]float64(nil), distance[0]...)
	gain := func(k int) float64 {
		var sum float64
		for i, d := range distance[k] {
			if d < nearest[i] {
				sum += worth[i] * (nearest[i] - d)
			}
		}
		return sum
	}
	rest := make(bounds, 0, n)
	for k := 1; k < n; k++ {
		rest = append(rest, bound{k, gain(k)})
	}
	heap.Init(&rest)
	picks := []int{0}
	for len(picks) < limit && len(rest) > 0 {
		for {
			top := &rest[0]
			old := top.gain
			if top.gain = gain(top.point); top.gain == old {
				break
			}
			heap.Fix(&rest, 0)
		}
		k := heap.Pop(&rest).(bound).point
		picks = append(picks, k)
		for i, d := range distance[k] {
			nearest[i] = math.Min(nearest[i], d)
		}
	}
	return picks
}

// A bound is a point and the most that it can bring.
type bound struct {
	point int
	gain  float64
}

// bounds is a heap with the largest on top.
type bounds []bound

func (b bounds) Len() int { return len(b) }
func (b bounds) Less(i, j int) bool {
	return b[i].gain > b[j].gain || b[i].gain == b[j].gain && b[i].point < b[j].point
}
func (b bounds) Swap(i, j int) { b[i], b[j] = b[j], b[i] }
func (b *bounds) Push(x any)   { *b = append(*b, x.(bound)) }
func (b *bounds) Pop() any {
	last := (*b)[len(*b)-1]
	*b = (*b)[:len(*b)-1]
	return last
}
