package molecule

import (
	"fmt"
	"slices"
	"strings"

	"torsieve/internal/element"
)

// SMILES returns the canonical SMILES with stereo, plain hydrogens implicit:
// the same text for the same molecule, whatever the order of its atoms. Atom
// classes are left out. Different drawings of one ion (which nitrogen of an
// amidinium has the charge) are different molecules here.
//
// Source of the notation: OpenSMILES specification 1.0 (2016), opensmiles.org.
func (m *Molecule) SMILES() string { return m.lazy.smiles() }

func (m *Molecule) writeSMILES() string {
	parts := make([]string, len(m.fragments))
	w := newWriter(m)
	for f := range m.fragments {
		parts[f] = w.fragment(f)
	}
	slices.Sort(parts)
	return strings.Join(parts, ".")
}

// A writer turns one fragment after another into text. All its indices are
// atoms of the molecule, but for rank.
type writer struct {
	m        *Molecule
	f        int // the fragment at work
	v        *view
	rank     []int // by node
	start    int   // node
	position []int // by atom: place in the text, -1 for what is not written
	parent   []int // by atom: -1 at the start
	children [][]int
	closures [][]int     // by atom: partners of ring bonds, those that close here first
	marks    map[int]int // by bond: +1 or -1 in the sense of the text
	shownH   map[int]int // by atom: the hydrogen that is written to carry a mark
	digits   map[int]int // by bond: ring number while it is open
	used     [100]bool
	next     []int   // scratch of plan, by atom
	ordered  [][]int // likewise
	size     []int   // by atom: atoms on the branch that begins there
	text     strings.Builder
}

func newWriter(m *Molecule) *writer {
	n := m.NumAtoms()
	w := &writer{
		m: m, position: make([]int, n), parent: make([]int, n),
		children: make([][]int, n), closures: make([][]int, n),
		next: make([]int, n), ordered: make([][]int, n), size: make([]int, n),
	}
	for i := range n {
		w.position[i], w.parent[i] = -1, -1
	}
	return w
}

func (w *writer) fragment(f int) string {
	w.f, w.v = f, w.m.view(f, false)
	w.v.setStereo(w.m.graph, f, w.m.centres, w.m.stereoBonds)
	w.rank = w.v.canonical().rank
	w.digits, w.used = map[int]int{}, [100]bool{}
	w.text.Reset()
	w.plan()
	w.markDoubleBonds()
	w.write(w.v.atoms[w.start])
	return w.text.String()
}

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

// write writes atom i and all that hangs on it. The depth of the stack is that
// of the branches: chains are followed in the loop.
func (w *writer) write(i int) {
	for {
		w.atom(i)
		w.ringDigits(i)
		if h, ok := w.shownH[i]; ok {
			k, _ := w.m.bondBetween(i, h)
			w.text.WriteString("(" + mark(w.marks[k]) + "[H])")
		}
		children := w.children[i]
		if len(children) == 0 {
			return
		}
		for _, j := range children[:len(children)-1] {
			w.text.WriteByte('(')
			w.bond(i, j)
			w.write(j)
			w.text.WriteByte(')')
		}
		last := children[len(children)-1]
		w.bond(i, last)
		i = last
	}
}

func mark(up int) string {
	switch up {
	case 1:
		return "/"
	case -1:
		return "\\"
	}
	return ""
}

// bond writes the symbol of the bond from i to j, in this order in the text.
func (w *writer) bond(i, j int) {
	k, _ := w.m.bondBetween(i, j)
	b := w.m.bonds[k]
	both := w.m.atoms[i].Aromatic && w.m.atoms[j].Aromatic
	switch {
	case w.marks[k] != 0:
		w.text.WriteString(mark(w.marks[k]))
	case b.Aromatic:
	case b.Order == 1 && both:
		w.text.WriteByte('-')
	case b.Order == 2:
		w.text.WriteByte('=')
	case b.Order == 3:
		w.text.WriteByte('#')
	}
}

// ringDigits writes the ring bonds of atom i. A number that is closed here is
// free for the atoms that follow.
func (w *writer) ringDigits(i int) {
	var freed []int
	for _, j := range w.closures[i] {
		k, _ := w.m.bondBetween(i, j)
		if w.position[j] < w.position[i] {
			w.digit(w.digits[k])
			freed = append(freed, w.digits[k])
			continue
		}
		number := 1
		for number < len(w.used) && w.used[number] {
			number++
		}
		if number < len(w.used) {
			w.used[number] = true
		}
		w.digits[k] = number
		w.bond(i, j)
		w.digit(number)
	}
	for _, number := range freed {
		if number < len(w.used) {
			w.used[number] = false
		}
	}
}

func (w *writer) digit(number int) {
	switch {
	case number > 99: // beyond the notation: unique, but no reader takes it
		fmt.Fprintf(&w.text, "%%(%d)", number)
	case number > 9:
		fmt.Fprintf(&w.text, "%%%d", number)
	default:
		fmt.Fprint(&w.text, number)
	}
}

// atom writes the symbol of atom i, in brackets where it needs them.
func (w *writer) atom(i int) {
	a := w.m.atoms[i]
	symbol := element.Symbol(a.Number)
	if a.Aromatic {
		symbol = strings.ToLower(symbol)
	}
	hydrogens := w.m.hydrogenCount(i)
	if _, shown := w.shownH[i]; shown {
		hydrogens--
	}
	chirality := w.chirality(i)
	if a.Charge == 0 && a.Isotope == 0 && a.Radical == 0 && chirality == "" && w.impliesHydrogens(i, hydrogens) {
		w.text.WriteString(symbol)
		return
	}
	w.text.WriteByte('[')
	if a.Isotope > 0 {
		fmt.Fprint(&w.text, a.Isotope)
	}
	w.text.WriteString(symbol)
	w.text.WriteString(chirality)
	if hydrogens > 0 {
		w.text.WriteByte('H')
	}
	if hydrogens > 1 {
		fmt.Fprint(&w.text, hydrogens)
	}
	switch {
	case a.Charge == 1:
		w.text.WriteByte('+')
	case a.Charge == -1:
		w.text.WriteByte('-')
	case a.Charge != 0:
		fmt.Fprintf(&w.text, "%+d", a.Charge)
	}
	w.text.WriteByte(']')
}

// impliesHydrogens says whether a reader gives atom i without brackets just
// these hydrogens, and in an aromatic ring the double bond that it has.
func (w *writer) impliesHydrogens(i, hydrogens int) bool {
	a := w.m.atoms[i]
	switch a.Number {
	case 5, 6, 7, 8, 9, 15, 16, 17, 35, 53:
	default:
		return false
	}
	sum, double := w.m.valenceSum(i)-hydrogens, 0
	if a.Aromatic {
		for _, k := range w.m.neighbourBonds[i] {
			if w.m.bonds[k].Aromatic && w.m.bonds[k].Order == 2 {
				double = 1
			}
		}
		sigma := sum - double
		v, ok := usualValence(a.Number, 0, sigma)
		if needs := ok && v > sigma; needs != (double == 1) {
			return false
		}
	}
	return ImpliedHydrogens(a.Number, 0, sum) == hydrogens
}

// chirality returns @ or @@ where atom i is a stated centre.
func (w *writer) chirality(i int) string {
	at := slices.IndexFunc(w.m.centres, func(c Centre) bool { return c.Atom == i && c.Parity != 0 })
	if at < 0 {
		return ""
	}
	c := w.m.centres[at]
	var order [4]int
	n := 0
	add := func(j int) {
		if n < 4 {
			order[n] = j
			n++
		}
	}
	if p := w.parent[i]; p >= 0 {
		add(p)
	}
	for _, j := range c.Neighbours { // what is implicit stands behind the parent
		if j == LonePair || w.v.node[j] < 0 {
			add(j)
		}
	}
	for _, j := range w.closures[i] {
		add(j)
	}
	for _, j := range w.children[i] {
		add(j)
	}
	if c.Parity*permutationSign(c.Neighbours, order) > 0 {
		return "@"
	}
	return "@@"
}
