package molecule

import "slices"

// A labelled is a graph as canonical ranking sees it: nodes with colours,
// arcs with codes, and stereo elements.
type labelled struct {
	colour  []int // smaller is earlier
	arcs    [][]arc
	centres []labelledCentre
	doubles []labelledDouble
	index   []int // scratch of newKeys, -1 between calls
}

type arc struct{ to, code int }

// Neighbours of a stereo element that are no nodes.
const (
	hydrogenSide = -1
	lonePairSide = -2
)

type labelledCentre struct {
	node       int
	neighbours [4]int // nodes, hydrogenSide or lonePairSide
	parity     Parity
}

// A labelledDouble is a stated double bond; the substituents of each end are
// nodes, hydrogenSide or lonePairSide, the reference first.
type labelledDouble struct {
	ends [2]int
	subs [2][2]int
	cis  bool
}

// A partition sorts the nodes into cells. The colour of a cell is the position
// of its first node.
type partition struct {
	order []int // nodes by cell
	pos   []int // inverse of order
	cell  []int // by node: position where its cell starts
	size  []int // by position: size of the cell that starts there
}

func newPartition(colour []int) *partition {
	n := len(colour)
	p := &partition{order: make([]int, n), pos: make([]int, n), cell: make([]int, n), size: make([]int, n)}
	for i := range n {
		p.order[i] = i
	}
	slices.SortStableFunc(p.order, func(a, b int) int { return colour[a] - colour[b] })
	start := 0
	for at, v := range p.order {
		if colour[v] != colour[p.order[start]] {
			start = at
		}
		p.pos[v], p.cell[v] = at, start
		p.size[start]++
	}
	return p
}

func (p *partition) clone() *partition {
	return &partition{slices.Clone(p.order), slices.Clone(p.pos), slices.Clone(p.cell), slices.Clone(p.size)}
}

func (p *partition) swap(v, to int) {
	w, from := p.order[to], p.pos[v]
	p.order[from], p.order[to] = w, v
	p.pos[w], p.pos[v] = from, to
}

// individualise makes v a cell of its own, behind the rest of its cell.
func (p *partition) individualise(v int) {
	start := p.cell[v]
	end := start + p.size[start] - 1
	p.swap(v, end)
	p.size[start]--
	p.cell[v], p.size[end] = end, 1
}

// A keyed node of a cell differs by its key from those that have none.
type keyed struct {
	node int
	key  []uint64
}

// split divides the cells of the keyed nodes by key; nodes without a key stay
// in front. It returns the nodes of all new cells but the largest of each old
// one: what its neighbours see follows from the others.
func (p *partition) split(nodes []keyed) []int {
	slices.SortFunc(nodes, func(a, b keyed) int {
		if c := p.cell[a.node] - p.cell[b.node]; c != 0 {
			return c
		}
		return slices.Compare(a.key, b.key)
	})
	var changed []int
	for at := 0; at < len(nodes); {
		start := p.cell[nodes[at].node]
		end := at
		for end < len(nodes) && p.cell[nodes[end].node] == start {
			end++
		}
		changed = p.splitCell(start, nodes[at:end], changed)
		at = end
	}
	return changed
}

func (p *partition) splitCell(start int, nodes []keyed, changed []int) []int {
	size := p.size[start]
	if size == 1 {
		return changed
	}
	first := start + size - len(nodes) // the keyed nodes go to the end, in order
	for at := len(nodes) - 1; at >= 0; at-- {
		p.swap(nodes[at].node, first+at)
	}
	starts := []int{start}
	for at, n := range nodes {
		if at > 0 && !slices.Equal(n.key, nodes[at-1].key) || at == 0 && first > start {
			starts = append(starts, first+at)
		}
	}
	if len(starts) == 1 {
		return changed
	}
	largest := 0
	for n, from := range starts {
		to := start + size
		if n+1 < len(starts) {
			to = starts[n+1]
		}
		p.size[from] = to - from
		if p.size[from] > p.size[starts[largest]] {
			largest = n
		}
	}
	for n, from := range starts {
		for _, v := range p.order[from : from+p.size[from]] {
			p.cell[v] = from
			if n != largest {
				changed = append(changed, v)
			}
		}
	}
	return changed
}

// refine splits cells until all nodes of a cell have alike neighbours and alike
// stereo elements, as far as these are defined. changed lists the nodes whose
// colour is new.
func (g *labelled) refine(p *partition, changed []int) {
	for {
		for len(changed) > 0 {
			changed = p.split(g.neighbourKeys(p, changed))
		}
		if changed = p.split(g.stereoKeys(p)); len(changed) == 0 {
			return
		}
	}
}

// neighbourKeys gives each node in a cell of several that has changed
// neighbours the sorted list of these.
func (g *labelled) neighbourKeys(p *partition, changed []int) []keyed {
	k := g.newKeys(p)
	for _, v := range changed {
		for _, a := range g.arcs[v] {
			k.add(a.to, uint64(p.cell[v])<<8|uint64(a.code))
		}
	}
	return k.sorted()
}

// stereoKeys gives the nodes of stereo elements in cells of several the
// handedness that the colours of their neighbours define.
func (g *labelled) stereoKeys(p *partition) []keyed {
	k := g.newKeys(p)
	for _, c := range g.centres {
		if s := c.sense(p.cell); s != 0 {
			k.add(c.node, uint64(2+s))
		}
	}
	for _, d := range g.doubles {
		if s := d.sense(p.cell); s != 0 {
			k.add(d.ends[0], uint64(6+s))
			k.add(d.ends[1], uint64(6+s))
		}
	}
	return k.sorted()
}

// keys collects keys by node.
type keys struct {
	p     *partition
	index []int // by node: position in nodes, -1 if it has no key
	nodes []keyed
}

func (g *labelled) newKeys(p *partition) *keys {
	if g.index == nil {
		g.index = make([]int, len(g.arcs))
		for i := range g.index {
			g.index[i] = -1
		}
	}
	return &keys{p: p, index: g.index}
}

func (k *keys) add(v int, key uint64) {
	if k.p.size[k.p.cell[v]] == 1 {
		return // nothing to split
	}
	if k.index[v] < 0 {
		k.index[v] = len(k.nodes)
		k.nodes = append(k.nodes, keyed{node: v})
	}
	n := &k.nodes[k.index[v]]
	n.key = append(n.key, key)
}

func (k *keys) sorted() []keyed {
	for _, n := range k.nodes {
		slices.Sort(n.key)
		k.index[n.node] = -1
	}
	return k.nodes
}

// sense returns the parity with respect to neighbours in the order of their
// colours, 0 where two have the same.
func (c labelledCentre) sense(colour []int) Parity {
	var seen [4]int
	for i, v := range c.neighbours {
		seen[i] = v
		if v >= 0 {
			seen[i] = colour[v]
		}
	}
	s := c.parity
	for i := range seen {
		for j := range i {
			switch {
			case seen[i] == seen[j]:
				return 0
			case seen[i] < seen[j]:
				s = -s
			}
		}
	}
	return s
}

// sense returns +1 if the substituents of highest colour are cis, -1 if they
// are trans, 0 where one end has two of the same colour.
func (d labelledDouble) sense(colour []int) int {
	s := -1
	if d.cis {
		s = 1
	}
	for _, sub := range d.subs {
		var seen [2]int
		for i, v := range sub {
			seen[i] = v
			if v >= 0 {
				seen[i] = colour[v]
			}
		}
		switch {
		case seen[0] == seen[1]:
			return 0
		case seen[0] < seen[1]:
			s = -s
		}
	}
	return s
}
