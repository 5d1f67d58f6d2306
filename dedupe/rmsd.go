package dedupe

import (
	"math"
	"slices"

	"torsieve/internal/geom"
)

// RMSD returns the smallest root-mean-square distance of the compared atoms of
// two shapes, and whether b had to be mirrored for it. Panics if a or b is not
// a shape of the Comparer's molecule.
func (c *Comparer) RMSD(a, b []float64) (rmsd float64, mirrored bool) {
	best := c.best(c.take(a), c.take(b))
	return best.rmsd, best.mirrored
}

// take picks the compared atoms out of a shape.
func (c *Comparer) take(x []float64) []float64 {
	if len(x) != 3*c.m.NumAtoms() {
		panic("dedupe: shape of another molecule")
	}
	out := make([]float64, 0, 3*len(c.atoms))
	for _, i := range c.atoms {
		out = append(out, x[3*i], x[3*i+1], x[3*i+2])
	}
	return out
}

// A fit is the best way to lay one shape onto another.
type fit struct {
	rmsd     float64
	mirrored bool
	atoms    []int
}

// best tries all renumberings of compared atoms a and b.
func (c *Comparer) best(a, b []float64) fit {
	best := fit{rmsd: math.Inf(1)}
	moved := make([]float64, len(b))
	shared := len(c.inverse) > 0 && len(c.same) == len(c.inverse) && &c.same[0][0] == &c.inverse[0][0]
	for _, p := range c.same {
		renumber(moved, b, p)
		same, mirrored := geom.RMSD(a, moved)
		c.offer(&best, a, b, moved, p, same, false)
		if shared {
			c.offer(&best, a, b, moved, p, mirrored, true)
		}
	}
	if !shared {
		for _, p := range c.inverse {
			renumber(moved, b, p)
			_, mirrored := geom.RMSD(a, moved)
			c.offer(&best, a, b, moved, p, mirrored, true)
		}
	}
	return best
}

// renumber writes the atoms of b in the order in which they lie on a.
func renumber(dst, b []float64, p []int) {
	for k, q := range p {
		copy(dst[3*k:3*k+3], b[3*q:])
	}
}

func (c *Comparer) offer(best *fit, a, b, moved []float64, p []int, rmsd float64, mirrored bool) {
	if len(c.leaves) > 0 {
		p, rmsd = c.assign(a, b, moved, p, rmsd, mirrored)
	}
	if rmsd < best.rmsd {
		*best = fit{rmsd, mirrored, p}
	}
}

// rounds of superposing and assigning; it seldom takes more than three.
const rounds = 5

// assign gives the equivalent end atoms to those that they lie next to, lays
// the shapes onto each other again, and so on until nothing changes. The
// result is an upper bound of the smallest RMSD.
func (c *Comparer) assign(a, b, moved []float64, p []int, rmsd float64, mirrored bool) ([]int, float64) {
	bestMap, bestRMSD := p, rmsd
	p = slices.Clone(p)
	source := b
	if mirrored {
		source = slices.Clone(b)
		for i := 2; i < len(source); i += 3 {
			source[i] = -source[i]
		}
	}
	for range rounds {
		renumber(moved, source, p)
		geom.Align(a, moved).Apply(moved)
		changed := false
		for _, set := range c.leaves {
			changed = reassign(a, moved, p, set) || changed
		}
		if !changed {
			break
		}
		renumber(moved, source, p)
		same, _ := geom.RMSD(a, moved)
		if same >= bestRMSD {
			break
		}
		bestMap, bestRMSD = slices.Clone(p), same
	}
	return bestMap, bestRMSD
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

// Superpose lays the shape x onto the shape onto, in place, all atoms of it:
// turned and moved, never mirrored and never renumbered. The fit is the best
// over all renumberings of the compared atoms.
func (c *Comparer) Superpose(onto, x []float64) {
	a, b := c.take(onto), c.take(x)
	best := fit{rmsd: math.Inf(1)}
	moved := make([]float64, len(b))
	for _, p := range c.same {
		renumber(moved, b, p)
		same, _ := geom.RMSD(a, moved)
		c.offer(&best, a, b, moved, p, same, false)
	}
	renumber(moved, b, best.atoms)
	geom.Align(a, moved).Apply(x)
}

// SelfMirror returns the RMSD of a shape to its own mirror image, and false
// where the molecule is not its own mirror image. Where it is and the RMSD is
// not small, the shape stands for two of the same energy.
func (c *Comparer) SelfMirror(x []float64) (rmsd float64, ok bool) {
	if !c.Mirrors() {
		return 0, false
	}
	a := c.take(x)
	best := fit{rmsd: math.Inf(1)}
	moved := make([]float64, len(a))
	for _, p := range c.inverse {
		renumber(moved, a, p)
		_, mirrored := geom.RMSD(a, moved)
		c.offer(&best, a, a, moved, p, mirrored, true)
	}
	return best.rmsd, true
}
