package molecule

import (
	"math/bits"
	"slices"
)

// Limits of the ring search: cycles up to the first length are looked for
// first, longer ones only as far as independent rings are still missing.
var ringSearchDepths = [...]int{8, 20, 1 << 30}

// maxRingCandidates bounds the search in large cages; what it leaves out is
// made up for by one cycle of each missing independent ring.
const maxRingCandidates = 100000

// findRings finds the relevant rings: the cycles that are no sum of shorter
// ones. They do not depend on the order of atoms as a smallest set of rings
// would. Of large rings, one stands for the family of equally long ones that
// differ by sums of shorter ones.
//
// Source: P. Vismara, Electron. J. Combin. 1997, 4, R9: breadth first search
// from each atom over lower-numbered ones, then elimination over GF(2).
func (g *graph) findRings() {
	g.smallest = make([]int, len(g.bonds))
	want := len(g.bonds) - len(g.atoms) + len(g.fragments)
	if want == 0 {
		return
	}
	s := newRingSearch(g)
	for _, depth := range ringSearchDepths {
		s.collect(depth)
		if s.independent(s.candidates) >= want || s.full {
			break
		}
	}
	g.rings, g.ringBonds = s.relevant(want)
	for k := range g.bonds {
		if g.inRing[k] {
			g.smallest[k] = s.shortestCycle(k)
		}
	}
}

type ringSearch struct {
	g          *graph
	column     []int // by bond: position in the bit sets, -1 outside rings
	words      int
	dist       []int  // of the current search, -1 where it has not been
	barred     []bool // reached, but by no shortest path through atoms below the root
	reached    []int
	candidates [][]int // cycles as atoms in ring order
	full       bool
}

func newRingSearch(g *graph) *ringSearch {
	n := len(g.atoms)
	s := &ringSearch{g: g, column: make([]int, len(g.bonds)), dist: make([]int, n), barred: make([]bool, n)}
	columns := 0
	for k := range g.bonds {
		s.column[k] = -1
		if g.inRing[k] {
			s.column[k] = columns
			columns++
		}
	}
	s.words = (columns + 63) / 64
	for i := range n {
		s.dist[i] = -1
	}
	return s
}

// collect gathers the prototypes of at most the given length.
func (s *ringSearch) collect(longest int) {
	s.candidates = s.candidates[:0]
	for root := range s.g.atoms {
		if !s.g.atomInRing[root] {
			continue
		}
		s.breadthFirst(root, longest/2)
		for _, y := range s.reached {
			s.close(y, longest)
		}
		for _, i := range s.reached {
			s.dist[i] = -1
		}
		if len(s.candidates) > maxRingCandidates {
			s.full = true
			break
		}
	}
	slices.SortStableFunc(s.candidates, func(a, b []int) int { return len(a) - len(b) })
}

// breadthFirst fills dist over ring bonds for atoms up to depth from
// the root along shortest paths through atoms below the root. Atoms with a
// shorter path through higher atoms are left out, as they must be.
func (s *ringSearch) breadthFirst(root, depth int) {
	g := s.g
	s.reached = append(s.reached[:0], root)
	s.dist[root] = 0
	for at := 0; at < len(s.reached); at++ {
		i := s.reached[at]
		if s.dist[i] == depth {
			break
		}
		for n, j := range g.neighbours[i] {
			k := g.neighbourBonds[i][n]
			if !g.inRing[k] {
				continue
			}
			allowed := !s.barred[i] && j < root
			switch {
			case s.dist[j] < 0:
				s.dist[j] = s.dist[i] + 1
				s.reached = append(s.reached, j)
				if !allowed {
					s.barred[j] = true
				}
			case s.dist[j] == s.dist[i]+1 && s.barred[j] && allowed:
				s.barred[j] = false
			}
		}
	}
	kept := s.reached[:0]
	var dropped []int
	for _, i := range s.reached {
		if s.barred[i] {
			dropped = append(dropped, i)
		} else {
			kept = append(kept, i)
		}
	}
	for _, i := range dropped {
		s.dist[i], s.barred[i] = -1, false
	}
	s.reached = kept
}

// close adds the cycles that end at y: the odd ones over an edge to an atom at
// the same distance, the even ones over two neighbours nearer to the root.
func (s *ringSearch) close(y, longest int) {
	g := s.g
	var nearer []int
	for n, z := range g.neighbours[y] {
		if !g.inRing[g.neighbourBonds[y][n]] || s.dist[z] < 0 {
			continue
		}
		switch s.dist[z] {
		case s.dist[y] - 1:
			nearer = append(nearer, z)
		case s.dist[y]:
			if z < y && 2*s.dist[y]+1 <= longest {
				s.addCycle(y, z, -1)
			}
		}
	}
	for a, p := range nearer {
		for _, q := range nearer[:a] {
			if 2*s.dist[y] <= longest {
				s.addCycle(p, q, y)
			}
		}
	}
}

// addCycle joins the paths from p and q to the root that meet only there. top is
// the atom between p and q, or -1 if they are bonded.
func (s *ringSearch) addCycle(p, q, top int) {
	for _, left := range s.paths(p) {
		for _, right := range s.paths(q) {
			if meet(left, right) {
				continue
			}
			cycle := slices.Clone(left) // p ... root
			for i := len(right) - 2; i >= 0; i-- {
				cycle = append(cycle, right[i])
			}
			if top >= 0 {
				cycle = append(cycle, top)
			}
			s.candidates = append(s.candidates, cycle)
		}
	}
}

// meet says whether two shortest paths to the root meet before it.
func meet(left, right []int) bool {
	for i := range len(left) - 1 {
		if left[i] == right[i] {
			return true
		}
	}
	return false
}

// allPathsUpTo is the length in bonds up to which all shortest paths are
// followed; of longer ones, one stands for its family.
const allPathsUpTo = 4

// paths returns the shortest paths from atom i to the root.
func (s *ringSearch) paths(i int) [][]int {
	if s.dist[i] == 0 {
		return [][]int{{i}}
	}
	var list [][]int
	for n, j := range s.g.neighbours[i] {
		if s.dist[j] != s.dist[i]-1 || !s.g.inRing[s.g.neighbourBonds[i][n]] {
			continue
		}
		for _, rest := range s.paths(j) {
			list = append(list, append([]int{i}, rest...))
		}
		if s.dist[i] > allPathsUpTo {
			break
		}
	}
	return list
}

func (s *ringSearch) bitSet(cycle []int) []uint64 {
	row := make([]uint64, s.words)
	for at, i := range cycle {
		k, _ := s.g.bondBetween(i, cycle[(at+1)%len(cycle)])
		c := s.column[k]
		row[c/64] ^= 1 << (c % 64)
	}
	return row
}

// A cycleBasis holds independent cycles in echelon form over GF(2).
type cycleBasis struct{ rows map[int][]uint64 }

// reduce subtracts the basis from row in place and returns the leading column
// of what is left, or -1 where nothing is.
func (b *cycleBasis) reduce(row []uint64) int {
	for w := range row {
		for row[w] != 0 {
			c := w*64 + bits.TrailingZeros64(row[w])
			pivot, ok := b.rows[c]
			if !ok {
				return c
			}
			for i := w; i < len(row); i++ {
				row[i] ^= pivot[i]
			}
		}
	}
	return -1
}

// independent counts the independent ones among the cycles.
func (s *ringSearch) independent(cycles [][]int) int {
	b := cycleBasis{map[int][]uint64{}}
	for _, cycle := range cycles {
		row := s.bitSet(cycle)
		if c := b.reduce(row); c >= 0 {
			b.rows[c] = row
		}
	}
	return len(b.rows)
}

// relevant keeps the candidates that are no sum of strictly shorter ones, and
// completes them where the search was cut short.
func (s *ringSearch) relevant(want int) (rings, ringBonds [][]int) {
	b := cycleBasis{map[int][]uint64{}}
	for at := 0; at < len(s.candidates) && len(b.rows) < want; {
		end := at
		for end < len(s.candidates) && len(s.candidates[end]) == len(s.candidates[at]) {
			end++
		}
		var fresh [][]uint64
		for _, cycle := range s.candidates[at:end] {
			row := s.bitSet(cycle)
			if b.reduce(row) >= 0 {
				rings = append(rings, cycle)
				fresh = append(fresh, row)
			}
		}
		for _, row := range fresh {
			if c := b.reduce(row); c >= 0 {
				b.rows[c] = row
			}
		}
		at = end
	}
	if len(b.rows) < want {
		rings = append(rings, s.fundamental(&b)...)
	}
	for _, ring := range rings {
		var ks []int
		for at, i := range ring {
			k, _ := s.g.bondBetween(i, ring[(at+1)%len(ring)])
			ks = append(ks, k)
		}
		ringBonds = append(ringBonds, ks)
	}
	return rings, ringBonds
}
