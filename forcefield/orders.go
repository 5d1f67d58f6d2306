package forcefield

import "torsieve/molecule"

// Bond orders that are not whole numbers, or not those of the Kekule form.
const (
	aromaticOrder    = 1.5
	amideOrder       = 1.41 // the paper's, for N-methylformamide
	carboxylateOrder = 1.5
	nitroOrder       = 1.5
	guanidiniumOrder = 1.33
	amidiniumOrder   = 1.5
	oxideOrder       = 2 // terminal oxygen on sulfur or phosphorus
)

// order is a bond's order before conjugation: aromatic bonds, and groups whose
// Kekule form hides that their bonds are alike.
func (t *typing) order(b molecule.Bond) float64 {
	if b.Aromatic {
		return aromaticOrder
	}
	for _, ends := range [2][2]int{{b.A, b.B}, {b.B, b.A}} {
		o, centre := ends[0], ends[1]
		if !t.terminalOxygen(o) {
			continue
		}
		switch {
		case t.nitro(centre):
			return nitroOrder
		case t.carboxylate(centre) && t.first[o] == "O_2":
			return carboxylateOrder
		}
		switch t.m.Atom(centre).Number {
		case 15, 16:
			return oxideOrder
		}
	}
	return float64(b.Order)
}

// carboxylate reports the carbon of a deprotonated acid.
func (t *typing) carboxylate(c int) bool {
	if t.m.Atom(c).Number != 6 || t.doubleTo(c, 8) < 0 {
		return false
	}
	for _, j := range t.m.Neighbours(c) {
		if t.terminalOxygen(j) && t.m.Atom(j).Charge < 0 {
			return true
		}
	}
	return false
}
