package molecule

// maximumMatching pairs as many vertices of a graph as can be paired, each
// with a neighbour. It returns the mate of each vertex, or -1.
//
// Source: J. Edmonds, Can. J. Math. 1965, 17, 449 (augmenting paths with
// contracted blossoms); breadth first, O(V^3) at worst, after a greedy start.
func maximumMatching(neighbours [][]int) []int {
	n := len(neighbours)
	m := &matcher{
		neighbours: neighbours,
		mate:       make([]int, n),
		parent:     make([]int, n),
		base:       make([]int, n),
		used:       make([]bool, n),
		blossom:    make([]bool, n),
		mark:       make([]bool, n),
	}
	for i := range n {
		m.mate[i], m.parent[i], m.base[i] = -1, -1, i
	}
	for i := range n {
		if m.mate[i] >= 0 {
			continue
		}
		for _, j := range neighbours[i] {
			if m.mate[j] < 0 {
				m.mate[i], m.mate[j] = j, i
				break
			}
		}
	}
	for i := range n {
		if m.mate[i] < 0 && len(neighbours[i]) > 0 {
			m.augment(m.search(i))
			m.clear()
		}
	}
	return m.mate
}

type matcher struct {
	neighbours         [][]int
	mate, parent, base []int
	used, blossom      []bool
	mark               []bool
	queue, touched     []int
}

// search grows an alternating tree from root and returns the free vertex at
// the end of an augmenting path, or -1.
func (m *matcher) search(root int) int {
	m.queue = append(m.queue[:0], root)
	m.touch(root)
	m.used[root] = true
	for at := 0; at < len(m.queue); at++ {
		i := m.queue[at]
		for _, j := range m.neighbours[i] {
			m.touch(j)
			switch {
			case m.base[i] == m.base[j] || m.mate[i] == j:
			case j == root || m.mate[j] >= 0 && m.parent[m.mate[j]] >= 0:
				m.contract(i, j)
			case m.parent[j] < 0:
				m.parent[j] = i
				if m.mate[j] < 0 {
					return j
				}
				m.touch(m.mate[j])
				m.used[m.mate[j]] = true
				m.queue = append(m.queue, m.mate[j])
			}
		}
	}
	return -1
}

func (m *matcher) touch(i int) { m.touched = append(m.touched, i) }

// clear forgets the tree, only where it has been.
func (m *matcher) clear() {
	for _, i := range m.touched {
		m.parent[i], m.base[i], m.used[i], m.blossom[i] = -1, i, false, false
	}
	m.touched = m.touched[:0]
}

// contract shrinks the odd cycle that the edge i-j closes.
func (m *matcher) contract(i, j int) {
	base := m.commonBase(i, j)
	for _, v := range m.touched {
		m.blossom[v] = false
	}
	m.markPath(i, base, j)
	m.markPath(j, base, i)
	for at := 0; at < len(m.touched); at++ {
		v := m.touched[at]
		if !m.blossom[m.base[v]] {
			continue
		}
		m.base[v] = base
		if !m.used[v] {
			m.used[v] = true
			m.queue = append(m.queue, v)
		}
	}
}

func (m *matcher) markPath(v, base, child int) {
	for m.base[v] != base {
		m.blossom[m.base[v]], m.blossom[m.base[m.mate[v]]] = true, true
		m.parent[v] = child
		child = m.mate[v]
		v = m.parent[m.mate[v]]
	}
}

func (m *matcher) commonBase(i, j int) int {
	var path []int
	for v := i; ; v = m.parent[m.mate[v]] {
		v = m.base[v]
		m.mark[v] = true
		path = append(path, v)
		if m.mate[v] < 0 {
			break
		}
	}
	v := m.base[j]
	for !m.mark[v] {
		v = m.base[m.parent[m.mate[v]]]
	}
	for _, p := range path {
		m.mark[p] = false
	}
	return v
}

func (m *matcher) augment(end int) {
	for end >= 0 {
		previous := m.parent[end]
		next := m.mate[previous]
		m.mate[end], m.mate[previous] = previous, end
		end = next
	}
}
