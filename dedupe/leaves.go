package dedupe

import (
	"math"
	"slices"

	"torsieve/internal/geom"
)

// rounds of superposing and assigning; it seldom takes more than three.
const rounds = 5

// assign gives the equivalent end atoms to those that they lie next to, lays
// the shapes onto each other again, and so on until nothing gets better. The
// result is an upper bound of the smallest RMSD.
func (c *Comparer) assign(a, b cloud, p []int, rmsd float64, mirrored bool) ([]int, float64) {
	bestMap, bestRMSD := p, rmsd
	p = slices.Clone(p)
	for round := range rounds {
		moved := renumbered(b.x, p)
		if mirrored {
			mirror(moved)
		}
		if round == 0 { // the end atoms may be far from their places
			geom.Align(pickPoints(a.x, c.core), pickPoints(moved, c.core)).Apply(moved)
		} else {
			geom.Align(a.x, moved).Apply(moved)
		}
		changed := false
		for _, set := range c.leaves {
			changed = reassign(a.x, moved, p, set) || changed
		}
		if !changed && round > 0 {
			break
		}
		next, other := distances(a, b, p)
		if mirrored {
			next = other
		}
		if next < bestRMSD {
			bestMap, bestRMSD = slices.Clone(p), next
		}
	}
	return bestMap, bestRMSD
}

func pickPoints(x []float64, which []int) []float64 {
	out := make([]float64, 0, 3*len(which))
	for _, i := range which {
		out = append(out, x[3*i:3*i+3]...)
	}
	return out
}

// reassign permutes the images of one set of end atoms (two to four) so that
// the sum of squared distances is smallest.
func reassign(a, moved []float64, p, set []int) bool {
	n := len(set)
	order := [4]int{0, 1, 2, 3}
	best, bestSum := order, math.Inf(1)
	var visit func(k int, sum float64)
	visit = func(k int, sum float64) {
		if sum >= bestSum-1e-12 {
			return
		}
		if k == n {
			best, bestSum = order, sum
			return
		}
		for j := k; j < n; j++ {
			order[k], order[j] = order[j], order[k]
			visit(k+1, sum+squared(a, set[k], moved, set[order[k]]))
			order[k], order[j] = order[j], order[k]
		}
	}
	visit(0, 0)
	if best == [4]int{0, 1, 2, 3} {
		return false
	}
	var images [4]int
	for k := range n {
		images[k] = p[set[best[k]]]
	}
	for k := range n {
		p[set[k]] = images[k]
	}
	return true
}

func squared(a []float64, i int, b []float64, j int) float64 {
	dx, dy, dz := a[3*i]-b[3*j], a[3*i+1]-b[3*j+1], a[3*i+2]-b[3*j+2]
	return dx*dx + dy*dy + dz*dz
}
