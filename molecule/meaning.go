package molecule

import "slices"

// A stereoSearch decides which candidates are stereo elements and which
// statements about them mean anything.
//
// A statement means something if no symmetry of the graph with all the other
// statements leaves the element in place and inverts it. That covers centres
// with four different neighbours, centres that are only relative to others in a
// ring, and centres between branches that differ in configuration alone.
// Bridgeheads of small cages invert together or not at all (cage.go).
type stereoSearch struct {
	g        *graph
	centres  []Centre
	bonds    []StereoBond
	group    []int     // by centre: first centre of the cage group
	relative []Parity  // by centre: parity where the group's first has +1
	views    []*view   // by fragment
	sure     [2][]bool // by centre, by bond: different neighbours in any case
	cells    [][]int   // by fragment: cells in the arrangement at work, nil if not needed yet
	work     int       // nodes visited so far
	warnings []string
}

// maxStereoWork bounds the time spent on elements whose neighbours are alike,
// in nodes visited; those beyond are taken for none.
const maxStereoWork = 20_000_000

// stereoTrials is the number of arrangements of all candidates in which an
// element that is not stated may show that it matters.
const stereoTrials = 12

func (s *stereoSearch) run() {
	if len(s.centres)+len(s.bonds) == 0 {
		return
	}
	s.prepare()
	s.dropHopeless()
	s.findGroups()
	s.dropMeaningless()
	keepCentre, keepBond := s.findOpen()
	s.centres = filter(s.centres, keepCentre)
	s.bonds = filter(s.bonds, keepBond)
	if s.work > maxStereoWork {
		s.warnings = append(s.warnings, "too many symmetric stereo elements to tell all apart: those left out are taken for none")
	}
}

func filter[E any](list []E, keep []bool) []E {
	var kept []E
	for i, e := range list {
		if keep[i] {
			kept = append(kept, e)
		}
	}
	return kept
}

// prepare makes the views and finds the elements that are sure.
func (s *stereoSearch) prepare() {
	g := s.g
	class := g.shared.classes()
	s.views = make([]*view, len(g.fragments))
	s.cells = make([][]int, len(g.fragments))
	s.sure[0] = make([]bool, len(s.centres))
	for n, c := range s.centres {
		s.sure[0][n] = allDifferent(class, c.Neighbours[:])
	}
	s.sure[1] = make([]bool, len(s.bonds))
	for n, b := range s.bonds {
		s.sure[1][n] = allDifferent(class, g.substituents(b.J, b.K)) && allDifferent(class, g.substituents(b.K, b.J))
	}
}

// substituents returns the neighbours of end i of a double bond to j.
func (g *graph) substituents(i, j int) []int {
	var list []int
	for _, n := range g.neighbours[i] {
		if n != j {
			list = append(list, n)
		}
	}
	return list
}

func allDifferent(class []int, atoms []int) bool {
	for n, i := range atoms {
		for _, j := range atoms[:n] {
			if i >= 0 && j >= 0 && class[i] == class[j] {
				return false
			}
		}
	}
	return true
}

// dropHopeless removes the candidates with two like neighbours on branches that
// hold no other candidate and lead nowhere else: such branches stay alike.
func (s *stereoSearch) dropHopeless() {
	g, class := s.g, s.g.shared.classes()
	plain := func(i int, list []int) bool {
		for n, a := range list {
			for _, b := range list[:n] {
				if a < 0 || b < 0 || class[a] != class[b] {
					continue
				}
				if k, _ := g.bondBetween(i, a); !g.inRing[k] && s.isPlainBranch(i, a) {
					return true
				}
			}
		}
		return false
	}
	for changed := true; changed; {
		keepC, keepB := make([]bool, len(s.centres)), make([]bool, len(s.bonds))
		for n, c := range s.centres {
			keepC[n] = s.sure[0][n] || !plain(c.Atom, c.Neighbours[:])
		}
		for n, b := range s.bonds {
			keepB[n] = s.sure[1][n] || !plain(b.J, g.substituents(b.J, b.K)) && !plain(b.K, g.substituents(b.K, b.J))
		}
		before := len(s.centres) + len(s.bonds)
		s.centres, s.sure[0] = filter(s.centres, keepC), filter(s.sure[0], keepC)
		s.bonds, s.sure[1] = filter(s.bonds, keepB), filter(s.sure[1], keepB)
		changed = len(s.centres)+len(s.bonds) < before
	}
}

// isPlainBranch says whether the branch that begins with atom a, seen from i,
// holds no candidate. Branches of more than a few atoms are left to the slower
// test.
func (s *stereoSearch) isPlainBranch(i, a int) bool {
	const most = 40
	seen := []int{i, a}
	for at := 1; at < len(seen); at++ {
		for _, j := range s.g.neighbours[seen[at]] {
			if !slices.Contains(seen, j) {
				seen = append(seen, j)
			}
		}
		if len(seen) > most {
			return false
		}
	}
	for _, c := range s.centres {
		if c.Atom != i && slices.Contains(seen, c.Atom) {
			return false
		}
	}
	for _, b := range s.bonds {
		if slices.Contains(seen[1:], b.J) || slices.Contains(seen[1:], b.K) {
			return false
		}
	}
	return true
}

// dropMeaningless takes back statements that mean nothing beside the others.
func (s *stereoSearch) dropMeaningless() {
	for changed := true; changed; {
		changed = false
		clear(s.cells)
		var emptyC, emptyB []int
		for n := range s.centres {
			if s.group[n] == n && s.doubtful(n) && !s.centreMatters(n, s.centres, s.bonds) {
				emptyC = append(emptyC, n)
			}
		}
		for n, b := range s.bonds {
			if b.Known && !s.sure[1][n] && !s.bondMatters(n, s.centres, s.bonds) {
				emptyB = append(emptyB, n)
			}
		}
		for _, first := range emptyC {
			for n := range s.centres {
				if s.group[n] == first {
					s.centres[n].Parity = 0
					changed = true
				}
			}
		}
		for _, n := range emptyB {
			s.bonds[n].Known, changed = false, true
		}
	}
}

// doubtful says whether something is stated of the cage group whose first
// centre is n, and no member has four different neighbours.
func (s *stereoSearch) doubtful(n int) bool {
	stated := false
	for m, c := range s.centres {
		if s.group[m] == n {
			stated = stated || c.Parity != 0
			if s.sure[0][m] {
				return false
			}
		}
	}
	return stated
}

// findOpen says which candidates are elements: those that are stated still, the
// sure ones, and those that matter in one of several arrangements of all that
// is not stated.
func (s *stereoSearch) findOpen() (centres, bonds []bool) {
	centres, bonds = make([]bool, len(s.centres)), make([]bool, len(s.bonds))
	for n, c := range s.centres {
		centres[n] = s.sure[0][n] || c.Parity != 0
	}
	for n, b := range s.bonds {
		bonds[n] = s.sure[1][n] || b.Known
	}
	for trial := range stereoTrials {
		cs, bs := s.arrangement(trial)
		clear(s.cells)
		open := false
		for n := range s.centres {
			if first := s.group[n]; !centres[n] {
				if first == n || centres[first] {
					centres[n] = centres[first] || s.centreMatters(n, cs, bs)
				}
				open = open || !centres[n]
			}
		}
		for n := range s.bonds {
			if !bonds[n] {
				bonds[n] = s.bondMatters(n, cs, bs)
				open = open || !bonds[n]
			}
		}
		if !open || s.work > maxStereoWork {
			break
		}
	}
	return centres, bonds
}

// arrangement states all elements: those that are stated as they are, the
// others by a fixed pseudo-random rule, cages consistently.
func (s *stereoSearch) arrangement(trial int) ([]Centre, []StereoBond) {
	cs, bs := slices.Clone(s.centres), slices.Clone(s.bonds)
	base := map[int]Parity{}
	for n, c := range cs {
		if c.Parity != 0 {
			base[s.group[n]] = c.Parity * s.relative[n]
		}
	}
	for n := range cs {
		if cs[n].Parity != 0 {
			continue
		}
		sign, ok := base[s.group[n]]
		if !ok {
			sign = 1 - 2*Parity(scramble(trial, s.group[n])&1)
		}
		cs[n].Parity = sign * s.relative[n]
	}
	for n := range bs {
		if !bs[n].Known {
			bs[n].Known, bs[n].Cis = true, scramble(trial, len(cs)+n)&1 == 0
		}
	}
	return cs, bs
}

// scramble mixes two small numbers into a well-spread one (the finaliser of
// S. Vigna's splitmix64, after G. L. Steele et al., OOPSLA 2014).
func scramble(a, b int) uint64 {
	x := uint64(a)<<32 + uint64(b) + 0x9e3779b97f4a7c15
	x = (x ^ x>>30) * 0xbf58476d1ce4e5b9
	x = (x ^ x>>27) * 0x94d049bb133111eb
	return (x ^ x>>31) >> 7
}
