package molecule

// delocalised marks groups that are drawn with one double bond and a charge
// but are spread evenly: carboxylate, nitro, sulfonate, phosphate and their
// sulfur analogues, amidinium, guanidinium, amidinate. Bonds that are marked
// and atoms that are marked are alike whatever the drawing says.
type delocalised struct {
	bond []bool
	atom []bool // end atoms of the group: charge and bond order are shared
	hub  []bool // atom between them
}

func (g *graph) findDelocalised() delocalised {
	d := delocalised{make([]bool, len(g.bonds)), make([]bool, len(g.atoms)), make([]bool, len(g.atoms))}
	for i := range g.atoms {
		for _, z := range [...]int{8, 16} {
			d.join(i, g.terminalGroup(i, z))
		}
		d.join(i, g.amidineGroup(i))
	}
	return d
}

func (d *delocalised) join(hub int, group []groupMember) {
	if len(group) == 0 {
		return
	}
	d.hub[hub] = true
	for _, m := range group {
		d.atom[m.atom], d.bond[m.bond] = true, true
	}
}

type groupMember struct{ atom, bond int }

// terminalGroup returns the terminal O (or S) atoms on i where at least one is
// double bonded and at least one carries a charge instead.
func (g *graph) terminalGroup(i, number int) []groupMember {
	var group []groupMember
	double, charged := false, false
	for at, j := range g.neighbours[i] {
		k := g.neighbourBonds[i][at]
		if g.atoms[j].Number != number || len(g.neighbours[j]) > 1 || g.atoms[j].Isotope != 0 {
			continue
		}
		switch {
		case g.bonds[k].Order == 2 && g.atoms[j].Charge == 0:
			double = true
		case g.bonds[k].Order == 1 && g.atoms[j].Charge == -1:
			charged = true
		default:
			continue
		}
		group = append(group, groupMember{j, k})
	}
	if !double || !charged {
		return nil
	}
	return group
}

// amidineGroup returns the nitrogens on carbon i that share a positive or a
// negative charge: =N+ with N, or =N with N-. Two nitrogens share one only if
// both bonds are in a ring or both are not.
func (g *graph) amidineGroup(i int) []groupMember {
	if g.atoms[i].Number != 6 || len(g.neighbours[i]) != 3 {
		return nil
	}
	var group []groupMember
	double := -1
	for at, j := range g.neighbours[i] {
		if k := g.neighbourBonds[i][at]; g.atoms[j].Number == 7 && g.bonds[k].Order == 2 {
			double = k
			group = append(group, groupMember{j, k})
		}
	}
	if double < 0 {
		return nil
	}
	imine := group[0].atom
	charge := g.atoms[imine].Charge
	for at, j := range g.neighbours[i] {
		k := g.neighbourBonds[i][at]
		a := g.atoms[j]
		if k == double || a.Number != 7 || g.bonds[k].Order != 1 || g.bonds[k].Aromatic != g.bonds[double].Aromatic ||
			g.valenceSum(j) != len(g.neighbours[j]) {
			continue
		}
		cation := charge == 1 && a.Charge == 0 && len(g.neighbours[j]) == 3 && len(g.neighbours[imine]) == 3
		anion := charge == 0 && a.Charge == -1 && len(g.neighbours[j]) == 2
		if cation || anion {
			group = append(group, groupMember{j, k})
		}
	}
	if len(group) < 2 {
		return nil
	}
	return group
}
