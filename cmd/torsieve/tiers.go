package main

import (
	"context"
	"fmt"
	"math"
	"slices"
	"strings"

	"torsieve/forcefield"
	"torsieve/hf"
	"torsieve/hf/basis"
	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/screen"
	"torsieve/screen/ensemble"
	"torsieve/semiempirical"
)

// The tiers, lowest first. This file is the one place that names all of them.
const (
	tierForceField    = "forcefield"
	tierSemiempirical = "semiempirical"
	tierHF            = "hf"
)

var tierNames = []string{tierForceField, tierSemiempirical, tierHF}

// tierOptions are what the tiers are built from.
type tierOptions struct {
	finalOptions
	Accuracy float64 // factor on the thresholds of self-consistency
	Solvent  string  // of the semi-empirical tier; empty: the gas phase
	Memory   int64   // bytes of the whole run
	Steep    bool    // the semi-empirical gradients must be good enough for vibrations
}

// tiersThrough returns the tiers of a run, up to the one named.
func tiersThrough(last string, o tierOptions) ([]screen.Tier, error) {
	var tiers []screen.Tier
	for _, name := range tierNames[:slices.Index(tierNames, last)+1] {
		t, err := newTier(name, o)
		if err != nil {
			return nil, err
		}
		tiers = append(tiers, t)
	}
	return tiers, nil
}

// newTier returns one tier.
func newTier(name string, o tierOptions) (screen.Tier, error) {
	if !(o.Accuracy > 0) || math.IsInf(o.Accuracy, 0) {
		return nil, nothing(fmt.Errorf("accuracy: want more than 0, have %g", o.Accuracy), "")
	}
	switch name {
	case tierForceField:
		return forceField{}, nil
	case tierSemiempirical:
		accuracy := o.Accuracy
		if o.Steep {
			accuracy = min(accuracy, steepAccuracy)
		}
		return semiempiricalTier{semiempirical.Options{Accuracy: accuracy, Solvent: o.Solvent}}, nil
	case tierHF:
		return newHFTier(o)
	}
	panic("no tier is named " + name)
}

// steepAccuracy lets a relaxation reach the gradient that vibrations start from.
const steepAccuracy = 0.1

// settingsOf writes a method and its options down, field by field.
func settingsOf(method string, options any) string { return fmt.Sprintf("%s %+v", method, options) }

// forceField is tier 1.
type forceField struct{}

func (forceField) Name() string   { return tierForceField }
func (forceField) Method() string { return "UFF with organic corrections and EEQ charges" }

func (f forceField) Settings() string { return settingsOf(f.Method(), forcefield.Defaults()) }

func (forceField) Surface(m *molecule.Molecule) (screen.Surface, error) {
	s, err := forcefield.New(m, forcefield.Defaults())
	if err != nil {
		return nil, err
	}
	return &chargedField{Surface: s}, nil
}

// chargedField is a force field that takes its charges from the first geometry
// that it is given, and again from the first one after Reset: a relaxation then
// has one surface, and a single point depends on its geometry alone.
type chargedField struct {
	*forcefield.Surface
	charged bool
}

var _ screen.Sloped = (*chargedField)(nil)

func (f *chargedField) Energy(ctx context.Context, x []float64) (molecule.Point, error) {
	if err := f.charge(x); err != nil {
		return molecule.Point{}, err
	}
	return f.Surface.Energy(ctx, x)
}

func (f *chargedField) Gradient(ctx context.Context, grad, x []float64) (molecule.Point, error) {
	if err := f.charge(x); err != nil {
		return molecule.Point{}, err
	}
	return f.Surface.Gradient(ctx, grad, x)
}

func (f *chargedField) Reset() { f.charged = false }

func (f *chargedField) charge(x []float64) error {
	if f.charged {
		return nil
	}
	f.charged = true
	return f.FreezeCharges(x)
}

func (forceField) Memory(m *molecule.Molecule) int64 {
	n := int64(m.NumAtoms())
	return 64*n*n + 1<<20
}

// Scatter is that of relaxed shapes: the median over molecules is 0.55 kcal/mol.
// The fit is our own, to the 150 molecules of the set named at scatter that are
// shared, each conformer relaxed by `relax --tier forcefield`.
func (forceField) Scatter(m *molecule.Molecule) (ensemble.Scatter, bool) {
	return scatter(m, 0.41, -0.07, 1.71, 1.06), true
}

// semiempiricalTier is tier 2.
type semiempiricalTier struct{ options semiempirical.Options }

var _ screen.Solvated = semiempiricalTier{}

func (semiempiricalTier) Name() string { return tierSemiempirical }

func (t semiempiricalTier) Method() string {
	if t.options.Solvent == "" {
		return "GFN2-xTB"
	}
	return "GFN2-xTB with ALPB " + t.options.Solvent
}

func (t semiempiricalTier) Surface(m *molecule.Molecule) (screen.Surface, error) {
	return semiempirical.New(m.Numbers(), m.Charge(), m.Multiplicity(), t.options)
}

func (t semiempiricalTier) Settings() string { return settingsOf(t.Method(), t.options) }

func (t semiempiricalTier) Solvent() string { return t.options.Solvent }

func (t semiempiricalTier) Gas(m *molecule.Molecule) (screen.Surface, error) {
	t.options.Solvent = ""
	return t.Surface(m)
}

// Memory counts some forty matrices over the valence basis, and as many again
// for the surface without the solvent.
func (t semiempiricalTier) Memory(m *molecule.Molecule) int64 {
	var n int64
	for _, z := range m.Numbers() {
		switch {
		case z <= 2:
			n++
		case z <= 10:
			n += 4
		default:
			n += 9
		}
	}
	surfaces := int64(1)
	if t.options.Solvent != "" {
		surfaces = 2
	}
	return surfaces * (40*8*n*n + 4<<20)
}

func (semiempiricalTier) Scatter(m *molecule.Molecule) (ensemble.Scatter, bool) {
	return scatter(m, 0.30, 0.43, 1.61, 1.2), true
}

// hfTier is tier 3.
type hfTier struct {
	options hf.Options
	basis   string
}

func newHFTier(o tierOptions) (screen.Tier, error) {
	t := hfTier{options: hf.Options{Method: o.Final, Basis: o.Basis, TwoElectron: o.TwoElectron, Accuracy: o.Accuracy, MemoryBytes: surfaceBytes(o.Memory)}}
	if o.Final != "hf-3c" && o.Memory > 0 {
		t.options.MemoryBytes = min(o.Memory/2, 8<<30) // fitted integrals that do not fit cost several times as much
	}
	// A helium atom shows what is wrong with method and basis.
	if _, err := hf.New([]int{2}, 0, 1, t.options); err != nil {
		return nil, nothing(err, "")
	}
	if t.basis = o.Basis; t.basis == "" {
		t.basis = "def2-SVP"
	}
	set, err := basis.Load(t.basis)
	if err != nil {
		return nil, nothing(err, "")
	}
	t.basis = set.Name
	return t, nil
}

// surfaceBytes is what one Hartree-Fock surface may hold of a run's memory. It
// does not depend on how many there are at a time, so that results do not
// either.
func surfaceBytes(memory int64) int64 {
	if memory == 0 {
		return 0 // the tier's own default
	}
	return min(memory/4, 2<<30)
}

func (hfTier) Name() string { return tierHF }

func (t hfTier) Method() string {
	switch t.options.Method {
	case "hf-3c":
		return "HF-3c"
	case "hf-d3":
		if hf.HasCounterpoise(t.basis) {
			return "HF-D3(BJ)-gCP/" + t.basis
		}
		return "HF-D3(BJ)/" + t.basis
	case "mp2", "scs-mp2", "sos-mp2":
		return strings.ToUpper(t.options.Method) + "/" + t.basis
	}
	return "HF/" + t.basis
}

func (t hfTier) Settings() string { return settingsOf(t.Method(), t.options) }

func (t hfTier) Surface(m *molecule.Molecule) (screen.Surface, error) {
	return hf.New(m.Numbers(), m.Charge(), m.Multiplicity(), t.options)
}

func (t hfTier) Memory(m *molecule.Molecule) int64 {
	bytes, err := hf.MemoryEstimate(m.Numbers(), t.options)
	if err != nil {
		return 0 // Surface says what is wrong
	}
	return bytes
}

// Scatter of the composite is taken to be that of GFN2-xTB: better on minima of
// drug-like molecules (mean deviation 0.34 against 0.41 kcal/mol), worse on
// torsion scans (0.85 against 0.67). With D3 in a double-zeta basis it is 0.7
// times that (scans: 0.44 to 0.49). Bare Hartree-Fock lacks dispersion and was
// not measured.
func (t hfTier) Scatter(m *molecule.Molecule) (ensemble.Scatter, bool) {
	switch t.options.Method {
	case "hf-3c":
		return scatter(m, 0.30, 0.43, 1.61, 1.2), true
	case "hf-d3":
		return scatter(m, 0.7*0.30, 0.43, 1.61, 1.2), true
	}
	return ensemble.Scatter{}, false
}

// scatter is s0 (heavy atoms/25)^a ((rotatable bonds+1)/6)^b in kcal/mol, with
// the degrees of freedom of its spread between molecules: a fit to the residuals
// against DLPNO-CCSD(T) of 684 molecules of Folmsbee, Hutchison, Int. J. Quantum
// Chem. 2021, e26381, doi:10.1002/qua.26381.
//
// These have ten heavy atoms and one rotatable bond at the least. What the fit
// says of smaller ones is no measurement, and less than leastScatter was seen in
// one molecule of ten only.
func scatter(m *molecule.Molecule, s0, a, b, freedom float64) ensemble.Scatter {
	heavy := math.Max(10, float64(m.HeavyAtoms()))
	rotors := math.Max(1, float64(screen.Flexibility(m)))
	kcal := math.Max(leastScatter, s0*math.Pow(heavy/25, a)*math.Pow((rotors+1)/6, b))
	return ensemble.Scatter{Scale: kcal * units.KcalPerMol, Freedom: freedom}
}

// leastScatter in kcal/mol is the tenth percentile over those molecules of the
// standard deviation of GFN2-xTB's residuals.
const leastScatter = 0.11
