// Package pattern finds small substructures that are written in a subset of
// the SMARTS language: enough to name the surroundings of a rotatable bond.
//
// The subset: * C N O S P B F Cl Br I (aliphatic), c n o s p (aromatic), #n
// (atomic number), Xn (neighbours), Hn (hydrogen neighbours; H alone is H1
// behind a symbol), + and - (charge +1 and -1), $(...) (a pattern that starts
// at the atom), !, implicit and, comma for or, semicolon for and of the lowest
// rank; bonds - = # : ~, none for single or aromatic; branches in parentheses.
// Ring closures, ring primitives, chirality and isotopes are not part of it.
//
// Hydrogens are atoms of the graph like all others.
package pattern

import "torsieve/molecule"

// A Pattern is a tree of atom tests, in the order in which they were written.
type Pattern struct {
	nodes []node
	chain []int // the nodes outside parentheses, in order
}

type node struct {
	test   atomTest
	parent int // -1 for the first
	bond   bondTest
}

type (
	atomTest func(m *molecule.Molecule, i int) bool
	bondTest func(b molecule.Bond) bool
)

// ChainLength returns the number of atoms written outside parentheses.
func (p *Pattern) ChainLength() int { return len(p.chain) }

// Torsions returns all pairs (a, d) for which the first four atoms of the
// pattern's chain can be a, b, c and d of m. Each pair comes once, in the order
// of the neighbours of b and c. Panics if the chain is shorter than four.
func (p *Pattern) Torsions(m *molecule.Molecule, b, c int) [][2]int {
	if len(p.chain) < 4 {
		panic("pattern: a torsion needs a chain of four atoms")
	}
	var pairs [][2]int
	for _, a := range m.Neighbours(b) {
		for _, d := range m.Neighbours(c) {
			if a == c || d == b || a == d {
				continue
			}
			s := newSearch(p, m)
			for k, atom := range [4]int{a, b, c, d} {
				s.fixed[p.chain[k]] = atom
			}
			if s.extend(0) {
				pairs = append(pairs, [2]int{a, d})
			}
		}
	}
	return pairs
}

// StartsAt says whether the pattern's first atom can be atom i of m.
func (p *Pattern) StartsAt(m *molecule.Molecule, i int) bool {
	s := newSearch(p, m)
	s.fixed[0] = i
	return s.extend(0)
}

// A search maps the nodes one by one onto atoms, each atom once.
type search struct {
	p     *Pattern
	m     *molecule.Molecule
	fixed []int // by node: the atom it must be, or -1
	image []int // by node: the atom it is
}

func newSearch(p *Pattern, m *molecule.Molecule) *search {
	s := &search{p: p, m: m, fixed: make([]int, len(p.nodes)), image: make([]int, len(p.nodes))}
	for k := range s.fixed {
		s.fixed[k] = -1
	}
	return s
}

// extend places node k and all behind it.
func (s *search) extend(k int) bool {
	if k == len(s.p.nodes) {
		return true
	}
	n := s.p.nodes[k]
	if n.parent < 0 {
		return s.fixed[k] >= 0 && s.place(k, s.fixed[k], n)
	}
	from := s.image[n.parent]
	for at, atom := range s.m.Neighbours(from) {
		if s.fixed[k] >= 0 && s.fixed[k] != atom {
			continue
		}
		if n.bond(s.m.Bond(s.m.NeighbourBonds(from)[at])) && s.place(k, atom, n) {
			return true
		}
	}
	return false
}

func (s *search) place(k, atom int, n node) bool {
	for _, used := range s.image[:k] {
		if used == atom {
			return false
		}
	}
	if !n.test(s.m, atom) {
		return false
	}
	s.image[k] = atom
	return s.extend(k + 1)
}
