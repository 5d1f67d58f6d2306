package screen

import (
	"fmt"
	"slices"

	"torsieve/molecule"
)

// A Ligand is one structure of a run, under an id that no other has.
type Ligand struct {
	ID     string
	Stem   string // of its files; safe on every system
	Order  int    // place in the run, from 0
	Parent string // the id of the record, where this is one of its isomers
	Mol    *molecule.Molecule
	SMILES string      // canonical; the structure's identity
	Starts [][]float64 // shapes that the input gave, bohr
	Place  string      // where it was read: file, line and record

	Warnings []string
	Err      error  // why there is nothing to compute; nil for most
	Status   Status // of Err: Unreadable or Refused
}

// Name says where the ligand stands and how it is called, for a message.
func (l *Ligand) Name() string { return fmt.Sprintf("%s (%s)", l.Place, l.ID) }

// groups puts ligands with one structure together, in the order of the first of
// each. Ligands with an error stand alone. The first takes over the starts of
// those whose atoms stand in its order; the others are told that theirs were
// left out.
func groups(ligands []*Ligand) [][]*Ligand {
	var out [][]*Ligand
	place := map[string]int{}
	for _, l := range ligands {
		i, seen := place[l.SMILES]
		if l.Err != nil || !seen {
			if l.Err == nil {
				place[l.SMILES] = len(out)
			}
			out = append(out, []*Ligand{l})
			continue
		}
		first := out[i][0]
		switch {
		case len(l.Starts) == 0:
		case sameOrder(first.Mol, l.Mol):
			first.Starts = append(first.Starts, l.Starts...)
		default:
			l.warnf("its 3D coordinates were left out: the atoms of %s stand in another order", first.ID)
		}
		out[i] = append(out[i], l)
	}
	return out
}

// sameOrder says whether two drawings of one structure number its atoms alike.
func sameOrder(a, b *molecule.Molecule) bool {
	ends := func(x, y molecule.Bond) bool { return x.A == y.A && x.B == y.B }
	return slices.Equal(a.Numbers(), b.Numbers()) && slices.EqualFunc(a.Bonds(), b.Bonds(), ends)
}
