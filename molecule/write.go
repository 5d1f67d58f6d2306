package molecule

import (
	"fmt"
	"slices"
	"strings"
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
