package smiles

import (
	"fmt"
	"slices"

	"torsieve/molecule"
)

// stateStereo hands the chirality and the double-bond marks to the builder.
func (p *parser) stateStereo() error {
	for i := range p.atoms {
		if p.atoms[i].chirality != 0 {
			p.stateCentre(i)
		}
	}
	return p.stateDoubleBonds()
}

func (p *parser) stateCentre(i int) {
	a := &p.atoms[i]
	neighbours := slices.Clone(a.neighbours)
	switch {
	case a.hydrogens == 1 && len(neighbours) == 3:
		neighbours = slices.Insert(neighbours, a.implicit, molecule.ImplicitH)
	case a.hydrogens == 0 && len(neighbours) == 3:
		neighbours = slices.Insert(neighbours, a.implicit, molecule.LonePair)
	case a.hydrogens > 0 || len(neighbours) != 4:
		p.warnings = append(p.warnings, fmt.Sprintf("position %d: chirality mark on an atom without four neighbours: ignored", a.pos+1))
		a.ignored = true
		return
	}
	p.builder.SetCentre(i, neighbours, a.chirality)
}

// stateDoubleBonds looks at each double bond with marks at both ends.
func (p *parser) stateDoubleBonds() error {
	if len(p.bonds) == 0 {
		return nil
	}
	up := map[int][]direction{} // by atom: its marked neighbours, seen from it
	for _, d := range p.bonds {
		up[d.from] = append(up[d.from], d)
		up[d.to] = append(up[d.to], direction{d.to, d.from, -d.up})
	}
	used := map[int]bool{}
	for _, b := range p.builder.DoubleBonds() {
		left, right := up[b[0]], up[b[1]]
		for _, end := range b {
			used[end] = true
			if ds := up[end]; len(ds) == 2 && ds[0].up == ds[1].up && len(left) > 0 && len(right) > 0 {
				return p.fail(p.atoms[end].pos, "the / and \\ marks contradict each other at this end of a double bond")
			}
		}
		if len(left) > 0 && len(right) > 0 {
			p.doubles = append(p.doubles, b)
			p.builder.SetDoubleBond(b[0], b[1], left[0].to, right[0].to, left[0].up == right[0].up)
		}
	}
	for _, d := range p.bonds {
		if !used[d.from] && !used[d.to] {
			p.warnings = append(p.warnings, fmt.Sprintf("position %d: / or \\ mark away from any double bond: ignored", p.atoms[d.to].pos+1))
		}
	}
	return nil
}

// emptyMarks warns of marks that are no stereo elements of the molecule.
func (p *parser) emptyMarks(m *molecule.Molecule) []string {
	var warnings []string
	meant := map[int]bool{}
	for _, c := range m.Centres() {
		meant[c.Atom] = c.Parity != 0
	}
	for i, a := range p.atoms {
		if a.chirality != 0 && !meant[i] && !a.ignored {
			warnings = append(warnings, fmt.Sprintf("position %d: the chirality mark at atom %d means nothing here: ignored", a.pos+1, i+1))
		}
	}
	known := map[[2]int]bool{}
	for _, b := range m.StereoBonds() {
		known[[2]int{b.J, b.K}] = b.Known
	}
	for _, b := range p.doubles {
		if !known[[2]int{min(b[0], b[1]), max(b[0], b[1])}] {
			warnings = append(warnings, fmt.Sprintf("position %d: the / and \\ marks at the double bond between atoms %d and %d mean nothing here: ignored",
				p.atoms[b[0]].pos+1, b[0]+1, b[1]+1))
		}
	}
	return warnings
}
