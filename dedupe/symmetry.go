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
// whether they are all: at most limit are. Of those that differ by exchanges
// within blocks only the first is returned.
func (s *symmetry) renumberings(blocks []block, limit int) (maps [][]int, all bool) {
	b := newBacktrack(s, limit)
	b.blocks = blocks
	b.makeOrder()
	b.closeBlocks()
	b.extend(0)
	return b.found, len(b.found) < limit && b.steps < b.most
}

// A backtrack is the search for renumberings: atoms in an order in which each
// has a neighbour that is placed already.
type backtrack struct {
	s      *symmetry
	blocks []block
	closes []int // by position in order: the block that is complete then, or -1; nil: none is looked at
	order  []int
	from   []int // by position in order: a neighbour placed before, or -1
	image  []int
	used   []bool // places that are images
	placed []bool // places that have images
	found  [][]int
	limit  int
	steps  int
	most   int
	stay   bool // each place is tried where it is first
}

func newBacktrack(s *symmetry, limit int) *backtrack {
	n := len(s.atoms)
	return &backtrack{s: s, limit: limit, most: 200*limit + 100000,
		image: make([]int, n), used: make([]bool, n), placed: make([]bool, n)}
}

// makeOrder walks from the first places given, all of them, to their
// neighbours and on.
func (b *backtrack) makeOrder(first ...int) {
	seen := make([]bool, len(b.s.atoms))
	visit := func(k, from int) {
		seen[k] = true
		b.order, b.from = append(b.order, k), append(b.from, from)
	}
	if len(first) > 0 {
		b.walk(first, seen, visit)
	}
	for start := range b.s.atoms {
		if !seen[start] {
			b.walk([]int{start}, seen, visit)
		}
	}
}

func (b *backtrack) walk(first []int, seen []bool, visit func(k, from int)) {
	begin := len(b.order)
	for len(b.order)-begin < len(first) { // next to something placed where that can be
		next, near := -1, -1
		for _, k := range first {
			if seen[k] {
				continue
			}
			if next < 0 {
				next = k
			}
			if n := b.beside(k, seen); n >= 0 {
				next, near = k, n
				break
			}
		}
		visit(next, near)
	}
	for at := begin; at < len(b.order); at++ {
		for _, j := range b.s.neighbours[b.order[at]] {
			if !seen[j] {
				visit(j, b.order[at])
			}
		}
	}
}

// beside returns a neighbour of k that has its image before k is tried, or -1.
func (b *backtrack) beside(k int, seen []bool) int {
	for _, j := range b.s.neighbours[k] {
		if seen[j] || b.placed[j] {
			return j
		}
	}
	return -1
}

// closeBlocks notes after which place of the order each block is complete.
func (b *backtrack) closeBlocks() {
	b.closes = make([]int, len(b.order))
	for k := range b.closes {
		b.closes[k] = -1
	}
	for n, set := range b.blocks {
		last := 0
		for at, k := range b.order {
			if slices.Contains(set.places, k) {
				last = at
			}
		}
		b.closes[last] = n
	}
}

// extend places the atom at position k of the order, and all behind it.
func (b *backtrack) extend(k int) {
	b.steps++
	if len(b.found) == b.limit || b.steps > b.most {
		return
	}
	if k == len(b.order) {
		b.found = append(b.found, slices.Clone(b.image))
		return
	}
	i := b.order[k]
	if b.stay {
		b.try(k, i, i)
	}
	if b.from[k] < 0 {
		for j := range b.s.atoms {
			if !b.stay || j != i {
				b.try(k, i, j)
			}
		}
		return
	}
	for _, j := range b.s.neighbours[b.image[b.from[k]]] {
		if !b.stay || j != i {
			b.try(k, i, j)
		}
	}
}

func (b *backtrack) try(k, i, j int) {
	if b.used[j] || b.s.class[i] != b.s.class[j] || !b.bondsKept(i, j) {
		return
	}
	b.image[i], b.used[j], b.placed[i] = j, true, true
	if b.closes == nil || b.closes[k] < 0 || b.blocks[b.closes[k]].lowest(b.image) {
		b.extend(k + 1)
	}
	b.used[j], b.placed[i] = false, false
}

// bondsKept says whether every placed neighbour of i has its image bonded to j.
func (b *backtrack) bondsKept(i, j int) bool {
	for _, n := range b.s.neighbours[i] {
		if b.placed[n] && !slices.Contains(b.s.neighbours[j], b.image[n]) {
			return false
		}
	}
	return true
}
