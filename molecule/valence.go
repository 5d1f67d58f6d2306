package molecule

import (
	"fmt"

	"torsieve/internal/element"
)

// valences returns the usual valences of an element with a formal charge,
// ascending, or nil where there is no rule (groups 3 to 12 and the f block).
//
// A charged atom has the valences of the neutral atom with as many electrons
// (N+ those of C, O- those of F); beyond the second period the octet may be
// exceeded in steps of two.
func valences(number, charge int) []int {
	if number <= 2 {
		if number-charge == 1 {
			return []int{1}
		}
		return []int{0}
	}
	group := element.Group(number)
	if group == 0 || group >= 3 && group <= 12 {
		return nil
	}
	electrons := group
	if group > 12 {
		electrons -= 10
	}
	electrons -= charge
	heavy := element.Period(number) > 2
	switch {
	case electrons <= 0:
		return []int{0}
	case electrons <= 4:
		return []int{electrons}
	case electrons > 8:
		return []int{0}
	case !heavy:
		return []int{8 - electrons}
	}
	var list []int
	for v := 8 - electrons; v <= electrons && v <= 7; v += 2 {
		list = append(list, v)
	}
	return list
}

// usualValence returns the smallest usual valence that is at least sum.
func usualValence(number, charge, sum int) (valence int, ok bool) {
	for _, v := range valences(number, charge) {
		if v >= sum {
			return v, true
		}
	}
	return 0, false
}

// ImpliedHydrogens returns how many hydrogens an atom gets whose input does not
// state any, where its bond orders sum to sum: up to the next usual valence.
func ImpliedHydrogens(number, charge, sum int) int {
	if g := element.Group(number); g == 17 && charge == 0 && sum > 1 {
		return 0 // the halogens have one implicit valence only
	}
	if element.IsMetal(number) {
		return 0 // bare atoms, ions and complexes, no hydrides
	}
	v, ok := usualValence(number, charge, sum)
	if !ok {
		return 0
	}
	return v - sum
}

// addHydrogens fills up valences, adds the hydrogens as atoms and states the
// unpaired electrons that are left. Bonds have Kekule orders by now.
func (d *draft) addHydrogens() error {
	for i := range d.inputAtoms {
		if err := d.settleValence(i); err != nil {
			return err
		}
	}
	for i := range d.inputAtoms {
		for range d.hydrogens[i] {
			h := len(d.atoms)
			if d.firstH[i] < 0 {
				d.firstH[i] = h
			}
			d.atoms = append(d.atoms, Atom{Number: 1})
			d.incident = append(d.incident, []int{len(d.bonds)})
			d.incident[i] = append(d.incident[i], len(d.bonds))
			d.bonds = append(d.bonds, Bond{A: i, B: h, Order: 1})
		}
	}
	return nil
}

// settleValence decides the hydrogens and unpaired electrons of atom i.
func (d *draft) settleValence(i int) error {
	a := &d.atoms[i]
	sum := d.sigma(i)
	if d.hydrogens[i] == FillHydrogens {
		d.hydrogens[i] = max(0, ImpliedHydrogens(a.Number, a.Charge, sum+a.Radical))
		if d.hydrogens[i] > 0 && (a.Number == 15 || a.Number == 16) && sum > 3-(a.Number-15) && d.allSingle(i) {
			d.warnings = append(d.warnings, fmt.Sprintf("atom %d (%s) has %d bonds and no charge: filled up with hydrogen",
				i+1, elementName(a.Number), sum))
		}
	}
	sum += d.hydrogens[i]
	list := valences(a.Number, a.Charge)
	if list == nil {
		return nil
	}
	v, ok := usualValence(a.Number, a.Charge, sum)
	if !ok {
		if element.IsMetal(a.Number) {
			return nil
		}
		return d.valenceError(i, sum, list[len(list)-1])
	}
	if a.Radical == 0 {
		a.Radical = v - sum
	}
	return nil
}

func (d *draft) allSingle(i int) bool {
	for _, k := range d.incident[i] {
		if d.bonds[k].Order != 1 {
			return false
		}
	}
	return true
}

func (d *draft) valenceError(i, sum, most int) error {
	a := d.atoms[i]
	bonds := len(d.incident[i]) + d.hydrogens[i]
	what := fmt.Sprintf("has valence %d", sum)
	if bonds == sum {
		what = fmt.Sprintf("has %s bonds (valence %d)", countWord(bonds), sum)
	}
	charge := "without charge"
	if a.Charge != 0 {
		charge = fmt.Sprintf("with charge %+d", a.Charge)
	}
	return atomError(i, "(%s) %s: at most %d fit %s", elementName(a.Number), what, most, charge)
}

func countWord(n int) string {
	words := [...]string{"no", "one", "two", "three", "four", "five", "six", "seven", "eight"}
	if n < len(words) {
		return words[n]
	}
	return fmt.Sprint(n)
}

// elementName returns the name of the elements that messages about valence can
// meet, and the symbol of the others.
func elementName(number int) string {
	switch number {
	case 1:
		return "hydrogen"
	case 5:
		return "boron"
	case 6:
		return "carbon"
	case 7:
		return "nitrogen"
	case 8:
		return "oxygen"
	case 9:
		return "fluorine"
	case 14:
		return "silicon"
	case 15:
		return "phosphorus"
	case 16:
		return "sulfur"
	case 17:
		return "chlorine"
	case 34:
		return "selenium"
	case 35:
		return "bromine"
	case 53:
		return "iodine"
	}
	return element.Symbol(number)
}
