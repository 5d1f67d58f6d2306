package dedupe

import (
	"math"
	"slices"
)

// A profile holds the distances of the points from their centroid, class of
// equivalent places by class, each sorted. Moving, turning, mirroring and
// renumbering do not change it.
type profile []float64

// profileOf takes centred coordinates.
func (c *Comparer) profileOf(x []float64) profile {
	p := make(profile, 0, len(x)/3)
	for _, places := range c.classes {
		from := len(p)
		for _, k := range places {
			p = append(p, math.Sqrt(x[3*k]*x[3*k]+x[3*k+1]*x[3*k+1]+x[3*k+2]*x[3*k+2]))
		}
		slices.Sort(p[from:])
	}
	return p
}

// apart returns a proven lower bound of the RMSD of two shapes: no rotation
// changes the distances from the centroid, two points are no closer than these
// differ, and of all ways to pair two lists of numbers the sorted one has the
// smallest sum of squared differences.
// Source of the last: the rearrangement inequality, G. H. Hardy, J. E.
// Littlewood, G. Polya, Inequalities, 1934, theorem 368.
func (p profile) apart(q profile) float64 {
	var sum float64
	for k, v := range p {
		sum += (v - q[k]) * (v - q[k])
	}
	return math.Sqrt(sum / float64(max(1, len(p))))
}

// byClass lists the places of each class, in the order of their first ones.
func (s *symmetry) byClass() [][]int {
	var list [][]int
	at := make(map[int]int)
	for k, c := range s.class {
		n, ok := at[c]
		if !ok {
			n = len(list)
			at[c] = n
			list = append(list, nil)
		}
		list[n] = append(list[n], k)
	}
	return list
}
