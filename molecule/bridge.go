package molecule

// ringBonds says of each bond whether it is part of a ring: whether it is no
// bridge. Linear in the size of the graph and without recursion.
//
// Source: R. E. Tarjan, Inf. Process. Lett. 1974, 2, 160 (bridges by low
// points of a depth-first search).
func ringBonds(n int, bonds []Bond, incident [][]int) []bool {
	inRing := make([]bool, len(bonds))
	order := make([]int, n) // from 1; 0: not visited
	low := make([]int, n)
	next := make([]int, n) // position in incident
	via := make([]int, n)  // bond by which the atom was reached
	count := 0
	var stack []int
	for root := range n {
		if order[root] > 0 {
			continue
		}
		count++
		order[root], low[root], via[root] = count, count, -1
		stack = append(stack[:0], root)
		for len(stack) > 0 {
			i := stack[len(stack)-1]
			if next[i] == len(incident[i]) {
				stack = stack[:len(stack)-1]
				if k := via[i]; k >= 0 {
					parent := bonds[k].A + bonds[k].B - i
					low[parent] = min(low[parent], low[i])
					inRing[k] = low[i] <= order[parent]
				}
				continue
			}
			k := incident[i][next[i]]
			next[i]++
			if k == via[i] {
				continue
			}
			j := bonds[k].A + bonds[k].B - i
			if order[j] > 0 {
				inRing[k] = true // a back edge
				low[i] = min(low[i], order[j])
				continue
			}
			count++
			order[j], low[j], via[j] = count, count, k
			stack = append(stack, j)
		}
	}
	return inRing
}
