// Package dedupe says whether two shapes of a molecule are the same: the
// smallest RMSD over rigid motions and over the renumberings of the atoms that
// the graph cannot tell apart, mirror images included where the molecule is its
// own mirror image.
//
// Coordinates are flat, 3N, in bohr; so is every RMSD.
package dedupe

import (
	"slices"

	"torsieve/molecule"
)

// Options say which atoms are compared. Heavy atoms always are.
type Options struct {
	PolarHydrogens bool // hydrogens on N, O and S too: their places make different minima
	AllHydrogens   bool
	Handed         bool // mirror images differ, even of a molecule that is its own mirror image
	Limit          int  // renumberings tried at most; beyond it an RMSD is an upper bound; 0: 10,000
}

// A Comparer compares shapes of one molecule. It does not change and may be
// shared between goroutines.
type Comparer struct {
	m        *molecule.Molecule
	atoms    []int   // the atoms compared
	same     [][]int // renumberings that keep the stated stereo: atoms[k] of one shape lies on atoms[p[k]] of the other
	inverse  [][]int // renumberings that turn all stated centres over; for mirror images
	blocks   []block // exchanges that go before each renumbering
	core     []int   // places in no block
	each     bool    // all combinations of the blocks' exchanges are tried
	shared   bool    // same and inverse are one list
	complete bool
	classes  [][]int // places by class, for profiles
}

// NewComparer prepares for the shapes of m.
func NewComparer(m *molecule.Molecule, o Options) *Comparer {
	c := &Comparer{m: m}
	for i := range m.Atoms() {
		if o.AllHydrogens || m.Atom(i).Number > 1 || o.PolarHydrogens && polar(m, i) {
			c.atoms = append(c.atoms, i)
		}
	}
	if len(c.atoms) == 0 { // hydrogen alone
		for i := range m.Atoms() {
			c.atoms = append(c.atoms, i)
		}
	}
	s := newSymmetry(m, c.atoms)
	if o.Limit == 0 {
		o.Limit = 10000
	}
	c.takeBlocks(s.blocks(), len(c.atoms))
	c.classes = s.byClass()
	maps, all := s.renumberings(c.blocks, o.Limit)
	c.complete = all
	c.same, c.inverse = s.byStereo(maps)
	if o.Handed {
		c.inverse = nil
	}
	c.shared = len(c.inverse) == len(c.same) && slices.EqualFunc(c.same, c.inverse, slices.Equal[[]int])
	return c
}

// mostCombinations of the exchanges within blocks are tried one by one; where
// there are more the blocks are improved in turn.
const mostCombinations = 256

func (c *Comparer) takeBlocks(blocks []block, places int) {
	c.blocks = blocks
	combinations := 1
	inside := make([]bool, places)
	for _, b := range blocks {
		combinations = min(combinations*len(b.options), mostCombinations+1)
		for _, k := range b.places {
			inside[k] = true
		}
	}
	c.each = combinations <= mostCombinations
	for k, in := range inside {
		if !in {
			c.core = append(c.core, k)
		}
	}
}

func polar(m *molecule.Molecule, hydrogen int) bool {
	for _, j := range m.Neighbours(hydrogen) {
		switch m.Atom(j).Number {
		case 7, 8, 16:
			return true
		}
	}
	return false
}

// Atoms returns the indices of the atoms that are compared.
func (c *Comparer) Atoms() []int { return c.atoms }

// Mirrors says whether mirror images count as one shape: the graph with its
// stated stereo is its own mirror image.
func (c *Comparer) Mirrors() bool { return len(c.inverse) > 0 }

// Exact says whether an RMSD is the smallest there is. For molecules with very
// many equivalent atoms it is an upper bound.
func (c *Comparer) Exact() bool { return c.complete && c.each }

// Clone returns c: a Comparer may be shared.
func (c *Comparer) Clone() *Comparer { return c }
