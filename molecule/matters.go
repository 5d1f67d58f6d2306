package molecule

import "slices"

// statements are stereo elements with what is stated of them.
type statements struct {
	centres []Centre
	bonds   []StereoBond
}

// centreMatters says whether inverting centre n, and with it the centres that
// its cage ties to it, gives something different while they stay in place.
func (s *stereoSearch) centreMatters(n int, cs []Centre, bs []StereoBond) bool {
	now := statements{cs, bs}
	if f := s.g.shared.fragment[cs[n].Atom]; s.allApart(f, now, cs[n].Neighbours[:]) {
		return true
	}
	without, inverted := slices.Clone(cs), slices.Clone(cs)
	var held []int
	for m := range cs {
		if s.group[m] == s.group[n] {
			without[m].Parity, inverted[m].Parity = 0, -cs[m].Parity
			held = append(held, cs[m].Atom)
		}
	}
	return s.differ(held, statements{without, bs}, now, statements{inverted, bs})
}

func (s *stereoSearch) bondMatters(n int, cs []Centre, bs []StereoBond) bool {
	now := statements{cs, bs}
	b := bs[n]
	f := s.g.shared.fragment[b.J]
	if s.allApart(f, now, s.g.substituents(b.J, b.K)) && s.allApart(f, now, s.g.substituents(b.K, b.J)) {
		return true
	}
	without, inverted := slices.Clone(bs), slices.Clone(bs)
	without[n].Known, inverted[n].Cis = false, !b.Cis
	return s.differ([]int{b.J, b.K}, statements{cs, without}, now, statements{cs, inverted})
}

func (s *stereoSearch) fragmentView(f int) *view {
	if s.views[f] == nil {
		s.views[f] = s.g.view(f, true)
	}
	return s.views[f]
}

// refined returns the cells of fragment f with the given statements.
func (s *stereoSearch) refined(f int, st statements) []int {
	v := s.fragmentView(f)
	s.work += 4 * len(v.atoms)
	v.setStereo(s.g, f, st.centres, st.bonds)
	return v.cells()
}

// allApart says whether refinement alone tells the atoms apart: then no
// symmetry exchanges them.
func (s *stereoSearch) allApart(f int, now statements, atoms []int) bool {
	if s.cells[f] == nil {
		s.cells[f] = s.refined(f, now)
	}
	v := s.fragmentView(f)
	seen := make([]int, 0, 4)
	for _, i := range atoms {
		colour := lonePairSide
		if i != LonePair {
			if colour = hydrogenSide; v.node[i] >= 0 {
				colour = s.cells[f][v.node[i]]
			}
		}
		if slices.Contains(seen, colour) {
			return false
		}
		seen = append(seen, colour)
	}
	return true
}

// ballRadius is the number of bonds around an element within which the exact
// test looks; what is further away counts by its refined colour.
const ballRadius = 14

// differ compares two sets of statements that are the same but for the elements
// at the atoms held, which stay in place as a set.
func (s *stereoSearch) differ(held []int, without, first, second statements) bool {
	if s.work > maxStereoWork {
		return false
	}
	f := s.g.shared.fragment[held[0]]
	b := s.ball(f, held, s.refined(f, without))
	b.setStatements(s.g, f, first)
	one := b.canonical()
	b.setStatements(s.g, f, second)
	two := b.canonical()
	s.work += one.work + two.work
	return !slices.Equal(one.certificate, two.certificate)
}

// A ball is the part of a view around some atoms.
type ball struct {
	*view
	whole []bool // by node: all its neighbours are in the ball too
}

func (s *stereoSearch) ball(f int, held, cells []int) *ball {
	v := s.fragmentView(f)
	inside := make([]int, len(v.atoms)) // number in the ball, from 1
	var nodes, dist []int
	for _, i := range held {
		inside[v.node[i]] = len(nodes) + 1
		nodes, dist = append(nodes, v.node[i]), append(dist, 0)
	}
	for at := 0; at < len(nodes); at++ {
		for _, a := range v.arcs[nodes[at]] {
			if inside[a.to] == 0 && dist[at] < ballRadius {
				inside[a.to] = len(nodes) + 1
				nodes, dist = append(nodes, a.to), append(dist, dist[at]+1)
			}
		}
	}
	b := &ball{view: &view{node: make([]int, len(v.node))}, whole: make([]bool, len(nodes))}
	for i := range b.node {
		b.node[i] = -1
	}
	for n, old := range nodes {
		b.atoms = append(b.atoms, v.atoms[old])
		b.node[v.atoms[old]] = n
		colour := cells[old]
		if n < len(held) {
			colour = len(v.atoms) // the elements stay in place, a cage as a whole
		}
		b.colour = append(b.colour, colour)
		var arcs []arc
		for _, a := range v.arcs[old] {
			if inside[a.to] > 0 {
				arcs = append(arcs, arc{inside[a.to] - 1, a.code})
			}
		}
		b.arcs = append(b.arcs, arcs)
		b.whole[n] = len(arcs) == len(v.arcs[old])
	}
	return b
}

// setStatements gives the ball the stereo elements that lie in it with all
// their neighbours.
func (b *ball) setStatements(g *graph, f int, st statements) {
	in := func(i int) bool { return b.node[i] >= 0 && b.whole[b.node[i]] }
	var inside statements
	for _, c := range st.centres {
		if g.shared.fragment[c.Atom] == f && in(c.Atom) {
			inside.centres = append(inside.centres, c)
		}
	}
	for _, d := range st.bonds {
		if g.shared.fragment[d.J] == f && in(d.J) && in(d.K) {
			inside.bonds = append(inside.bonds, d)
		}
	}
	b.setStereo(g, f, inside.centres, inside.bonds)
}
