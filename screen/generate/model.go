package generate

import (
	"fmt"
	"slices"

	"torsieve/molecule"
)

// makeModel builds the fragment's own molecule.
func (f *fragment) makeModel(m *molecule.Molecule, held []handedness, bonds map[int]doubleBond) error {
	f.atoms = surroundings(m, f.core, f.outside)
	f.number = make(map[int]int, len(f.atoms))
	b := molecule.NewBuilder()
	for k, i := range f.atoms {
		f.number[i] = k
		a := m.Atom(i)
		b.AddAtom(molecule.BuilderAtom{Number: a.Number, Charge: a.Charge, Isotope: a.Isotope, Radical: a.Radical,
			Hydrogens: f.missing(m, i)})
	}
	for _, bond := range m.Bonds() {
		p, ok1 := f.number[bond.A]
		q, ok2 := f.number[bond.B]
		if !ok1 || !ok2 {
			continue
		}
		if _, err := b.AddBond(p, q, bond.Order); err != nil {
			return fmt.Errorf("fragment of atoms %v: %w", f.core, err)
		}
	}
	var err error
	if f.model, _, err = b.Build(); err != nil {
		return fmt.Errorf("fragment of atoms %v: %w", f.core, err)
	}
	f.takeStereo(held, bonds)
	return nil
}

// surroundings lists core, outside, and then what keeps the nature of the
// outer bonds: partners of multiple and aromatic bonds, and single heavy atoms.
func surroundings(m *molecule.Molecule, core, outside []int) []int {
	list := append(slices.Clone(core), outside...)
	seen := make(map[int]bool, len(list))
	for _, i := range list {
		seen[i] = true
	}
	for at := 0; at < len(list); at++ {
		i := list[at]
		for k, j := range m.Neighbours(i) {
			bond := m.Bond(m.NeighbourBonds(i)[k])
			alone := len(m.Neighbours(j)) == 1 && m.Atom(j).Number != 1
			if !seen[j] && (bond.Order > 1 || bond.Aromatic || alone) {
				seen[j] = true
				list = append(list, j)
			}
		}
	}
	return list
}

// missing counts the bonds of atom i that the model leaves out.
func (f *fragment) missing(m *molecule.Molecule, i int) int {
	count := 0
	for _, j := range m.Neighbours(i) {
		if !slices.Contains(f.atoms, j) {
			count++
		}
	}
	return count
}

// takeStereo translates the stereo elements that lie in the fragment.
func (f *fragment) takeStereo(held []handedness, bonds map[int]doubleBond) {
	for _, h := range held {
		if !slices.Contains(f.core, h.centre) {
			continue
		}
		h.centre = f.number[h.centre]
		for k, p := range h.points {
			h.points[k] = f.number[p]
		}
		f.held = append(f.held, h)
	}
	f.bonds = make(map[int]doubleBond)
	for _, d := range bonds {
		j, ok1 := f.number[d.j]
		k, ok2 := f.number[d.k]
		a, ok3 := f.number[d.a]
		b, ok4 := f.number[d.b]
		if ok1 && ok2 && ok3 && ok4 {
			bond, _ := f.model.BondBetween(j, k)
			f.bonds[bond] = doubleBond{j, k, a, b, d.cis}
		}
	}
	f.rings = flexibleRingBonds(f.model)
}

// flexibleRingBonds counts the ring bonds that are not held flat.
func flexibleRingBonds(m *molecule.Molecule) int {
	h := hybrids(m)
	count := 0
	for k := range m.Bonds() {
		if size := m.SmallestRing(k); size > 3 && !(stiffBond(m, h, k) && size <= 7) {
			count++
		}
	}
	return count
}
