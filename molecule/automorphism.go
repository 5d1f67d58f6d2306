package molecule

import "slices"

// maxAutomorphismSteps bounds the search for symmetry permutations.
const maxAutomorphismSteps = 2_000_000

// Automorphisms returns the permutations of the given atoms that keep the
// graph and its stated stereo: perms[n][k] is the atom that atoms[k] goes to.
// The identity comes first. Delocalised groups count as alike. Hydrogens that
// are not among the atoms are looked upon as part of the atoms that carry them.
//
// At most limit permutations are returned; complete is false if there may be
// more.
func (m *Molecule) Automorphisms(atoms []int, limit int) (perms [][]int, complete bool) {
	return m.permutations(atoms, limit, 1)
}

// MirrorAutomorphisms is Automorphisms for permutations that invert every
// stated centre: those by which a molecule is superposed on its mirror image.
// There are none if it is chiral; without stated centres they are the same.
func (m *Molecule) MirrorAutomorphisms(atoms []int, limit int) (perms [][]int, complete bool) {
	return m.permutations(atoms, limit, -1)
}

func (m *Molecule) permutations(atoms []int, limit int, handedness Parity) ([][]int, bool) {
	s := &permutationSearch{m: m, atoms: atoms, limit: limit, handedness: handedness, class: m.Classes()}
	s.prepare()
	s.descend(0)
	return s.found, !s.cut
}

type permutationSearch struct {
	m          *Molecule
	atoms      []int
	limit      int
	handedness Parity
	class      []int
	chosen     []bool // by atom: one of atoms
	order      []int  // atoms in the order of the search
	parent     []int  // by place in order: a neighbour that comes earlier, -1 without
	image      []int  // by atom, -1 as long as open
	taken      []bool // by atom: image of another
	found      [][]int
	steps      int
	cut        bool
}

// prepare orders the atoms so that each but the first of a part has a neighbour
// before it, and parts begin with the rarest class.
func (s *permutationSearch) prepare() {
	n := len(s.m.atoms)
	s.chosen, s.taken, s.image = make([]bool, n), make([]bool, n), make([]int, n)
	for i := range s.image {
		s.image[i] = -1
	}
	members := map[int]int{}
	for _, i := range s.atoms {
		s.chosen[i] = true
		members[s.class[i]]++
	}
	starts := slices.Clone(s.atoms)
	slices.SortStableFunc(starts, func(a, b int) int { return members[s.class[a]] - members[s.class[b]] })
	placed := make([]bool, n)
	for _, start := range starts {
		if placed[start] {
			continue
		}
		placed[start] = true
		first := len(s.order)
		s.order, s.parent = append(s.order, start), append(s.parent, -1)
		for at := first; at < len(s.order); at++ {
			i := s.order[at]
			for _, j := range s.m.neighbours[i] {
				if s.chosen[j] && !placed[j] {
					placed[j] = true
					s.order, s.parent = append(s.order, j), append(s.parent, i)
				}
			}
		}
	}
}

func (s *permutationSearch) descend(depth int) {
	if s.cut {
		return
	}
	if depth == len(s.order) {
		s.record()
		return
	}
	i := s.order[depth]
	candidates := s.atoms
	if p := s.parent[depth]; p >= 0 {
		candidates = s.m.neighbours[s.image[p]]
	}
	s.try(i, i, candidates, depth)
	for _, j := range candidates {
		if j != i {
			s.try(i, j, candidates, depth)
		}
	}
}

// try maps i on j if that fits what is mapped already, and goes on.
func (s *permutationSearch) try(i, j int, candidates []int, depth int) {
	s.steps++
	if s.steps > maxAutomorphismSteps {
		s.cut = true
	}
	if s.cut || s.taken[j] || !s.chosen[j] || s.class[i] != s.class[j] || !s.fits(i, j) {
		return
	}
	if i == j && s.parent[depth] >= 0 && !slices.Contains(candidates, i) {
		return
	}
	s.image[i], s.taken[j] = j, true
	s.descend(depth + 1)
	s.image[i], s.taken[j] = -1, false
}

// fits says whether the bonds of i to atoms that are mapped are bonds of j to
// their images, and j has no others to images.
func (s *permutationSearch) fits(i, j int) bool {
	bonds := 0
	for at, n := range s.m.neighbours[i] {
		if s.image[n] < 0 {
			continue
		}
		k, ok := s.m.bondBetween(j, s.image[n])
		if !ok || s.m.bondCode(k) != s.m.bondCode(s.m.neighbourBonds[i][at]) {
			return false
		}
		bonds++
	}
	for _, n := range s.m.neighbours[j] {
		if s.taken[n] {
			bonds--
		}
	}
	return bonds == 0
}

// bondCode is what symmetry sees of a bond.
func (g *graph) bondCode(k int) int {
	switch {
	case g.shared.delocalised.bond[k]:
		return codeDelocalised
	case g.bonds[k].Aromatic:
		return codeAromatic
	}
	return g.bonds[k].Order
}

func (s *permutationSearch) record() {
	if !s.keepsCentres() || !s.keepsDoubleBonds() {
		return
	}
	if len(s.found) == s.limit {
		s.cut = true
		return
	}
	perm := make([]int, len(s.atoms))
	for k, i := range s.atoms {
		perm[k] = s.image[i]
	}
	s.found = append(s.found, perm)
}

func (s *permutationSearch) keepsCentres() bool {
	for _, c := range s.m.centres {
		if c.Parity == 0 || !s.chosen[c.Atom] {
			continue
		}
		to := s.image[c.Atom]
		at := slices.IndexFunc(s.m.centres, func(d Centre) bool { return d.Atom == to && d.Parity != 0 })
		if at < 0 {
			return false
		}
		d := s.m.centres[at]
		var order [4]int
		for n, j := range c.Neighbours {
			order[n] = s.imageBeside(c.Atom, j)
		}
		if c.Parity*permutationSign(order, d.Neighbours) == -d.Parity*s.handedness {
			return false
		}
	}
	return true
}

// imageBeside returns where neighbour j of atom i goes. A neighbour that is not
// among the atoms goes to the one beside the image of i that is not either; -3
// if there are several.
func (s *permutationSearch) imageBeside(i, j int) int {
	switch {
	case j == LonePair:
		return LonePair
	case s.chosen[j]:
		return s.image[j]
	}
	beside := -3
	for _, n := range s.m.neighbours[s.image[i]] {
		if !s.chosen[n] {
			if beside >= 0 {
				return -3
			}
			beside = n
		}
	}
	return beside
}

func (s *permutationSearch) keepsDoubleBonds() bool {
	for _, b := range s.m.stereoBonds {
		if !b.Known || !s.chosen[b.J] || !s.chosen[b.K] {
			continue
		}
		k, _ := s.m.bondBetween(s.image[b.J], s.image[b.K])
		at := slices.IndexFunc(s.m.stereoBonds, func(d StereoBond) bool { return d.Bond == k && d.Known })
		if at < 0 {
			return false
		}
		d := s.m.stereoBonds[at]
		a, bb := s.imageBeside(b.J, b.A), s.imageBeside(b.K, b.B)
		if a < 0 || bb < 0 {
			continue
		}
		if d.J != s.image[b.J] {
			a, bb = bb, a
		}
		if b.Cis != (d.Cis != ((a != d.A) != (bb != d.B))) {
			return false
		}
	}
	return true
}
