package molecule

import (
	"fmt"

	"torsieve/internal/bondorder"
	"torsieve/internal/element"
)

// Perceive makes a molecule of nuclei in space: bonds from distances, orders
// and formal charges from valence and bond lengths, stereo from the positions.
//
//   - atoms: of each, only Number and Isotope are used; every hydrogen is there.
//   - x: 3N coordinates in bohr, in the order of atoms, which the molecule keeps.
//   - charge: the total charge. multiplicity: 2S+1, or 0 where it is not known.
//
// The warnings say where the outcome looks odd. An error names two atoms that
// are too close, an atom with an impossible valence, or says that the charge
// fits no bonding.
func Perceive(atoms []Atom, x []float64, charge, multiplicity int) (*Molecule, []string, error) {
	numbers := make([]int, len(atoms))
	for i, a := range atoms {
		numbers[i] = a.Number
	}
	if err := checkElectrons(numbers, charge, multiplicity); err != nil {
		return nil, nil, err
	}
	r, err := bondorder.Assign(numbers, x, charge, multiplicity-1)
	if err != nil {
		return nil, nil, err
	}
	b := NewBuilder()
	for i, a := range atoms {
		b.AddAtom(BuilderAtom{Number: a.Number, Isotope: a.Isotope, Charge: r.Charges[i], Radical: r.Unpaired[i]})
	}
	for _, bond := range r.Bonds {
		if _, err := b.AddBond(bond.A, bond.B, bond.Order); err != nil {
			return nil, nil, err
		}
	}
	b.SetStereoFrom(x)
	m, warnings, err := b.Build()
	if err != nil {
		return nil, nil, err
	}
	return m, append(warnings, perceiveDoubts(numbers, r)...), nil
}

// checkElectrons refuses charges and multiplicities that the number of
// electrons cannot have.
func checkElectrons(numbers []int, charge, multiplicity int) error {
	electrons := -charge
	for _, z := range numbers {
		electrons += z
	}
	if electrons < 0 {
		return fmt.Errorf("charge %+d is more than all the nuclei have", charge)
	}
	if multiplicity > 0 && ((electrons-multiplicity)%2 == 0 || multiplicity > electrons+1) {
		return fmt.Errorf("%d electrons (charge %+d) cannot have multiplicity %d", electrons, charge, multiplicity)
	}
	return nil
}

// perceiveDoubts names atoms whose bonding a chemist should look at.
func perceiveDoubts(numbers []int, r bondorder.Result) (doubts []string) {
	for i, n := range r.Unpaired {
		if n > 0 {
			doubts = append(doubts, fmt.Sprintf("atom %d (%s) is left with an unpaired electron; is the charge right?", i+1, element.Symbol(numbers[i])))
		}
	}
	for i, q := range r.Charges {
		if numbers[i] == 6 && q > 0 {
			doubts = append(doubts, fmt.Sprintf("atom %d (C) carries a positive charge; is the charge right?", i+1))
		}
	}
	return doubts
}
