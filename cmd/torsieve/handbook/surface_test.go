package handbook

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"

	"torsieve/forcefield"
	"torsieve/hf"
	"torsieve/internal/geom"
	"torsieve/internal/relax"
	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/screen"
	"torsieve/semiempirical"
)

// A level is a tier that relaxes: a name, the rms gradient (hartree/bohr) that it
// is relaxed to, and its surface for a molecule near x.
type level struct {
	name    string
	rms     float64
	surface func(m *molecule.Molecule, x []float64) (screen.Sloped, error)
}

var (
	field = level{"force field", 2e-6, func(m *molecule.Molecule, x []float64) (screen.Sloped, error) {
		return fieldOf(m, x, forcefield.Defaults())
	}}
	uff = level{"UFF as published", 2e-6, func(m *molecule.Molecule, x []float64) (screen.Sloped, error) {
		return fieldOf(m, x, forcefield.Reference())
	}}
	gfn2 = level{"GFN2-xTB", 2e-5, func(m *molecule.Molecule, _ []float64) (screen.Sloped, error) {
		return semiempirical.New(m.Numbers(), m.Charge(), m.Multiplicity(), semiempirical.Options{Accuracy: 0.1})
	}}
)

// fieldOf gives all shapes of a molecule the charges of one.
func fieldOf(m *molecule.Molecule, x []float64, o forcefield.Options) (screen.Sloped, error) {
	s, err := forcefield.New(m, o)
	if err == nil {
		err = s.FreezeCharges(x)
	}
	return s, err
}

// hf3c returns nil for iodine, whose core potential in MINIX the tier refuses.
func hf3c(m *molecule.Molecule) (screen.Surface, error) {
	s, err := hf.New(m.Numbers(), m.Charge(), m.Multiplicity(), hf.Options{Method: "hf-3c"})
	if slices.Contains(m.Numbers(), 53) && errors.As(err, new(*hf.Unsupported)) {
		return nil, nil
	}
	return s, err
}

// A hold keeps a sum of dihedrals at an angle, each with its factor.
type hold struct {
	dihedrals []dihedral
	factors   []float64
	degrees   float64
}

// keep holds each dihedral of a shape.
func keep(s shape) []hold {
	var holds []hold
	for _, t := range s {
		holds = append(holds, hold{[]dihedral{t.dihedral}, []float64{1}, t.degrees})
	}
	return holds
}

// sum holds a plus b, difference a minus b at 0: what a mirror plane or an axis
// does.
func sum(a, b dihedral) hold        { return hold{[]dihedral{a, b}, []float64{1, 1}, 0} }
func difference(a, b dihedral) hold { return hold{[]dihedral{a, b}, []float64{1, -1}, 0} }

// stiffness of a hold, hartree/rad^2: where the surface rises by 10 kcal/mol/rad
// the angle gives way by half a degree.
const stiffness = 2

func (h hold) addTo(grad, x []float64) float64 {
	off := -h.degrees * degree
	for n, d := range h.dihedrals {
		off += h.factors[n] * d.of(x) * degree
	}
	off = math.Remainder(off, 2*math.Pi)
	for n, d := range h.dihedrals {
		geom.AddDihedral(grad, x, d[0], d[1], d[2], d[3], stiffness*off*h.factors[n])
	}
	return stiffness / 2 * off * off
}

// settle relaxes x in place under the holds to a given rms gradient and returns
// the energy without them, kcal/mol.
func settle(ctx context.Context, m *molecule.Molecule, s screen.Sloped, x []float64, holds []hold, rms float64) (float64, error) {
	slope := relax.Func(func(ctx context.Context, grad, x []float64) (float64, error) {
		p, err := s.Gradient(ctx, grad, x)
		for _, h := range holds {
			p.Energy += h.addTo(grad, x)
		}
		return p.Energy, err
	})
	set := relax.Settings{RMSGradient: rms, MaxGradient: 4 * rms, EnergyChange: 1e-6, MaxGradients: 1000, Noise: 1e-7, Numbers: m.Numbers()}
	res, err := relax.Minimise(ctx, slope, x, set)
	if err == nil {
		err = res.Status.Err()
	}
	if err != nil {
		return 0, fmt.Errorf("after %d gradients, rms %.1e: %w", res.Gradients, res.RMSGradient, err)
	}
	if len(holds) == 0 {
		return res.Energy / units.KcalPerMol, nil
	}
	p, err := s.Energy(ctx, x)
	return p.Energy / units.KcalPerMol, err
}
