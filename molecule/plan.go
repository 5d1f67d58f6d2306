package molecule

import "slices"

// plan walks the fragment depth first in the order of the ranks and decides
// which bonds are chain and which are ring bonds.
func (w *writer) plan() {
	w.start = slices.Index(w.rank, 0)
	next, ordered := w.next, w.ordered
	first := w.v.atoms[w.start]
	stack := []int{first}
	count := 0
	w.position[first] = count
	ordered[first] = w.byRank(first)
	for len(stack) > 0 {
		i := stack[len(stack)-1]
		if next[i] == len(ordered[i]) {
			stack = stack[:len(stack)-1]
			continue
		}
		j := ordered[i][next[i]]
		next[i]++
		switch {
		case j == w.parent[i]:
		case w.position[j] < 0:
			count++
			w.position[j], w.parent[j] = count, i
			w.children[i] = append(w.children[i], j)
			ordered[j] = w.byRank(j)
			stack = append(stack, j)
		case w.position[j] < w.position[i]: // a ring bond, met from its later atom
			w.closures[i] = append(w.closures[i], j)
			w.closures[j] = append(w.closures[j], i)
		}
	}
	w.shortBranchesFirst()
}

// byRank returns the neighbours of atom i that are written, by rank.
func (w *writer) byRank(i int) []int {
	var list []int
	for _, j := range w.m.neighbours[i] {
		if w.v.node[j] >= 0 {
			list = append(list, j)
		}
	}
	slices.SortFunc(list, func(a, b int) int { return w.rank[w.v.node[a]] - w.rank[w.v.node[b]] })
	return list
}

// shortBranchesFirst orders the children of each atom by the size of what
// hangs on them, so that the longest is the chain that goes on, and renumbers
// the positions.
func (w *writer) shortBranchesFirst() {
	order := slices.Clone(w.v.atoms)
	slices.SortFunc(order, func(a, b int) int { return w.position[b] - w.position[a] })
	size := w.size
	for _, i := range order { // children before their parents
		size[i]++
		if p := w.parent[i]; p >= 0 {
			size[p] += size[i]
		}
	}
	for _, i := range order {
		slices.SortStableFunc(w.children[i], func(a, b int) int { return size[a] - size[b] })
	}
	count := 0
	stack := []int{w.v.atoms[w.start]}
	for len(stack) > 0 {
		i := stack[len(stack)-1]
		stack = stack[:len(stack)-1]
		w.position[i] = count
		count++
		for _, j := range slices.Backward(w.children[i]) {
			stack = append(stack, j)
		}
	}
	for _, i := range w.v.atoms {
		slices.SortFunc(w.closures[i], func(a, b int) int { return w.position[a] - w.position[b] })
	}
}
