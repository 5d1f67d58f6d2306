package dedupe

import (
	"slices"

	"torsieve/molecule"
)

// A symmetry finds the renumberings of some atoms of a molecule that keep who
// is bonded to whom and what is equivalent to what.
type symmetry struct {
	m          *molecule.Molecule
	atoms      []int
	index      []int   // by atom: its place in atoms, -1 if it is not among them
	neighbours [][]int // by place
	class      []int   // by place
}

func newSymmetry(m *molecule.Molecule, atoms []int) *symmetry {
	s := &symmetry{m: m, atoms: atoms, index: make([]int, m.NumAtoms())}
	for i := range s.index {
		s.index[i] = -1
	}
	for k, i := range atoms {
		s.index[i] = k
	}
	classes := m.Classes()
	for _, i := range atoms {
		s.class = append(s.class, classes[i])
		var near []int
		for _, j := range m.Neighbours(i) {
			if s.index[j] >= 0 {
				near = append(near, s.index[j])
			}
		}
		s.neighbours = append(s.neighbours, near)
	}
	return s
}

// renumberings returns the permutations p of the places, in a fixed order, and
// whether they are all: at most limit are. Of the places in leaves only the
// anchors' images are searched: the k-th of a set goes to the k-th of its image.
func (s *symmetry) renumberings(leaves [][]int, limit int) (maps [][]int, all bool) {
	b := &backtrack{s: s, limit: limit, image: make([]int, len(s.atoms)), used: make([]bool, len(s.atoms))}
	b.leaf = make([]bool, len(s.atoms))
	for _, set := range leaves {
		for _, k := range set {
			b.leaf[k] = true
		}
	}
	b.makeOrder()
	b.extend(0)
	for _, p := range b.found {
		s.placeLeaves(p, leaves)
	}
	return b.found, len(b.found) < limit && b.steps < b.maxSteps()
}

// placeLeaves completes a renumbering of the other places.
func (s *symmetry) placeLeaves(p []int, leaves [][]int) {
	for _, set := range leaves {
		anchor := p[s.neighbours[set[0]][0]]
		for _, other := range leaves {
			if s.neighbours[other[0]][0] == anchor && s.class[other[0]] == s.class[set[0]] {
				for k := range set {
					p[set[k]] = other[k]
				}
			}
		}
	}
}

// leaves returns the sets of equivalent end atoms on one neighbour.
func (s *symmetry) leaves() [][]int {
	var sets [][]int
	for anchor := range s.atoms {
		var byClass [][]int
	next:
		for _, k := range s.neighbours[anchor] {
			if len(s.neighbours[k]) != 1 {
				continue
			}
			for n, set := range byClass {
				if s.class[set[0]] == s.class[k] {
					byClass[n] = append(set, k)
					continue next
				}
			}
			byClass = append(byClass, []int{k})
		}
		for _, set := range byClass {
			if len(set) > 1 && len(set) <= 4 {
				sets = append(sets, set)
			}
		}
	}
	return sets
}

// core lists the places that are in no set of leaves.
func (s *symmetry) core(leaves [][]int) []int {
	var core []int
	for k := range s.atoms {
		if !slices.ContainsFunc(leaves, func(set []int) bool { return slices.Contains(set, k) }) {
			core = append(core, k)
		}
	}
	return core
}

// A backtrack is the search for renumberings: atoms in an order in which each
// has a neighbour that is placed already.
type backtrack struct {
	s     *symmetry
	leaf  []bool
	order []int
	from  []int // by position in order: a neighbour placed before, or -1
	image []int
	used  []bool
	found [][]int
	limit int
	steps int
}

func (b *backtrack) maxSteps() int { return 200*b.limit + 100000 }

func (b *backtrack) makeOrder() {
	seen := make([]bool, len(b.s.atoms))
	for start := range b.s.atoms {
		if seen[start] || b.leaf[start] {
			continue
		}
		seen[start] = true
		b.order, b.from = append(b.order, start), append(b.from, -1)
		for at := len(b.order) - 1; at < len(b.order); at++ {
			for _, j := range b.s.neighbours[b.order[at]] {
				if !seen[j] && !b.leaf[j] {
					seen[j] = true
					b.order, b.from = append(b.order, j), append(b.from, b.order[at])
				}
			}
		}
	}
}

// extend places the atom at position k of the order, and all behind it.
func (b *backtrack) extend(k int) {
	b.steps++
	if len(b.found) == b.limit || b.steps > b.maxSteps() {
		return
	}
	if k == len(b.order) {
		b.found = append(b.found, slices.Clone(b.image))
		return
	}
	i := b.order[k]
	if b.from[k] < 0 {
		for j := range b.s.atoms {
			b.try(k, i, j)
		}
		return
	}
	for _, j := range b.s.neighbours[b.image[b.from[k]]] {
		b.try(k, i, j)
	}
}

func (b *backtrack) try(k, i, j int) {
	if b.used[j] || b.leaf[j] || b.s.class[i] != b.s.class[j] || !b.bondsKept(k, i, j) {
		return
	}
	b.image[i], b.used[j] = j, true
	b.extend(k + 1)
	b.used[j] = false
}

// bondsKept says whether every placed neighbour of i has its image bonded to j.
func (b *backtrack) bondsKept(k, i, j int) bool {
	for _, n := range b.s.neighbours[i] {
		if slices.Contains(b.order[:k], n) && !slices.Contains(b.s.neighbours[j], b.image[n]) {
			return false
		}
	}
	return true
}
