package molecule

import (
	"fmt"
	"strings"

	"torsieve/internal/element"
)

// assignKekule gives every aromatic bond the order 1 or 2. Aromatic bonds
// outside rings become single. The atoms that need a double bond are paired by
// maximum matching; if one stays alone, there is no Kekule form.
func (d *draft) assignKekule() error {
	inRing := ringBonds(len(d.atoms), d.bonds, d.incident)
	candidates := make([][]int, len(d.atoms)) // aromatic ring bonds
	for k := range d.bonds {
		bond := &d.bonds[k]
		switch {
		case bond.Order != AromaticOrder:
		case inRing[k]:
			d.writtenBonds[k] = true
			candidates[bond.A] = append(candidates[bond.A], k)
			candidates[bond.B] = append(candidates[bond.B], k)
		default:
			bond.Order = 1
		}
	}
	needs := make([]bool, len(d.atoms))
	for i := range d.atoms {
		if len(candidates[i]) == 0 && d.writtenAtoms[i] && !d.onRing(i, inRing) {
			return atomError(i, "(%s) is written as aromatic but lies in no ring", elementName(d.atoms[i].Number))
		}
		d.writtenAtoms[i] = d.writtenAtoms[i] || len(candidates[i]) > 0
		needs[i] = d.writtenAtoms[i] && d.needsDoubleBond(i)
	}
	partners := make([][]int, len(d.atoms))
	for i, ks := range candidates {
		for _, k := range ks {
			if j := d.other(k, i); needs[i] && needs[j] {
				partners[i] = append(partners[i], j)
			}
		}
	}
	mate := maximumMatching(partners)
	for i := range d.atoms {
		if needs[i] && mate[i] < 0 {
			return d.noKekule(i, candidates)
		}
	}
	for k := range d.bonds {
		bond := &d.bonds[k]
		if bond.Order != AromaticOrder {
			continue
		}
		bond.Order = 1
		if mate[bond.A] == bond.B {
			bond.Order = 2
		}
	}
	return nil
}

func (d *draft) onRing(i int, inRing []bool) bool {
	for _, k := range d.incident[i] {
		if inRing[k] {
			return true
		}
	}
	return false
}

// needsDoubleBond says whether the single bonds and hydrogens of an aromatic
// atom leave its usual valence unfilled.
func (d *draft) needsDoubleBond(i int) bool {
	a := d.atoms[i]
	sum := d.sigma(i) + max(0, d.hydrogens[i]) + a.Radical
	v, ok := usualValence(a.Number, a.Charge, sum)
	return ok && v > sum
}

// noKekule names the aromatic system around atom i.
func (d *draft) noKekule(i int, candidates [][]int) error {
	seen := map[int]bool{i: true}
	system := []int{i}
	for at := 0; at < len(system); at++ {
		for _, k := range candidates[system[at]] {
			if j := d.other(k, system[at]); !seen[j] {
				seen[j] = true
				system = append(system, j)
			}
		}
	}
	var names []string
	for _, j := range system[:min(len(system), 12)] {
		names = append(names, fmt.Sprintf("%s%d", element.Symbol(d.atoms[j].Number), j+1))
	}
	if len(system) > len(names) {
		names = append(names, "...")
	}
	hint := ""
	for _, j := range system {
		if d.atoms[j].Number == 7 && d.atoms[j].Charge == 0 && d.hydrogens[j] <= 0 {
			hint = "; a pyrrole-type nitrogen needs its hydrogen written, [nH]"
		}
	}
	return &BuildError{Atom: i, Msg: fmt.Sprintf("the aromatic ring of %d atoms (%s) has no Kekule form: atom %d (%s) finds no partner for a double bond%s",
		len(system), strings.Join(names, " "), i+1, elementName(d.atoms[i].Number), hint)}
}
