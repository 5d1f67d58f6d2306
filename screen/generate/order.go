package generate

import (
	"math"
	"slices"

	"torsieve/dedupe"
	"torsieve/internal/units"
)

// orderScale is the energy over which a conformer's claim to a place falls to
// 1/e of that of an equally distant low one.
const orderScale = 10 * units.KcalPerMol

// order puts candidates, sorted by energy, so that each prefix is a good choice
// of its size: the lowest first, then always the one with the largest product
// of its distance from all before it and a factor that falls with energy.
func (s *search) order(list []candidate) []candidate {
	if len(list) == 0 {
		return nil
	}
	c := dedupe.NewComparer(s.m, dedupe.Options{})
	queue := make([]claimant, len(list))
	for k, e := range list {
		queue[k] = claimant{k: k, share: math.Exp((list[0].energy - e.energy) / orderScale), distance: math.Inf(1)}
	}
	out := make([]candidate, 0, len(list))
	next := 0
	for {
		out = append(out, list[queue[next].k])
		queue = slices.Delete(queue, next, next+1)
		if len(queue) == 0 {
			return out
		}
		next = largestClaim(c, queue, out, list)
	}
}

// A claimant is a candidate that waits for its place. Its distance is the
// smallest to the first seen of those that have theirs: never less than to all.
type claimant struct {
	k        int
	share    float64
	distance float64 // bohr
	seen     int
}

func (q claimant) claim() float64 { return q.share * q.distance }

// largestClaim returns the position of the claimant with the largest claim. It
// brings distances up to date only as far as the answer needs them.
func largestClaim(c *dedupe.Comparer, queue []claimant, out, list []candidate) int {
	for {
		best := 0
		for k := range queue {
			if queue[k].claim() > queue[best].claim() {
				best = k
			}
		}
		q := &queue[best]
		if q.seen == len(out) {
			return best
		}
		d, _ := c.RMSD(out[q.seen].x, list[q.k].x)
		q.distance = math.Min(q.distance, d)
		q.seen++
	}
}
