package generate

import "torsieve/molecule"

// compared lists the points (as numbers within a shape) that make a shape: all
// but the hydrogens on carbon and other atoms whose names could be swapped.
func (f *fragment) compared(nameless []bool) []int {
	var list []int
	for k, i := range f.atoms[:len(f.core)+len(f.outside)] {
		inside := k < len(f.core)
		if inside && (nameless[i] || f.model.Atom(k).Number == 1 && !(polarHydrogen(f.model, k) && !f.freeHydrogen(k))) {
			continue
		}
		list = append(list, k)
	}
	return list
}

// nameless marks the atoms that turning an idle rotor puts in each other's
// places: the fluorines of CF3, the methyl groups of tert-butyl.
func nameless(m *molecule.Molecule) []bool {
	mark := make([]bool, m.NumAtoms())
	for _, r := range m.Rotors() {
		if !r.Idle {
			continue
		}
		for _, end := range [2][3]int{{r.J, r.K, r.PeriodJ}, {r.K, r.J, r.PeriodK}} {
			for _, i := range m.Neighbours(end[0]) {
				mark[i] = mark[i] || end[2] == 3 && i != end[1]
			}
		}
	}
	return mark
}

// freeHydrogen says whether hydrogen p has a twin on the same atom.
func (f *fragment) freeHydrogen(p int) bool {
	count := 0
	for _, j := range f.model.Neighbours(f.model.Neighbours(p)[0]) {
		if f.model.Atom(j).Number == 1 {
			count++
		}
	}
	return count > 1
}
