package molecule

// threeBridges returns three paths of ring bonds from a to b that share no
// other atom, of least total length, or nil. It looks no further than ties
// reach.
//
// Source: successive shortest augmenting paths (J. W. Suurballe, Networks 1974,
// 4, 125), with each atom split into an entry and an exit.
func (g *graph) threeBridges(a, b int) [][]int {
	f := newBridgeFlow(g, a)
	if _, ok := f.index[b]; !ok {
		return nil
	}
	for range 3 {
		if !f.augment(a, b) {
			return nil
		}
	}
	return f.paths(a, b)
}

// bridgeReach is the number of bonds from a within which bridges can lie: half
// way along the longest, and back from b.
const bridgeReach = maxTiedBridges/2 + 1

// A bridgeFlow is a unit flow in the neighbourhood of an atom. Atom number n
// has the entry 2n and the exit 2n+1.
type bridgeFlow struct {
	g     *graph
	atoms []int
	index map[int]int
	arcs  [][]flowArc
}

type flowArc struct {
	to, back int // end, and position of the opposite arc there
	cost     int
	capacity int
}

func newBridgeFlow(g *graph, a int) *bridgeFlow {
	f := &bridgeFlow{g: g, index: map[int]int{a: 0}, atoms: []int{a}}
	dist := []int{0}
	for at := 0; at < len(f.atoms); at++ {
		if dist[at] == bridgeReach {
			break
		}
		i := f.atoms[at]
		for n, j := range g.neighbours[i] {
			if _, seen := f.index[j]; !seen && g.inRing[g.neighbourBonds[i][n]] {
				f.index[j] = len(f.atoms)
				f.atoms = append(f.atoms, j)
				dist = append(dist, dist[at]+1)
			}
		}
	}
	f.arcs = make([][]flowArc, 2*len(f.atoms))
	for n, i := range f.atoms {
		capacity := 1
		if i == a {
			capacity = 3
		}
		f.add(2*n, 2*n+1, 0, capacity)
		for at, j := range g.neighbours[i] {
			if m, ok := f.index[j]; ok && g.inRing[g.neighbourBonds[i][at]] {
				f.add(2*n+1, 2*m, 1, 1)
			}
		}
	}
	return f
}

func (f *bridgeFlow) add(from, to, cost, capacity int) {
	f.arcs[from] = append(f.arcs[from], flowArc{to, len(f.arcs[to]), cost, capacity})
	f.arcs[to] = append(f.arcs[to], flowArc{from, len(f.arcs[from]) - 1, -cost, 0})
}

// augment sends one more unit from the exit of a to the entry of b along the
// cheapest path (R. Bellman, Q. Appl. Math. 1958, 16, 87).
func (f *bridgeFlow) augment(a, b int) bool {
	const far = 1 << 30
	source, sink := 2*f.index[a]+1, 2*f.index[b]
	cost := make([]int, len(f.arcs))
	for i := range cost {
		cost[i] = far
	}
	cost[source] = 0
	type step struct{ node, arc int }
	via := make([]step, len(f.arcs))
	queue := []int{source}
	queued := make([]bool, len(f.arcs))
	for len(queue) > 0 {
		u := queue[0]
		queue = queue[1:]
		queued[u] = false
		if u == sink {
			continue
		}
		for n, arc := range f.arcs[u] {
			if arc.capacity > 0 && cost[u]+arc.cost < cost[arc.to] {
				cost[arc.to] = cost[u] + arc.cost
				via[arc.to] = step{u, n}
				if !queued[arc.to] {
					queued[arc.to] = true
					queue = append(queue, arc.to)
				}
			}
		}
	}
	if cost[sink] == far {
		return false
	}
	for v := sink; v != source; v = via[v].node {
		arc := &f.arcs[via[v].node][via[v].arc]
		arc.capacity--
		f.arcs[v][arc.back].capacity++
	}
	return true
}

// paths follows the flow from a to b.
func (f *bridgeFlow) paths(a, b int) [][]int {
	var paths [][]int
	source, sink := 2*f.index[a]+1, 2*f.index[b]
	for _, first := range f.arcs[source] {
		if first.cost != 1 || first.capacity != 0 {
			continue
		}
		path := []int{a}
		at := first.to
		for {
			path = append(path, f.atoms[at/2])
			if at == sink {
				break
			}
			for _, arc := range f.arcs[at+1] { // from the exit of this atom
				if arc.cost == 1 && arc.capacity == 0 {
					at = arc.to
					break
				}
			}
		}
		paths = append(paths, path)
	}
	return paths
}
