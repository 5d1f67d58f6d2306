package dedupe

import (
	"cmp"
	"math"
	"slices"

	"torsieve/internal/units"
)

// Thresholds say when two shapes are one. Both must hold.
type Thresholds struct {
	RMSD   float64 // bohr
	Energy float64 // hartree; the difference of the two energies
}

// DefaultThresholds are 0.125 angstrom and 0.25 kcal/mol, for shapes relaxed to
// an RMS gradient of 1e-4 hartree/bohr or better.
//
// Measured on 21 drug-like ligands, ten relaxations each from 0.1 angstrom
// beside a minimum of the force field: what came back was off by 0.024 angstrom
// in the median and by 0.069 at most in 98 of 100, over heavy atoms and polar
// hydrogens, and by 0.004 and 0.016 kcal/mol. Two such results differ by up to
// 0.1 angstrom; distinct minima that are closer than the thresholds in both are
// not worth a calculation each.
func DefaultThresholds() Thresholds {
	return Thresholds{RMSD: 0.125 * units.Angstrom, Energy: 0.25 * units.KcalPerMol}
}

// A Group is one shape and all that are the same.
type Group struct {
	Keep     int    // the lowest member
	Members  []int  // all members, Keep first, then upwards in energy
	Mirrored []bool // by member: it is the mirror image of Keep
}

// Unique sorts shapes into groups, by the leader algorithm in the order of
// their energies: each joins the lowest leader that it is the same as, or leads
// a new group. Groups come in the order of their leaders' energies; ties go by
// index. Panics if xs and energies differ in length.
func Unique(c *Comparer, xs [][]float64, energies []float64, t Thresholds) []Group {
	if len(xs) != len(energies) {
		panic("dedupe: shapes and energies differ in number")
	}
	order := make([]int, len(xs))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(i, j int) int { return cmp.Compare(energies[i], energies[j]) })
	var leaders []leader
	fit := c.fitter()
	for _, i := range order {
		s := leader{energy: energies[i], x: c.take(xs[i])}
		s.print, s.profile = fingerprintOf(s.x.x), c.profileOf(s.x.x)
		k, mirrored := fit.join(leaders, s, t)
		if k < 0 {
			s.group = Group{Keep: i}
			leaders = append(leaders, s)
			k = len(leaders) - 1
		}
		g := &leaders[k].group
		g.Members, g.Mirrored = append(g.Members, i), append(g.Mirrored, mirrored)
	}
	groups := make([]Group, len(leaders))
	for k := range leaders {
		groups[k] = leaders[k].group
	}
	return groups
}

type leader struct {
	energy  float64
	x       cloud
	print   fingerprint
	profile profile
	group   Group
}

// join returns the leader that s is the same as, -1 if there is none. Leaders
// stand in the order of their energies, so those out of reach come first.
func (f *fitter) join(leaders []leader, s leader, t Thresholds) (k int, mirrored bool) {
	first, _ := slices.BinarySearchFunc(leaders, s.energy-t.Energy, func(l leader, e float64) int {
		return cmp.Compare(l.energy, e)
	})
	for k := first; k < len(leaders); k++ {
		if mirrored, same := f.alike(&leaders[k], &s, t.RMSD); same {
			return k, mirrored
		}
	}
	return -1, false
}

// A Collection sorts shapes into groups one by one, in the order in which they
// come: unlike Unique it lets the first of a group lead it. One goroutine at a
// time.
type Collection struct {
	fit     *fitter
	t       Thresholds
	leaders []leader
}

// NewCollection returns an empty collection of shapes of c's molecule.
func NewCollection(c *Comparer, t Thresholds) *Collection { return &Collection{fit: c.fitter(), t: t} }

// Add returns the number of the shape's group and whether that is a new one.
func (k *Collection) Add(x []float64, energy float64) (group int, fresh bool) {
	c := k.fit.c
	s := leader{energy: energy, x: c.take(x)}
	s.print, s.profile = fingerprintOf(s.x.x), c.profileOf(s.x.x)
	for n := range k.leaders {
		if math.Abs(k.leaders[n].energy-energy) <= k.t.Energy {
			if _, same := k.fit.alike(&k.leaders[n], &s, k.t.RMSD); same {
				return n, false
			}
		}
	}
	k.leaders = append(k.leaders, s)
	return len(k.leaders) - 1, true
}

// alike says whether two shapes are within so many bohr of each other, the
// cheap bounds first.
func (f *fitter) alike(a, b *leader, limit float64) (mirrored, same bool) {
	if a.print.apart(b.print) > limit || a.profile.apart(b.profile) > limit {
		return false, false
	}
	best := f.best(a.x, b.x)
	return best.mirrored, best.rmsd <= limit && !math.IsNaN(best.rmsd)
}
