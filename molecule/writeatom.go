package molecule

import (
	"fmt"
	"slices"
	"strings"

	"torsieve/internal/element"
)

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
