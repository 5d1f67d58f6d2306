package molecule

import (
	"cmp"
	"slices"
)

// A view is a molecule's graph without its plain hydrogens, as a labelled
// graph: nodes are the other atoms.
type view struct {
	labelled
	atoms []int // by node
	node  []int // by atom, -1 for plain hydrogens; of no meaning for atoms of other fragments
}

// Bond codes of a view beyond the orders 1 to 3.
const (
	codeAromatic    = 4
	codeDelocalised = 5
)

// numberNodes numbers the atoms but the plain hydrogens (-1), in each fragment
// anew, and says which fragment an atom is of.
func (g *graph) numberNodes() (node, fragment []int) {
	node, fragment = make([]int, len(g.atoms)), make([]int, len(g.atoms))
	for f, atoms := range g.fragments {
		count := 0
		for _, i := range atoms {
			fragment[i], node[i] = f, -1
			if !g.terminalH(i) {
				node[i] = count
				count++
			}
		}
	}
	return node, fragment
}

// view makes the labelled graph of fragment f, without stereo. merged treats
// delocalised groups as alike, as symmetry wants it; otherwise the drawing
// counts, as in a SMILES string.
func (g *graph) view(f int, merged bool) *view {
	v := &view{node: g.shared.node}
	for _, i := range g.fragments[f] {
		if v.node[i] >= 0 {
			v.atoms = append(v.atoms, i)
		}
	}
	g.fill(v, merged)
	return v
}

// wholeView is the view of all fragments together, merged.
func (g *graph) wholeView() *view {
	v := &view{node: make([]int, len(g.atoms))}
	for i := range g.atoms {
		v.node[i] = -1
		if !g.terminalH(i) {
			v.node[i] = len(v.atoms)
			v.atoms = append(v.atoms, i)
		}
	}
	g.fill(v, true)
	return v
}

// fill gives a view the arcs and colours of its atoms.
func (g *graph) fill(v *view, merged bool) {
	d := g.shared.delocalised
	v.arcs = make([][]arc, len(v.atoms))
	for n, i := range v.atoms {
		for at, j := range g.neighbours[i] {
			k := g.neighbourBonds[i][at]
			if v.node[j] < 0 {
				continue
			}
			code := g.bonds[k].Order
			switch {
			case merged && d.bond[k]:
				code = codeDelocalised
			case g.bonds[k].Aromatic:
				code = codeAromatic
			}
			v.arcs[n] = append(v.arcs[n], arc{v.node[j], code})
		}
	}
	v.colour = g.nodeColours(v, merged)
}

// nodeColours ranks the nodes by what they are, terminal atoms first.
func (g *graph) nodeColours(v *view, merged bool) []int {
	const properties = 8
	keys := make([][properties]int, len(v.atoms))
	d := g.shared.delocalised
	for n, i := range v.atoms {
		a := g.atoms[i]
		charge, flag := a.Charge, 0
		if merged && d.atom[i] {
			charge, flag = 0, 1
		}
		ring := 0
		if g.atomInRing[i] {
			ring = 1
		}
		aromatic := 0
		if a.Aromatic {
			aromatic = 1
		}
		keys[n] = [properties]int{len(v.arcs[n]), a.Number, aromatic, ring, g.hydrogenCount(i), a.Isotope, charge*8 + a.Radical, flag}
	}
	order := make([]int, len(keys))
	for n := range order {
		order[n] = n
	}
	compare := func(a, b int) int { return slices.Compare(keys[a][:], keys[b][:]) }
	slices.SortStableFunc(order, compare)
	colour := make([]int, len(keys))
	for at, n := range order {
		if at > 0 {
			colour[n] = colour[order[at-1]]
			if compare(order[at-1], n) != 0 {
				colour[n]++
			}
		}
	}
	return colour
}

// setStereo gives the view of fragment f the stated stereo elements in it.
func (v *view) setStereo(g *graph, f int, centres []Centre, bonds []StereoBond) {
	v.centres, v.doubles = v.centres[:0], v.doubles[:0]
	for _, c := range centres {
		if c.Parity != 0 && g.shared.fragment[c.Atom] == f {
			v.centres = append(v.centres, v.centre(c))
		}
	}
	for _, b := range bonds {
		if b.Known && g.shared.fragment[b.J] == f {
			v.doubles = append(v.doubles, v.double(g, b))
		}
	}
}

func (v *view) side(atom int) int {
	switch {
	case atom == LonePair:
		return lonePairSide
	case v.node[atom] < 0:
		return hydrogenSide
	}
	return v.node[atom]
}

func (v *view) centre(c Centre) labelledCentre {
	l := labelledCentre{node: v.node[c.Atom], parity: c.Parity}
	for i, j := range c.Neighbours {
		l.neighbours[i] = v.side(j)
	}
	return l
}

func (v *view) double(g *graph, b StereoBond) labelledDouble {
	l := labelledDouble{cis: b.Cis, ends: [2]int{v.node[b.J], v.node[b.K]}}
	for end, pair := range [2][3]int{{b.J, b.K, b.A}, {b.K, b.J, b.B}} {
		l.subs[end] = [2]int{v.side(pair[2]), lonePairSide}
		for _, j := range g.neighbours[pair[0]] {
			if j != pair[1] && j != pair[2] {
				l.subs[end][1] = v.side(j)
			}
		}
	}
	return l
}

// classes returns symmetry classes of all atoms from constitution alone, as
// dense ranks: refinement over the graph with delocalised groups merged, the
// plain hydrogens by the class of their atom.
func (g *graph) classes() []int {
	v := g.wholeView()
	cells := v.cells()
	class, order := make([]int, len(g.atoms)), make([]int, len(g.atoms))
	for i := range g.atoms {
		order[i] = i
		if n := v.node[i]; n >= 0 {
			class[i] = cells[n]
		} else {
			class[i] = len(v.atoms) + cells[v.node[g.neighbours[i][0]]]
		}
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(class[a], class[b]) })
	dense := make([]int, len(class))
	for at, i := range order[min(1, len(order)):] {
		previous := order[at]
		dense[i] = dense[previous]
		if class[i] != class[previous] {
			dense[i]++
		}
	}
	return dense
}
