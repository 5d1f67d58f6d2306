package molecule

import (
	"fmt"
	"strings"

	"torsieve/internal/element"
)

// NumAtoms returns the number of atoms, hydrogens included.
func (m *Molecule) NumAtoms() int { return len(m.atoms) }

// Atoms returns the atoms in order.
func (m *Molecule) Atoms() []Atom { return m.atoms }

// Atom returns atom i.
func (m *Molecule) Atom(i int) Atom { return m.atoms[i] }

// Bonds returns the bonds in order.
func (m *Molecule) Bonds() []Bond { return m.bonds }

// Bond returns bond k.
func (m *Molecule) Bond(k int) Bond { return m.bonds[k] }

// Neighbours returns the atoms bonded to atom i, in the order of the bonds.
func (m *Molecule) Neighbours(i int) []int { return m.neighbours[i] }

// NeighbourBonds returns the bonds of atom i, parallel to Neighbours.
func (m *Molecule) NeighbourBonds(i int) []int { return m.neighbourBonds[i] }

// BondBetween returns the bond that joins i and j, if there is one.
func (m *Molecule) BondBetween(i, j int) (k int, ok bool) { return m.bondBetween(i, j) }

// Charge returns the sum of the formal charges, e.
func (m *Molecule) Charge() int {
	sum := 0
	for _, a := range m.atoms {
		sum += a.Charge
	}
	return sum
}

// HeavyAtoms returns the number of atoms that are not hydrogen of any isotope.
func (m *Molecule) HeavyAtoms() int {
	count := 0
	for _, a := range m.atoms {
		if a.Number > 1 {
			count++
		}
	}
	return count
}

// Electrons returns the number of electrons.
func (m *Molecule) Electrons() int {
	sum := -m.Charge()
	for _, a := range m.atoms {
		sum += a.Number
	}
	return sum
}

// Numbers returns the atomic numbers, in a slice of the caller's own.
func (m *Molecule) Numbers() []int {
	z := make([]int, len(m.atoms))
	for i, a := range m.atoms {
		z[i] = a.Number
	}
	return z
}

// Fragments returns the connected parts, each as ascending atom indices.
func (m *Molecule) Fragments() [][]int { return m.fragments }

// Multiplicity returns the spin multiplicity: high spin for the unpaired
// electrons that the graph shows, else the lowest that the number of electrons
// allows, 1 or 2.
func (m *Molecule) Multiplicity() int {
	unpaired := 0
	for _, a := range m.atoms {
		unpaired += a.Radical
	}
	if odd := m.Electrons() & 1; unpaired&1 != odd {
		unpaired = odd
	}
	return unpaired + 1
}

// Formula returns the molecular formula in Hill's order (E. A. Hill, J. Am.
// Chem. Soc. 1900, 22, 478): C, H, then the alphabet. Isotopes count as their
// element, charges are not shown.
func (m *Molecule) Formula() string {
	var counts [element.MaxZ + 1]int
	for _, a := range m.atoms {
		counts[a.Number]++
	}
	var b strings.Builder
	add := func(z int) {
		if n := counts[z]; n > 0 {
			b.WriteString(element.Symbol(z))
			if n > 1 {
				fmt.Fprint(&b, n)
			}
			counts[z] = 0
		}
	}
	if counts[6] > 0 {
		add(6)
		add(1)
	}
	for _, z := range alphabetical {
		add(z)
	}
	return b.String()
}

// Rings returns the relevant rings, atoms in ring order, smallest first.
func (m *Molecule) Rings() [][]int { return m.rings }

// RingCount returns the number of independent rings: bonds - atoms + fragments.
func (m *Molecule) RingCount() int { return len(m.bonds) - len(m.atoms) + len(m.fragments) }

// RingSystems returns the atoms of each fused, spiro or bridged system.
func (m *Molecule) RingSystems() [][]int { return m.systems }

// InRing says whether an atom is member of a ring.
func (m *Molecule) InRing(atom int) bool { return m.atomInRing[atom] }

// BondInRing says whether bond k is part of a ring.
func (m *Molecule) BondInRing(k int) bool { return m.inRing[k] }

// SmallestRing returns the size of the smallest ring through a bond, 0 if none.
func (m *Molecule) SmallestRing(bond int) int { return m.smallest[bond] }
