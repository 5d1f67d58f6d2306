package screen

import (
	"errors"
	"fmt"
	"math"
	"runtime"
	"time"

	"torsieve/internal/relax"
	"torsieve/internal/thermo"
	"torsieve/internal/units"
	"torsieve/screen/generate"
	"torsieve/screen/store"
)

// Options are the settings of a run. Start from Defaults, change fields, and
// call Check once; after that nobody writes to them, and nothing else is read
// from flags, files or the environment.
type Options struct {
	Temperatures []float64 // kelvin, the first one ranks; 298.15
	Generate     generate.Options
	Relax        relax.Settings // of the tiers that relax

	// Thermal adds to the final energies the free energy of the nuclei
	// (internal/thermo), from vibrations on the last tier that relaxes; that tier
	// then relaxes further. It needs one above the force field.
	Thermal bool

	// MaxConformers caps what enters the second tier; 100. The generator's
	// order makes any prefix the best choice of its size.
	MaxConformers int
	// Window holds what is given to a tier above the second: everything up to
	// this far above the lowest, hartree. 0 means WindowFor, which grows with
	// the rotatable bonds.
	Window float64

	// Store is where finished units of work are kept and looked up; nil keeps
	// nothing. Version is the program's: results of another one are not taken.
	// Begun is for a reader of the store, RFC 3339.
	Store          *store.Store
	Version, Begun string

	Seed   uint64 // of all random choices, also of Generate's; 0
	Jobs   int    // units of work at a time; all cores
	Memory int64  // bytes that all surfaces together may hold

	Clock func() time.Time // for the times in a Result; time.Now
	Watch func(Event)      // may be nil; called from one goroutine at a time
}

// Defaults returns the options of a run that nobody changed.
func Defaults() Options {
	return Options{
		Temperatures:  []float64{298.15},
		Generate:      generate.Defaults(),
		Relax:         RelaxDefaults(),
		MaxConformers: 100,
		Jobs:          runtime.GOMAXPROCS(0),
		Memory:        4 << 30,
		Clock:         time.Now,
	}
}

// Check reports everything that is wrong with o, not only the first thing.
func (o Options) Check() error {
	var errs []error
	if len(o.Temperatures) == 0 {
		errs = append(errs, errors.New("temperature: want at least one"))
	}
	for _, t := range o.Temperatures {
		if !(t > 0) || t > maxTemperature { // the negation catches NaN too
			errs = append(errs, fmt.Errorf("temperature: want more than 0 K and at most %d K, have %g", maxTemperature, t))
		}
	}
	if o.MaxConformers < 1 {
		errs = append(errs, fmt.Errorf("max-conformers: want at least 1, have %d", o.MaxConformers))
	}
	if !(o.Window >= 0) || math.IsInf(o.Window, 0) {
		errs = append(errs, fmt.Errorf("window: want 0 kcal/mol or more, have %g", o.Window/units.KcalPerMol))
	}
	if o.Jobs < 1 {
		errs = append(errs, fmt.Errorf("jobs: want at least 1, have %d", o.Jobs))
	}
	if o.Memory < leastMemory {
		errs = append(errs, fmt.Errorf("memory: want at least %d MB, have %d bytes", leastMemory>>20, o.Memory))
	}
	if o.Clock == nil {
		errs = append(errs, errors.New("no clock"))
	}
	return errors.Join(errs...)
}

// relaxation is Relax, as far as vibrations need it where they are asked for.
func (o Options) relaxation() relax.Settings {
	set := o.Relax
	if o.Thermal {
		set.RMSGradient = min(set.RMSGradient, thermo.Stationary)
		set.MaxGradient = min(set.MaxGradient, 4*thermo.Stationary)
	}
	return set
}

const (
	maxTemperature = 10000     // kelvin; no conformer is left far below that
	leastMemory    = 256 << 20 // bytes: one mid-sized ligand at the top tier
)

// WindowFor is the energy window above the lowest conformer, in hartree, whose
// conformers go from the semi-empirical tier to the next one: 5 kcal/mol, and
// half a kcal/mol for each bond beyond three that can turn (Flexibility), but at
// most 10.
//
// Of the conformers within 3 kcal/mol of the true minimum, GFN2-xTB has 99 %
// within 2.8 kcal/mol of its own minimum for molecules with up to 3 rotatable
// bonds, 3.2 with 4 or 5, 4.0 with 6 to 8 and 9.3 with 9 and more (684
// molecules of Folmsbee, Hutchison, Int. J. Quantum Chem. 2021, e26381, doi
// 10.1002/qua.26381, with DLPNO-CCSD(T) energies).
func WindowFor(flexibility int) float64 {
	kcal := 5 + 0.5*float64(max(0, flexibility-3))
	return math.Min(kcal, 10) * units.KcalPerMol
}
