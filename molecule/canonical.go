package molecule

import (
	"cmp"
	"slices"
)

// Limits of the search for a canonical order. What goes beyond them (cages
// whose cells are no orbits) gets an order that depends on the input.
const (
	maxCanonicalLeaves = 3000
	maxCanonicalWork   = 100_000_000 // nodes visited
)

// A ranking is the outcome of canonical ranking.
type ranking struct {
	rank        []int    // by node, 0..n-1
	certificate []uint64 // equal for graphs that are equal up to the order of nodes
	work        int      // nodes visited on the way
}

// canonical ranks the nodes so that equal graphs get equal certificates,
// whatever the order of their nodes: colour refinement, and where cells remain
// a search over individualised nodes, pruned by the automorphisms it finds.
//
// Source: the scheme of B. D. McKay, Congr. Numer. 1981, 30, 45, with stereo
// elements taken into the refinement.
func (g *labelled) canonical() ranking {
	s := &canonicalSearch{g: g}
	p := newPartition(g.colour)
	g.refine(p, slices.Clone(p.order))
	s.descend(p, nil, 0)
	return ranking{s.best.rank, s.best.certificate, s.work}
}

// cells returns the colour cells of plain refinement, without a search.
func (g *labelled) cells() []int {
	p := newPartition(g.colour)
	g.refine(p, slices.Clone(p.order))
	return p.cell
}

type canonicalSearch struct {
	g           *labelled
	first, best *leaf
	generators  [][]int
	leaves      int
	work        int
}

type leaf struct {
	path        []int // individualised nodes
	rank        []int
	certificate []uint64
}

// descend searches below a node of the tree, whose path of individualised
// nodes is given, and returns the depth at which to go on: the depth of the
// node itself, or less where all below it is known to be equivalent.
func (s *canonicalSearch) descend(p *partition, path []int, depth int) int {
	s.work += 4 * len(p.order)
	target := targetCell(p)
	if target < 0 {
		return s.atLeaf(p, path, depth)
	}
	members := slices.Clone(p.order[target : target+p.size[target]])
	var tried []int
	for _, v := range members {
		if s.exhausted() {
			break
		}
		if len(tried) > 0 && s.equivalent(v, tried, path) {
			continue
		}
		tried = append(tried, v)
		q := p.clone()
		q.individualise(v)
		s.g.refine(q, []int{v})
		if back := s.descend(q, append(slices.Clip(path), v), depth+1); back < depth {
			return back
		}
	}
	return depth
}

func (s *canonicalSearch) exhausted() bool {
	return s.best != nil && (s.leaves >= maxCanonicalLeaves || s.work >= maxCanonicalWork)
}

// targetCell returns the start of the first of the smallest cells of several
// nodes, or -1 where all are single.
func targetCell(p *partition) int {
	target := -1
	for start := 0; start < len(p.order); start += p.size[start] {
		if n := p.size[start]; n > 1 && (target < 0 || n < p.size[target]) {
			target = start
		}
	}
	return target
}

// atLeaf compares a complete order with the first and the best one.
func (s *canonicalSearch) atLeaf(p *partition, path []int, depth int) int {
	s.leaves++
	l := &leaf{slices.Clone(path), slices.Clone(p.pos), s.g.certificate(p.pos)}
	if s.best == nil {
		s.first, s.best = l, l
		return depth
	}
	for _, known := range [...]*leaf{s.first, s.best} {
		if slices.Equal(l.certificate, known.certificate) {
			s.addGenerator(known, l)
			return commonPrefix(known.path, l.path)
		}
	}
	if slices.Compare(l.certificate, s.best.certificate) < 0 {
		s.best = l
	}
	return depth
}

func commonPrefix(a, b []int) int {
	n := 0
	for n < len(a) && n < len(b) && a[n] == b[n] {
		n++
	}
	return n
}

func (s *canonicalSearch) addGenerator(from, to *leaf) {
	at := make([]int, len(to.rank)) // node of each rank
	for v, r := range to.rank {
		at[r] = v
	}
	perm := make([]int, len(from.rank))
	for v, r := range from.rank {
		perm[v] = at[r]
	}
	s.generators = append(s.generators, perm)
}

// equivalent says whether an automorphism that keeps the path maps v on one of
// the nodes tried already.
func (s *canonicalSearch) equivalent(v int, tried, path []int) bool {
	orbit := make([]int, len(s.g.colour))
	for i := range orbit {
		orbit[i] = i
	}
	find := func(i int) int {
		for orbit[i] != i {
			orbit[i] = orbit[orbit[i]]
			i = orbit[i]
		}
		return i
	}
	for _, perm := range s.generators {
		if slices.ContainsFunc(path, func(i int) bool { return perm[i] != i }) {
			continue
		}
		for i, j := range perm {
			if i != j {
				orbit[find(i)] = find(j)
			}
		}
	}
	s.work += len(s.generators) * len(orbit) / 8
	return slices.ContainsFunc(tried, func(w int) bool { return find(w) == find(v) })
}

// certificate writes the graph down in the order of the ranks.
func (g *labelled) certificate(rank []int) []uint64 {
	var code []uint64
	at := make([]int, len(rank))
	for v, r := range rank {
		at[r] = v
	}
	for r, v := range at {
		from := len(code)
		for _, a := range g.arcs[v] {
			if to := rank[a.to]; to < r {
				code = append(code, uint64(r)<<36|uint64(to)<<8|uint64(a.code))
			}
		}
		slices.Sort(code[from:])
	}
	var stereo []uint64
	for _, c := range g.centres {
		stereo = append(stereo, 1<<62|uint64(rank[c.node])<<8|uint64(2+c.sense(rank)))
	}
	for _, d := range g.doubles {
		a, b := rank[d.ends[0]], rank[d.ends[1]]
		stereo = append(stereo, 1<<63|uint64(min(a, b))<<32|uint64(max(a, b))<<4|uint64(2+d.sense(rank)))
	}
	slices.SortFunc(stereo, cmp.Compare)
	return append(code, stereo...)
}
