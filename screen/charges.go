package screen

import (
	"torsieve/molecule"
	"torsieve/screen/generate/pattern"
)

// warnOfCharges tells what a chemist should know of the charges of the ligand,
// or of their absence, in a solvent; empty is the gas phase.
func (l *Ligand) warnOfCharges(solvent string) {
	plus, minus := separateCharges(l.Mol)
	switch {
	case solvent == "water":
		l.warnOfProtons()
	case solvent != "":
	case plus > 0 && minus > 0:
		l.warnf("zwitterion in the gas phase: it folds onto itself, and a proton may move")
	case l.Mol.Charge() != 0:
		l.warnf("charge %+d in the gas phase: charged groups fold back more than in water", l.Mol.Charge())
	}
}

// ionised are groups that are mostly charged in water near pH 7 and are often
// drawn without; common practice, not a calculation.
var ionised = []struct {
	name string
	at   *pattern.Pattern
}{
	{"a carboxylic acid", mustParse("[OX2H]-[CX3]=[OX1]")},
	{"a sulfonic acid", mustParse("[OX2H]-S(=O)=O")},
	{"an acid of phosphorus", mustParse("[OX2H]-P=O")},
	{"an aliphatic amine", mustParse("[NX3;!+;!$(N~[!#6;!#1]);!$(N-[CX3]);!$(N-[CX2]);!$(N-c)]")},
	{"an amidine or guanidine", mustParse("[NX2;!$(N-[!#6;!#1]);!$(N-[CX3]);!$(N-c)]=[CX3]-[NX3;!$(N-[CX3]=O)]")},
}

func mustParse(text string) *pattern.Pattern {
	p, err := pattern.Parse(text)
	if err != nil {
		panic(err) // a constant of this file
	}
	return p
}

// warnOfProtons names groups that are drawn neutral where water ionises them.
func (l *Ligand) warnOfProtons() {
	for _, group := range ionised {
		for i := range l.Mol.Atoms() {
			if group.at.StartsAt(l.Mol, i) {
				l.warnf("%s is drawn neutral in water, where most are charged near pH 7: draw the form that you mean (atom %s)",
					group.name, label(l.Mol, i))
				break
			}
		}
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
