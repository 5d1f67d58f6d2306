package molecule

import "torsieve/internal/element"

// A draft is a molecule on its way through Build.
type draft struct {
	atoms        []Atom
	hydrogens    []int // to add, FillHydrogens as long as not known
	bonds        []Bond
	incident     [][]int // bonds of each atom
	inputAtoms   int
	firstH       []int  // index of the first added hydrogen of each input atom, -1 without
	writtenAtoms []bool // written as aromatic
	writtenBonds []bool
	centres      []statedCentre
	doubles      []statedDouble
	warnings     []string
}

func newDraft(b *Builder) *draft {
	n := len(b.atoms)
	d := &draft{
		atoms:        make([]Atom, n),
		hydrogens:    make([]int, n),
		bonds:        append([]Bond(nil), b.bonds...),
		incident:     make([][]int, n),
		inputAtoms:   n,
		firstH:       make([]int, n),
		writtenAtoms: make([]bool, n),
		writtenBonds: make([]bool, len(b.bonds)),
		centres:      b.centres,
		doubles:      b.doubles,
	}
	for i, a := range b.atoms {
		d.atoms[i] = Atom{Number: a.Number, Charge: a.Charge, Isotope: a.Isotope, Radical: a.Radical, Class: a.Class}
		d.hydrogens[i] = a.Hydrogens
		d.writtenAtoms[i] = a.Aromatic
		d.firstH[i] = -1
	}
	for k, bond := range d.bonds {
		d.incident[bond.A] = append(d.incident[bond.A], k)
		d.incident[bond.B] = append(d.incident[bond.B], k)
	}
	return d
}

// maxCharge is the largest formal charge that is taken for meant, as in the
// SMILES grammar.
const maxCharge = 15

func (d *draft) checkAtoms() error {
	if len(d.atoms) == 0 {
		return &BuildError{Atom: -1, Msg: "there are no atoms"}
	}
	for i, a := range d.atoms {
		if a.Number < 1 || a.Number > element.MaxZ {
			return atomError(i, "has no element: atomic number %d", a.Number)
		}
		if a.Charge > min(a.Number, maxCharge) || a.Charge < -maxCharge {
			return atomError(i, "(%s) has charge %+d, which is not possible", elementName(a.Number), a.Charge)
		}
	}
	return nil
}

func (d *draft) other(k, i int) int { return d.bonds[k].A + d.bonds[k].B - i }

// sigma returns the sum of bond orders at i with aromatic bonds counted once.
func (d *draft) sigma(i int) int {
	sum := 0
	for _, k := range d.incident[i] {
		if o := d.bonds[k].Order; o == AromaticOrder {
			sum++
		} else {
			sum += o
		}
	}
	return sum
}

// normalise brings two ways of drawing one electron structure to one form:
// nitrogen beyond its octet (nitro, azide, N-oxide) is drawn with charges, and
// X+-O- with X of P, S, Se, Te, Cl, Br, I with a double bond.
func (d *draft) normalise() {
	for i := range d.atoms {
		a := &d.atoms[i]
		switch a.Number {
		case 7:
			if a.Charge == 0 && d.sigma(i) >= 4 {
				d.separateCharge(i)
			}
		case 15, 16, 34, 52, 17, 35, 53:
			d.joinCharges(i)
		}
	}
}

func (d *draft) separateCharge(i int) {
	for _, wanted := range [...]int{8, 7} {
		for _, k := range d.incident[i] {
			j := d.other(k, i)
			o := &d.atoms[j]
			order := d.bonds[k].Order
			if o.Number != wanted || o.Charge != 0 || order < 2 || order > 3 {
				continue
			}
			if len(d.incident[j]) > 1 || d.hydrogens[j] > 0 || wanted == 7 && order == 2 {
				continue
			}
			d.bonds[k].Order--
			d.atoms[i].Charge++
			o.Charge--
			return
		}
	}
}

func (d *draft) joinCharges(i int) {
	for _, k := range d.incident[i] {
		j := d.other(k, i)
		o := &d.atoms[j]
		if d.atoms[i].Charge <= 0 || d.atoms[i].Radical != 0 {
			return
		}
		if o.Number == 8 && o.Charge == -1 && d.bonds[k].Order == 1 && len(d.incident[j]) == 1 && d.hydrogens[j] <= 0 {
			d.bonds[k].Order = 2
			d.atoms[i].Charge--
			o.Charge++
		}
	}
}
