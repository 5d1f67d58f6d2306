package molecule

// A graph is what a molecule and its stereoisomers have in common.
type graph struct {
	atoms          []Atom
	bonds          []Bond
	neighbours     [][]int
	neighbourBonds [][]int
	fragments      [][]int
	inRing         []bool  // by bond
	atomInRing     []bool  // by atom
	rings          [][]int // relevant rings, atoms in ring order
	ringBonds      [][]int // their bonds; bond k joins atoms k and k+1
	smallest       []int   // by bond: size of the smallest ring through it
	systems        [][]int
	shared         shared
}

func newGraph(atoms []Atom, bonds []Bond) *graph {
	n := len(atoms)
	g := &graph{
		atoms:          atoms,
		bonds:          bonds,
		neighbours:     make([][]int, n),
		neighbourBonds: make([][]int, n),
		atomInRing:     make([]bool, n),
	}
	for k, b := range bonds {
		g.neighbours[b.A] = append(g.neighbours[b.A], b.B)
		g.neighbours[b.B] = append(g.neighbours[b.B], b.A)
		g.neighbourBonds[b.A] = append(g.neighbourBonds[b.A], k)
		g.neighbourBonds[b.B] = append(g.neighbourBonds[b.B], k)
	}
	all := func(int) bool { return true }
	g.fragments = g.components(all)
	g.inRing = ringBonds(n, bonds, g.neighbourBonds)
	for k, b := range bonds {
		if g.inRing[k] {
			g.atomInRing[b.A], g.atomInRing[b.B] = true, true
		}
	}
	for _, part := range g.components(func(k int) bool { return g.inRing[k] }) {
		if len(part) > 1 {
			g.systems = append(g.systems, part)
		}
	}
	g.findRings()
	return g
}

// components returns the parts of the graph that the bonds chosen by use join,
// each ascending, in the order of their first atoms.
func (g *graph) components(use func(bond int) bool) [][]int {
	part := make([]int, len(g.atoms))
	for i := range part {
		part[i] = -1
	}
	count := 0
	var queue []int
	for i := range g.atoms {
		if part[i] >= 0 {
			continue
		}
		part[i] = count
		queue = append(queue[:0], i)
		for len(queue) > 0 {
			a := queue[len(queue)-1]
			queue = queue[:len(queue)-1]
			for at, j := range g.neighbours[a] {
				if part[j] < 0 && use(g.neighbourBonds[a][at]) {
					part[j] = count
					queue = append(queue, j)
				}
			}
		}
		count++
	}
	parts := make([][]int, count)
	for i, p := range part {
		parts[p] = append(parts[p], i)
	}
	return parts
}

func (g *graph) other(bond, atom int) int { return g.bonds[bond].A + g.bonds[bond].B - atom }

func (g *graph) bondBetween(i, j int) (int, bool) {
	if len(g.neighbours[j]) < len(g.neighbours[i]) {
		i, j = j, i
	}
	for at, n := range g.neighbours[i] {
		if n == j {
			return g.neighbourBonds[i][at], true
		}
	}
	return 0, false
}

// terminalH says whether atom i is a plain hydrogen on a single heavier atom:
// one that a formula with implicit hydrogens does not show.
func (g *graph) terminalH(i int) bool {
	a := g.atoms[i]
	return a.Number == 1 && a.Isotope == 0 && a.Charge == 0 && len(g.neighbours[i]) == 1 &&
		g.atoms[g.neighbours[i][0]].Number != 1
}

// hydrogenCount returns the number of terminal hydrogens on atom i.
func (g *graph) hydrogenCount(i int) int {
	count := 0
	for _, j := range g.neighbours[i] {
		if g.terminalH(j) {
			count++
		}
	}
	return count
}

// valenceSum returns the sum of the bond orders at atom i.
func (g *graph) valenceSum(i int) int {
	sum := 0
	for _, k := range g.neighbourBonds[i] {
		sum += g.bonds[k].Order
	}
	return sum
}
