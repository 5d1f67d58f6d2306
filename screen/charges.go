package screen

import "torsieve/molecule"

// warnOfCharges tells what a chemist should know of a charge in a gas phase.
func (l *Ligand) warnOfCharges() {
	plus, minus := separateCharges(l.Mol)
	switch {
	case plus > 0 && minus > 0:
		l.warnf("zwitterion in the gas phase: it folds onto itself, and a proton may move")
	case l.Mol.Charge() != 0:
		l.warnf("charge %+d in the gas phase: charged groups fold back more than in water", l.Mol.Charge())
	}
}

// separateCharges counts charged atoms whose neighbours do not balance them, as
// those of a nitro group or an N-oxide do.
func separateCharges(m *molecule.Molecule) (plus, minus int) {
	for i, a := range m.Atoms() {
		around := a.Charge
		for _, j := range m.Neighbours(i) {
			if q := m.Atom(j).Charge; q*a.Charge < 0 {
				around = 0
			}
		}
		switch {
		case around > 0:
			plus++
		case around < 0:
			minus++
		}
	}
	return plus, minus
}
