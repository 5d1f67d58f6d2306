package sdf

import "torsieve/molecule"

// A note is a doubt about the configuration at an atom or a double bond, of
// interest only if there is one.
type note struct {
	atom, other int // other is -1 for a centre
	text        string
}

// relevant are the notes about elements that the molecule does have.
func (t *table) relevant(m *molecule.Molecule, notes []note) (texts []string) {
	for _, n := range notes {
		if n.other < 0 && hasCentre(m, n.atom) || n.other >= 0 && hasStereoBond(m, n.atom, n.other) {
			texts = append(texts, n.text)
		}
	}
	return texts
}

func hasCentre(m *molecule.Molecule, atom int) bool {
	for _, c := range m.Centres() {
		if c.Atom == atom {
			return true
		}
	}
	return false
}

func hasStereoBond(m *molecule.Molecule, i, j int) bool {
	for _, s := range m.StereoBonds() {
		if s.J == i && s.K == j || s.J == j && s.K == i {
			return true
		}
	}
	return false
}
