package molecule

import "slices"

// fundamental completes b by the cycles that the bonds outside a spanning tree
// close. It is the last resort in cages whose relevant rings are too many.
func (s *ringSearch) fundamental(b *cycleBasis) [][]int {
	g := s.g
	parent, depth := s.spanningTree()
	var rings [][]int
	for k, bond := range g.bonds {
		if !g.inRing[k] || parent[bond.A] == k || parent[bond.B] == k {
			continue
		}
		cycle := s.treeCycle(bond, parent, depth)
		row := s.bitSet(cycle)
		if c := b.reduce(row); c >= 0 {
			b.rows[c] = row
			rings = append(rings, cycle)
		}
	}
	slices.SortStableFunc(rings, func(a, b []int) int { return len(a) - len(b) })
	return rings
}

// spanningTree returns for each atom the bond towards the root of its ring
// system (-1 at the root) and its depth.
func (s *ringSearch) spanningTree() (parent, depth []int) {
	g := s.g
	parent, depth = make([]int, len(g.atoms)), make([]int, len(g.atoms))
	for i := range parent {
		parent[i], depth[i] = -1, -1
	}
	for root := range g.atoms {
		if !g.atomInRing[root] || depth[root] >= 0 {
			continue
		}
		depth[root] = 0
		queue := []int{root}
		for at := 0; at < len(queue); at++ {
			i := queue[at]
			for n, j := range g.neighbours[i] {
				if k := g.neighbourBonds[i][n]; g.inRing[k] && depth[j] < 0 {
					depth[j], parent[j] = depth[i]+1, k
					queue = append(queue, j)
				}
			}
		}
	}
	return parent, depth
}

func (s *ringSearch) treeCycle(bond Bond, parent, depth []int) []int {
	i, j := bond.A, bond.B
	left, right := []int{i}, []int{j}
	for i != j {
		if depth[i] >= depth[j] {
			i = s.g.other(parent[i], i)
			left = append(left, i)
		} else {
			j = s.g.other(parent[j], j)
			right = append(right, j)
		}
	}
	right = right[:len(right)-1] // the meeting point is in left already
	slices.Reverse(right)
	return append(left, right...)
}

// shortestCycle returns the size of the smallest ring through ring bond k.
func (s *ringSearch) shortestCycle(k int) int {
	g := s.g
	from, to := g.bonds[k].A, g.bonds[k].B
	s.reached = append(s.reached[:0], from)
	s.dist[from] = 0
	for at := 0; at < len(s.reached) && s.dist[to] < 0; at++ {
		i := s.reached[at]
		for n, j := range g.neighbours[i] {
			if kk := g.neighbourBonds[i][n]; kk != k && g.inRing[kk] && s.dist[j] < 0 {
				s.dist[j] = s.dist[i] + 1
				s.reached = append(s.reached, j)
			}
		}
	}
	size := s.dist[to] + 1
	for _, i := range s.reached {
		s.dist[i] = -1
	}
	return size
}
