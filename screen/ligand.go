package screen

import (
	"fmt"

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
// each. Ligands with an error stand alone.
func groups(ligands []*Ligand) [][]*Ligand {
	var out [][]*Ligand
	place := map[string]int{}
	for _, l := range ligands {
		if l.Err != nil {
			out = append(out, []*Ligand{l})
			continue
		}
		i, seen := place[l.SMILES]
		if !seen {
			place[l.SMILES] = len(out)
			out = append(out, []*Ligand{l})
			continue
		}
		out[i] = append(out[i], l)
	}
	return out
}
