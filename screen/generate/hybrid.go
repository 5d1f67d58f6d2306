package generate

import "torsieve/molecule"

// A hybrid is the arrangement of an atom's bonds.
type hybrid uint8

const (
	spherical hybrid = iota // hydrogen, a lone atom
	linear                  // sp
	trigonal                // sp2, planar conjugated nitrogen included
	tetrahedral
	other // five and more neighbours
)

// hybrids returns the arrangement of every atom.
func hybrids(m *molecule.Molecule) []hybrid {
	h := make([]hybrid, m.NumAtoms())
	for i := range h {
		h[i] = plainHybrid(m, i)
	}
	flat := append([]hybrid(nil), h...)
	for i := range h {
		if h[i] == tetrahedral && conjugates(m, i, h) {
			flat[i] = trigonal
		}
	}
	return flat
}

// plainHybrid sees an atom's own bonds only.
func plainHybrid(m *molecule.Molecule, i int) hybrid {
	neighbours := len(m.Neighbours(i))
	doubles, triple := 0, false
	for _, k := range m.NeighbourBonds(i) {
		switch m.Bond(k).Order {
		case 2:
			doubles++
		case 3:
			triple = true
		}
	}
	a := m.Atom(i)
	secondRow := a.Number >= 3 && a.Number <= 10
	switch {
	case a.Number == 1 || neighbours == 0:
		return spherical
	case neighbours > 4:
		return other
	case triple || doubles == 2 && neighbours == 2:
		return linear
	case a.Aromatic:
		return trigonal
	case doubles > 0 && (secondRow || neighbours <= 2):
		return trigonal
	case a.Number == 5 && neighbours == 3, a.Number == 6 && a.Charge == 1 && neighbours == 3:
		return trigonal
	case a.Charge == -1 && neighbours == 1 && (a.Number == 8 || a.Number == 16):
		return trigonal // carboxylate, nitro: like the other oxygen
	}
	return tetrahedral
}

// conjugates says whether a nitrogen's lone pair makes it planar: three
// neighbours, one of them with a p orbital, no strained ring.
func conjugates(m *molecule.Molecule, i int, h []hybrid) bool {
	if a := m.Atom(i); a.Number != 7 || a.Charge > 0 || len(m.Neighbours(i)) != 3 {
		return false
	}
	ringBonds := 0
	for _, k := range m.NeighbourBonds(i) {
		if m.BondInRing(k) {
			ringBonds++
		}
		if s := m.SmallestRing(k); s == 3 || s == 4 {
			return false
		}
	}
	if ringBonds == 3 {
		return false // a bridgehead: the ring decides
	}
	for _, j := range m.Neighbours(i) {
		if h[j] == trigonal && (m.Atom(j).Number == 6 || m.Atom(j).Number == 7) {
			return true
		}
	}
	return false
}
