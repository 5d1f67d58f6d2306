package dedupe

import (
	"math"
	"slices"
)

// A fitter lays shapes onto each other. It holds scratch memory: one goroutine
// at a time.
type fitter struct {
	c      *Comparer
	core   moments
	parts  [][]moments // by block and option
	choice []int       // options of the blocks: of the combination at hand, and the best so far
	best1  []int
}

func (c *Comparer) fitter() *fitter {
	f := &fitter{c: c, choice: make([]int, len(c.blocks)), best1: make([]int, len(c.blocks))}
	for _, b := range c.blocks {
		f.parts = append(f.parts, make([]moments, len(b.options)))
	}
	return f
}

// A fit is the best way to lay one shape onto another. Its options are the
// fitter's until the next one.
type fit struct {
	rmsd     float64
	mirrored bool
	map1     []int // the renumbering that moves whole parts
	options  []int // by block
}

// exactly is the RMSD in bohr below which the quick formula has lost digits.
const exactly = 0.05

// best tries all renumberings, and the mirror image where it counts as the same.
func (f *fitter) best(a, b cloud) fit {
	best := f.among(a, b, f.c.same, false)
	if len(f.c.inverse) > 0 {
		options := slices.Clone(best.options)
		if other := f.among(a, b, f.c.inverse, true); other.rmsd < best.rmsd {
			best = other
		} else {
			best.options = options
		}
	}
	if best.rmsd < exactly {
		best.rmsd = f.c.exact(a, b, best.mirrored, f.lays(best))
	}
	return best
}

// among tries the given renumberings with all that the blocks allow.
func (f *fitter) among(a, b cloud, maps [][]int, mirrored bool) fit {
	start := (a.g + b.g) / 2
	best := fit{rmsd: math.Inf(1), mirrored: mirrored, options: f.best1}
	most := math.Inf(-1)
	for _, p := range maps {
		f.sums(a.x, b.x, p)
		var value float64
		if f.c.each {
			value = f.combine(0, f.core, mirrored, start, most)
		} else {
			value = f.improve(mirrored, start, most)
		}
		if value > most {
			most = value
			best.map1 = p
		}
	}
	if best.map1 != nil {
		n := float64(max(1, len(f.c.atoms)))
		best.rmsd = math.Sqrt(math.Max(0, 2*(start-most)) / n)
	}
	return best
}

// sums fills core and parts for one renumbering.
func (f *fitter) sums(a, b []float64, p []int) {
	f.core = moments{}
	for _, k := range f.c.core {
		f.core.add(a, b, k, p[k])
	}
	for n := range f.c.blocks {
		set := &f.c.blocks[n]
		for o, images := range set.options {
			m := &f.parts[n][o]
			*m = moments{}
			for at, k := range set.places {
				m.add(a, b, k, p[images[at]])
			}
		}
	}
}

// combine tries all options of block n and those behind it on top of sum, and
// returns the largest overlap, most if none is above it.
func (f *fitter) combine(n int, sum moments, mirrored bool, start, most float64) float64 {
	if n == len(f.parts) {
		if value := sum.overlap(mirrored, start, most); value > most {
			copy(f.best1, f.choice)
			return value
		}
		return most
	}
	for o := range f.parts[n] {
		f.choice[n] = o
		most = f.combine(n+1, sum.plus(&f.parts[n][o]), mirrored, start, most)
	}
	return most
}

// rounds of going through the blocks; it seldom takes more than three.
const rounds = 6

// improve chooses each block's option by what fits best with the core alone, and
// then with all others as they are, until nothing changes. What it returns is
// at most the largest overlap, so that the RMSD is an upper bound.
func (f *fitter) improve(mirrored bool, start, most float64) float64 {
	sum := f.core
	for n := range f.parts {
		f.choice[n], _ = f.bestOption(n, &f.core, mirrored, start)
	}
	for n, o := range f.choice {
		sum = sum.plus(&f.parts[n][o])
	}
	value := sum.overlap(mirrored, start, math.Inf(-1))
	for range rounds {
		changed := false
		for n := range f.parts {
			rest := sum
			for k, v := range f.parts[n][f.choice[n]] {
				rest[k] -= v
			}
			o, better := f.bestOption(n, &rest, mirrored, start)
			if o != f.choice[n] && better > value {
				f.choice[n], value, changed = o, better, true
				sum = rest.plus(&f.parts[n][o])
			}
		}
		if !changed {
			break
		}
	}
	if value > most {
		copy(f.best1, f.choice)
		return value
	}
	return most
}

// bestOption returns the option of block n with the largest overlap on top of rest.
func (f *fitter) bestOption(n int, rest *moments, mirrored bool, start float64) (option int, most float64) {
	most = math.Inf(-1)
	for o := range f.parts[n] {
		sum := rest.plus(&f.parts[n][o])
		if value := sum.overlap(mirrored, start, most); value > most {
			option, most = o, value
		}
	}
	return option, most
}

// lays writes a fit as one renumbering: place k of one shape lies on place
// lays[k] of the other.
func (f *fitter) lays(best fit) []int {
	p := slices.Clone(best.map1)
	for n, b := range f.c.blocks {
		for at, k := range b.places {
			p[k] = best.map1[b.options[best.options[n]][at]]
		}
	}
	return p
}
