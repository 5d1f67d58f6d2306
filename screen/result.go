package screen

import (
	"fmt"
	"slices"
	"time"

	"torsieve/molecule"
	"torsieve/screen/ensemble"
)

// A Status says how a ligand ended. The words stand in ligands.csv.
type Status string

// The ways in which a ligand can end.
const (
	Done       Status = "done"
	Partial    Status = "partial" // an ensemble, but some conformers had no energy at a tier
	Refused    Status = "refused" // nothing was computed: the reason is in the input
	Failed     Status = "failed"  // a tier could not do what it should
	Unreadable Status = "unreadable"
	Stopped    Status = "stopped" // the run ended first
)

// A Conformer is one shape of a ligand and what the tiers found.
type Conformer struct {
	Number   int       // from 1, in the generator's order: its name in every file
	X        []float64 // bohr; as the last relaxing tier left it
	Family   int       // the generator's family of shapes
	Energies []float64 // by tier, hartree; NaN where not computed; of a tier with a solvent: with it
	Last     int       // index of the last tier that computed it
	Rank     int       // from 1 by final energy; 0: not in the ensemble
	Copies   int       // see ensemble.Shape; 0: not in the ensemble
	Why      string    // "kept", or why it went no further
	Doubts   []string  // what a tier was not sure of

	// Solvation is the free energy of solvation in hartree, from the tier that
	// has a solvent, if Solvated says that one has. Beside is what Final has
	// beside the last tier's energy: Solvation, where that tier does not model it.
	Solvation float64
	Solvated  bool
	Beside    float64

	// Thermal is what the nuclei add to the free energy, hartree, by temperature
	// of the run; nil where it was not asked for.
	Thermal []float64
}

// Final is the energy that ranks, in hartree: FinalAt the first temperature.
func (c *Conformer) Final() float64 { return c.FinalAt(0) }

// FinalAt is the energy that weighs at a temperature of the run, by index, in
// hartree: the last tier's at the geometry of the last tier that relaxes, the
// solvation that the last tier does not know itself, and, where it was asked
// for, the free energy of the nuclei.
func (c *Conformer) FinalAt(t int) float64 {
	e := c.Energies[c.Last] + c.Beside
	if c.Thermal != nil {
		e += c.Thermal[t]
	}
	return e
}

// A Result is what became of one ligand.
type Result struct {
	Ligand     *Ligand
	Mol        *molecule.Molecule // the ligand, atoms in the order of the geometries; nil if it was not read
	Status     Status
	Reason     string // of a status other than Done
	Tiers      []string
	Conformers []Conformer // in the order of their numbers
	Kept       []int       // indexes into Conformers, by rank
	Ensembles  []Weights   // one per temperature, over Kept
	Entered    []int       // conformers that each tier looked at
	Took       []time.Duration
	Warnings   []string
}

// Weights is the ensemble at one temperature, with the bars of its populations.
type Weights struct {
	ensemble.Distribution
	Bars []ensemble.Bar // nil where the tier's scatter is not known
}

// sharedWith is the result of another ligand of the group. The atoms of its
// geometries stand in the order of the first.
func (r *Result) sharedWith(l sharer) *Result {
	same := *r
	same.Ligand = l.Ligand
	how := "same structure as %s: computed once, atoms in its order"
	if l.mirrored {
		how = "enantiomer of %s: computed once, shapes mirrored"
		same.Mol = enantiomer(r.Mol)
		same.Conformers = slices.Clone(r.Conformers)
		for i := range same.Conformers {
			same.Conformers[i].X = mirrorShape(r.Conformers[i].X)
		}
	}
	same.Warnings = append(slices.Clone(l.Warnings), r.Warnings[len(r.Ligand.Warnings):]...)
	same.Warnings = append(same.Warnings, fmt.Sprintf(how, r.Ligand.ID))
	same.Took = make([]time.Duration, len(r.Took))
	return &same
}
