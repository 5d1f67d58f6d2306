package molecule

import "fmt"

// Subset returns some atoms as a molecule of their own, in the order given, with
// the bonds and stereo elements among them. It is an error to cut a bond: the
// atoms must be whole fragments.
func (m *Molecule) Subset(atoms []int) (*Molecule, error) {
	index := map[int]int{}
	for n, i := range atoms {
		if _, twice := index[i]; twice {
			return nil, fmt.Errorf("atom %d is chosen twice", i+1)
		}
		index[i] = n
	}
	b := NewBuilder()
	for _, i := range atoms {
		a := m.atoms[i]
		b.AddAtom(BuilderAtom{Number: a.Number, Charge: a.Charge, Isotope: a.Isotope, Radical: a.Radical, Class: a.Class, Aromatic: a.Aromatic})
		for _, j := range m.neighbours[i] {
			if _, ok := index[j]; !ok {
				return nil, fmt.Errorf("the bond between atoms %d and %d would be cut", i+1, j+1)
			}
		}
	}
	for _, bond := range m.bonds {
		i, ok := index[bond.A]
		if !ok {
			continue
		}
		if _, err := b.AddBond(i, index[bond.B], bond.Order); err != nil {
			return nil, err
		}
	}
	m.restateStereo(b, func(i int) (int, bool) { n, ok := index[i]; return n, ok })
	part, _, err := b.Build()
	return part, err
}

// restateStereo states the elements of m in a builder that numbers its atoms
// otherwise.
func (m *Molecule) restateStereo(b *Builder, index func(int) (int, bool)) {
	for _, c := range m.centres {
		i, ok := index(c.Atom)
		if !ok || c.Parity == 0 {
			continue
		}
		neighbours := make([]int, 0, 4)
		for _, j := range c.Neighbours {
			if j != LonePair {
				j, _ = index(j)
			}
			neighbours = append(neighbours, j)
		}
		b.SetCentre(i, neighbours, c.Parity)
	}
	for _, d := range m.stereoBonds {
		if j, ok := index(d.J); ok && d.Known {
			k, _ := index(d.K)
			a, _ := index(d.A)
			bb, _ := index(d.B)
			b.SetDoubleBond(j, k, a, bb, d.Cis)
		}
	}
}
