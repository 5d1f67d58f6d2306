package generate

import (
	"math"
	"math/rand/v2"
	"slices"

	"torsieve/dedupe"
)

// A tally counts how often each shape has been met, to say how much a search
// has not seen yet.
type tally struct {
	shapes *dedupe.Collection
	scale  float64 // energy over which a shape's weight falls to 1/e, hartree
	hits   []int   // by group
	energy []float64
	fresh  []int // by relaxation: the group that it opened, or -1
	taken  int   // structures of the pool that have been counted
	first  int   // of them made before the first draw
	dice   *rand.Rand
}

func (s *search) newTally() *tally {
	alike := rough
	if !s.o.Minima {
		alike = byShape
	}
	t := &tally{shapes: dedupe.NewCollection(s.comparer, alike), scale: s.o.EnergyScale,
		dice: stream(s.o.Seed, s.id, streamTally, 0)}
	t.take(s.pool)
	t.first = t.taken
	return t
}

// take counts what has come to the pool.
func (t *tally) take(pool []entry) {
	for _, e := range pool[t.taken:] {
		k, fresh := t.shapes.Add(e.x, e.energy)
		opened := -1
		if fresh {
			opened = k
			t.hits, t.energy = append(t.hits, 0), append(t.energy, e.energy)
		}
		t.hits[k]++
		t.fresh = append(t.fresh, opened)
	}
	t.taken = len(pool)
}

// unseen estimates the chance that the next relaxation ends in a new shape: the
// share of relaxations whose shape was met only once.
// Source: I. J. Good, Biometrika 1953, 40, 237.
func (t *tally) unseen() float64 {
	if len(t.fresh) == 0 {
		return 1
	}
	once := 0
	for _, h := range t.hits {
		if h == 1 {
			once++
		}
	}
	return float64(once) / float64(len(t.fresh))
}

// When a search may end before its budget: after so many drawn relaxations, if the
// next batch is expected to add no more than this share to the summed weights
// and this share of new shapes.
const (
	fewestCounted   = 2 * batch
	weightTolerance = 0.01
	shapeTolerance  = 0.02
)

// exhausted says whether another batch is worth while.
func (t *tally) exhausted() bool {
	return len(t.fresh)-t.first >= fewestCounted && t.unseen() <= shapeTolerance && t.expected() <= weightTolerance
}

// expected is the upper end, at 95 %, of the share of weight that the next batch
// will add, from what each of the last relaxations added; drawn from them with
// replacement (B. Efron, Ann. Stat. 1979, 7, 1).
func (t *tally) expected() float64 {
	lowest := slices.Min(t.energy)
	weight := func(k int) float64 { return math.Exp((lowest - t.energy[k]) / t.scale) }
	var total float64
	for k := range t.energy {
		total += weight(k)
	}
	last := make([]float64, fewestCounted)
	for n, k := range t.fresh[len(t.fresh)-fewestCounted:] {
		if k >= 0 {
			last[n] = weight(k) / total
		}
	}
	const draws = 200
	sums := make([]float64, draws)
	for d := range sums {
		for range batch {
			sums[d] += last[t.dice.IntN(len(last))]
		}
	}
	slices.Sort(sums)
	return sums[draws*95/100]
}
