package semiempirical

import (
	"context"
	"fmt"

	"torsieve/internal/scf"
	"torsieve/internal/units"
	"torsieve/molecule"
)

// A Surface is the GFN2-xTB energy of one molecule as a function of its
// geometry. It owns its scratch memory and starts each self-consistency from
// what it knows of the last geometry, until Reset; so it serves one goroutine at
// a time, and results agree to within the accuracy whatever went before.
type Surface struct {
	options Options
	charge  float64
	model   *model
	parts   []contribution
	cycle   *cycle
	mixer   *scf.Broyden

	start     []float64 // for the next geometry
	warm      bool      // start holds converged moments
	repulsion float64   // energy at the present geometry, hartree
	energyRho []float64 // energy-weighted density
	dEdCN     []float64
}

// New prepares for a molecule with atomic numbers 1 to MaxZ and its total
// charge and multiplicity (2S+1).
//
// Errors: *Unsupported and *solvent.Unsupported for an element without
// parameters, *solvent.UnknownError for a solvent that there is not,
// *ElectronsError where charge and multiplicity do not go with the atoms, and
// what else is wrong with the options.
func New(numbers []int, charge, multiplicity int, o Options) (*Surface, error) {
	o = o.withDefaults()
	if err := o.check(); err != nil {
		return nil, err
	}
	m, err := newModel(numbers, o.Solvent)
	if err != nil {
		return nil, err
	}
	alpha, beta, err := spins(m.basis, charge, multiplicity)
	if err != nil {
		return nil, err
	}
	s := &Surface{options: o, charge: float64(charge), model: m, parts: m.contributions()}
	orbitals := newOrbitals(m.basis.functions(), alpha, beta, boltzmann*o.Temperature)
	s.cycle = newCycle(m.basis, m.geometry, m.hamiltonian, s.parts, orbitals)
	s.start = make([]float64, len(s.cycle.residual))
	s.mixer = scf.NewBroyden(len(s.start), damping)
	s.energyRho = make([]float64, len(s.cycle.density))
	s.dEdCN = make([]float64, m.basis.atoms())
	return s, nil
}

// Reset forgets the last geometry.
func (s *Surface) Reset() { s.warm = false }

// Energy returns the energy at x (3N, bohr) with its parts, the charges and
// the dipole (of an ion: about the origin). Errors: *CloseAtomsError,
// *NotFiniteError, *solvent.GeometryError, ErrSingular, ErrNotConverged, and
// ctx's.
func (s *Surface) Energy(ctx context.Context, x []float64) (molecule.Point, error) {
	return s.point(ctx, nil, x)
}

// Gradient is Energy, and writes the gradient in hartree/bohr into grad.
func (s *Surface) Gradient(ctx context.Context, grad, x []float64) (molecule.Point, error) {
	if len(grad) != len(x) {
		panic("semiempirical: gradient and coordinates differ in length")
	}
	return s.point(ctx, grad, x)
}

func (s *Surface) point(ctx context.Context, grad, x []float64) (molecule.Point, error) {
	if err := s.model.update(x, s.parts, grad != nil); err != nil {
		return molecule.Point{}, err
	}
	if err := s.cycle.orbitals.overlap(s.model.hamiltonian.s, s.warm); err != nil {
		return molecule.Point{}, err
	}
	w, err := s.converge(ctx)
	if err != nil {
		return molecule.Point{}, err
	}
	if grad != nil {
		s.gradient(grad)
	} else {
		s.repulsion = s.model.repulsion.energy(s.model.geometry, nil)
	}
	p := s.collect()
	p.Iterations = w.cycles
	p.Warnings = s.warnings(w)
	return p, nil
}

// gradient writes the gradient of the converged energy.
func (s *Surface) gradient(grad []float64) {
	m, c := s.model, s.cycle
	clear(grad)
	clear(s.dEdCN)
	s.repulsion = m.repulsion.energy(m.geometry, grad)
	m.coulomb.addGradient(m.geometry, c.out, grad)
	m.anisotropic.addGradient(c.out, grad, s.dEdCN)
	m.dispersion.AddGradient(c.out.atom, grad)
	if m.solvent != nil {
		m.solvent.AddGradient(c.out.atom, grad)
	}
	c.orbitals.energyDensity(s.energyRho, c.fock)
	m.hamiltonian.addElectronic(grad, s.dEdCN, c.density, s.energyRho, c.atoms, m.geometry)
	m.cn.addGradient(m.geometry, grad, s.dEdCN)
}

// collect makes a point of the converged cycle.
func (s *Surface) collect() molecule.Point {
	m, c := s.model, s.cycle
	constants := m.solventConstants()
	p := molecule.Point{Parts: make([]molecule.Part, 0, 4+len(s.parts)+len(constants))}
	p.Parts = append(p.Parts,
		molecule.Part{Name: "repulsion", Energy: s.repulsion},
		molecule.Part{Name: "core Hamiltonian", Energy: c.core})
	for i, part := range s.parts {
		p.Parts = append(p.Parts, molecule.Part{Name: part.name(), Energy: c.parts[i]})
	}
	p.Parts = append(p.Parts,
		molecule.Part{Name: "three-body dispersion", Energy: m.dispersion.ThreeBody()},
		molecule.Part{Name: "electronic entropy", Energy: c.orbitals.entropy})
	p.Parts = append(p.Parts, constants...)
	for _, part := range p.Parts {
		p.Energy += part.Energy
	}
	p.Charges = append(p.Charges, c.out.atom...)
	p.Dipole = make([]float64, 3)
	for a, q := range c.out.atom {
		for k := range p.Dipole {
			p.Dipole[k] += q*m.geometry.x[3*a+k] + c.out.dipole[3*a+k]
		}
	}
	return p
}

// smallGap in hartree: below it, one set of orbitals is a doubtful picture.
const smallGap = 0.5 * units.ElectronVolt

func (s *Surface) warnings(way way) []string {
	var w []string
	if gap, ok := s.cycle.orbitals.gap(); ok && gap < smallGap {
		w = append(w, fmt.Sprintf("gap between filled and empty orbitals is only %.2f eV: the energy is less reliable", gap/units.ElectronVolt))
	}
	switch usual := s.options.Temperature; {
	case way.temperature > usual:
		w = append(w, fmt.Sprintf("charges became self-consistent only with electrons at %.4g K instead of %.4g K: do not compare the energy with others", way.temperature, usual))
	case way.hottest > 0:
		w = append(w, fmt.Sprintf("charges became self-consistent at %.4g K only by way of electrons at %.4g K", usual, way.hottest))
	case way.cautious:
		w = append(w, "charges became self-consistent only with cautious mixing")
	}
	return w
}
