package generate

import (
	"fmt"

	"torsieve/forcefield"
	"torsieve/internal/units"
)

// Options are the settings of a search. Start from Defaults. All budgets count
// starts and conformers, never seconds.
type Options struct {
	Max    int         // conformers to hand over; 250
	Seed   uint64      // of all random choices; 1
	Window float64     // hartree above the lowest conformer; 25 kcal/mol
	Start  [][]float64 // geometries to begin with besides our own, 3N, bohr

	// MirrorImages hands over both mirror images of a shape where the molecule
	// is its own mirror image: right for comparing with a shape from elsewhere,
	// wrong for an ensemble, where one of them stands for both; false.
	MirrorImages bool

	// Minima relaxes what is handed over to the minimum; true. Without it shapes
	// are relaxed only as far as removes strain: closer to shapes in crystals than
	// minima in a vacuum are, but with energies that mean little.
	Minima bool

	// EnergyScale is the energy above the lowest, in hartree, over which a
	// shape's worth falls to 1/e when places in the list are given away; 6
	// kcal/mol, about the error of the force field. A larger one spreads the list
	// over more kinds of shapes.
	EnergyScale float64

	// Field is the force field that shapes are relaxed in; forcefield.Defaults.
	Field forcefield.Options

	// Relaxations is how many structures are relaxed at most. 0: twice Max and at
	// least 100; without Minima 500 and 150 more for each rotor, at most 2000 and
	// at most 40 Max. The search ends before where nothing new is to be expected.
	Relaxations int

	// Exhaustive is the largest number of combinations of torsion states and
	// ring shapes that are all built; beyond it they are sampled; 3000.
	Exhaustive int
}

// Defaults returns the settings for an ensemble that energies will weigh.
func Defaults() Options {
	return Options{
		Max: 250, Seed: 1, Window: 25 * units.KcalPerMol, EnergyScale: 6 * units.KcalPerMol, Minima: true,
		Field: forcefield.Defaults(), Exhaustive: 3000,
	}
}

// Spread returns the settings for a list that is to hold a shape from elsewhere,
// a bound ligand say: spread wide in energy, of both hands, only so far relaxed
// as removes strain, and without charges, which in a vacuum fold a ligand onto
// itself.
func Spread() Options {
	o := Defaults()
	o.EnergyScale = 10 * units.KcalPerMol
	o.MirrorImages = true
	o.Minima = false
	o.Field.Charges = "none"
	return o
}

// Check says which setting makes no sense, if one does.
func (o Options) Check() error {
	switch {
	case o.Max < 1:
		return fmt.Errorf("generate: want at least 1 conformer, have Max %d", o.Max)
	case !(o.Window > 0):
		return fmt.Errorf("generate: want a window above 0 hartree, have %g", o.Window)
	case !(o.EnergyScale > 0):
		return fmt.Errorf("generate: want an energy scale above 0 hartree, have %g", o.EnergyScale)
	case o.Relaxations < 0 || o.Exhaustive < 0:
		return fmt.Errorf("generate: want budgets of 0 or more, have %d relaxations and %d combinations", o.Relaxations, o.Exhaustive)
	}
	return nil
}

// relaxations is the budget of minimisations for a molecule with so many rotors.
func (o Options) relaxations(rotors int) int {
	switch {
	case o.Relaxations > 0:
		return o.Relaxations
	case o.Minima:
		return max(100, 2*o.Max)
	}
	return max(100, min(500+150*rotors, 2000, 40*o.Max))
}

// fragmentField leaves electrostatics out: a fragment's charges are not those
// of the molecule.
func (o Options) fragmentField() forcefield.Options {
	f := o.Field
	f.Charges = "none"
	return f
}
