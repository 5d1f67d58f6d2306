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
