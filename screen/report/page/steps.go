package page

import (
	"fmt"
	"strings"
	"time"

	"torsieve/screen"
)

// A step is what a tier did to the conformers of a ligand.
type step struct {
	Tier   string
	Looked int
	Left   []string // what was left behind there and why, with counts
	Took   time.Duration
}

// A cause is why a conformer went no further.
type cause int

const (
	sameShape cause = iota
	overCap
	outsideWindow
	lost
)

// words say a cause with its count.
var words = map[cause]string{
	sameShape:     "%d the same shape as a lower one",
	overCap:       "%d beyond the cap on conformers",
	outsideWindow: "%d above the energy window",
	lost:          "%d lost: no energy, or another molecule",
}

// causeOf reads the reason that the run gave. Conformers of a run that was
// stopped have none.
func causeOf(c *screen.Conformer) (cause, bool) {
	switch {
	case c.Why == "" || c.Rank > 0:
		return 0, false
	case strings.HasPrefix(c.Why, "same shape as "):
		return sameShape, true
	case strings.HasPrefix(c.Why, "beyond the cap "):
		return overCap, true
	case strings.Contains(c.Why, "above the lowest at this tier"):
		return outsideWindow, true
	}
	return lost, true
}

// stepsOf tells what each tier looked at and left behind. What is lost in a tier
// counts there, all else where it was left standing.
func stepsOf(r *screen.Result) []step {
	if len(r.Conformers) == 0 {
		return nil
	}
	counts := make([][lost + 1]int, len(r.Tiers)+1)
	for i := range r.Conformers {
		c := &r.Conformers[i]
		if why, known := causeOf(c); known {
			at := c.Last
			if why == lost {
				at++
			}
			counts[at][why]++
		}
	}
	var steps []step
	for t, name := range r.Tiers {
		s := step{Tier: name, Looked: r.Entered[t], Took: r.Took[t]}
		for why := range lost + 1 {
			if n := counts[t][why]; n > 0 {
				s.Left = append(s.Left, fmt.Sprintf(words[why], n))
			}
		}
		steps = append(steps, s)
	}
	return steps
}

// count is how many conformers went no further for a cause.
func count(r *screen.Result, why cause) int {
	n := 0
	for i := range r.Conformers {
		if c, known := causeOf(&r.Conformers[i]); known && c == why {
			n++
		}
	}
	return n
}
