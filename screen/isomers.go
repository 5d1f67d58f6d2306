package screen

import (
	"fmt"
	"slices"
	"strings"

	"torsieve/molecule"
)

// maxIsomers is the largest number of stereoisomers that a record expands to.
const maxIsomers = 8

// isomers settles unstated stereo: as many ligands as there are isomers, each
// with the record's id and "~1", "~2", ...
func (in *Intake) isomers(l *Ligand) []*Ligand {
	n := l.Mol.UnspecifiedStereo()
	if n == 0 {
		l.SMILES = l.Mol.SMILES()
		return []*Ligand{l}
	}
	what := unstated(l.Mol)
	if !in.ExpandStereo {
		return refused(l, fmt.Errorf("stereo not stated: %s", what))
	}
	isomers, err := l.Mol.Isomers(maxIsomers)
	if err != nil {
		return refused(l, fmt.Errorf("stereo not stated (%s): %w", what, err))
	}
	if len(isomers) == 1 {
		l.Mol, l.SMILES = isomers[0], isomers[0].SMILES()
		return []*Ligand{l}
	}
	out := make([]*Ligand, len(isomers))
	for k, m := range isomers {
		one := *l
		one.Mol, one.SMILES, one.Parent, one.Starts = m, m.SMILES(), l.ID, nil
		one.Order += k
		one.ID = in.unique(fmt.Sprintf("%s~%d", l.ID, k+1))
		in.ids[one.ID] = l.Place
		one.Stem = in.stems.stem(one.ID)
		one.Warnings = slices.Clone(l.Warnings)
		one.warnf("stereo not stated (%s): this is isomer %d of %d", what, k+1, len(isomers))
		for _, x := range l.Starts {
			if m.StereoMatches(x) == nil {
				one.Starts = append(one.Starts, x)
			}
		}
		out[k] = &one
	}
	in.count += len(out) - 1
	return out
}

// unstated names the stereo elements that the input does not state.
func unstated(m *molecule.Molecule) string {
	var names []string
	for _, c := range m.Centres() {
		if c.Parity == 0 {
			names = append(names, "centre "+label(m, c.Atom))
		}
	}
	for _, b := range m.StereoBonds() {
		if !b.Known {
			names = append(names, fmt.Sprintf("double bond %s=%s", label(m, b.J), label(m, b.K)))
		}
	}
	return strings.Join(names, ", ")
}
