package semiempirical

import (
	"context"
	"errors"
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
// Errors: *Unsupported for an element without parameters, *ElectronsError
// where charge and multiplicity do not go with the atoms, and what is wrong
// with the options.
func New(numbers []int, charge, multiplicity int, o Options) (*Surface, error) {
	o = o.withDefaults()
	if err := o.check(); err != nil {
		return nil, err
	}
	m, err := newModel(numbers)
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

// Factors of the first steps of the mixing: the usual one, and one for
// molecules that do not settle with it.
const (
	damping         = 0.4
	cautiousDamping = 0.1
)

// remembered is how many changes of earlier cycles the mixing takes along to
// the next geometry. Relaxations of ligands took 8 cycles a gradient (accuracy
// 0.1) without any, 6 with 40, 5 with 80 or 160.
const remembered = 80

// warmCycles bounds the attempt from the last geometry; if it is not done then,
// what was taken along is of no use.
const warmCycles = 50

// Reset forgets the last geometry.
func (s *Surface) Reset() { s.warm = false }

// Energy returns the energy at x (3N, bohr) with its parts, the charges and
// the dipole (of an ion: about the origin). Errors: *CloseAtomsError,
// ErrSingular, ErrNotConverged, an error for coordinates that are not finite,
// and ctx's.
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
	if err := s.cycle.orbitals.overlap(s.model.hamiltonian.s); err != nil {
		return molecule.Point{}, err
	}
	it, cautious, err := s.converge(ctx)
	if err != nil {
		return molecule.Point{}, err
	}
	if grad != nil {
		s.gradient(grad)
	} else {
		s.repulsion = s.model.repulsion.energy(s.model.geometry, nil)
	}
	p := s.collect()
	p.Iterations = it
	p.Warnings = s.warnings(cautious)
	return p, nil
}

// converge makes the moments self-consistent and keeps them in start: from
// what is known of the last geometry, or from the neutral guess, or with
// cautious mixing. It returns the number of cycles of all attempts, and whether
// caution was needed.
func (s *Surface) converge(ctx context.Context) (cycles int, cautious bool, err error) {
	if s.warm {
		s.mixer.Continue(remembered)
		cycles, err = s.iterate(ctx, min(warmCycles, s.options.MaxCycles))
		if !unsettled(err) {
			return cycles, false, err
		}
	}
	for _, factor := range []float64{damping, cautiousDamping} {
		s.mixer.Restart(factor)
		s.guess()
		var more int
		more, err = s.iterate(ctx, s.options.MaxCycles)
		cycles += more
		if !unsettled(err) {
			return cycles, factor == cautiousDamping, err
		}
	}
	return cycles, true, fmt.Errorf("%w (%d cycles)", ErrNotConverged, cycles)
}

// unsettled says whether another way of mixing may help.
func unsettled(err error) bool {
	return errors.Is(err, scf.ErrNotConverged) || errors.Is(err, scf.ErrNotFinite)
}

// iterate runs the self-consistency from start, with the mixer as it is.
func (s *Surface) iterate(ctx context.Context, maxCycles int) (cycles int, err error) {
	loop := scf.Loop{
		Step:    s.cycle.step,
		Mixer:   s.mixer,
		Done:    scf.Within(1e-6*s.options.Accuracy, 2e-5*s.options.Accuracy),
		MaxIter: maxCycles,
	}
	state, it, err := loop.Solve(ctx, s.start)
	s.warm = err == nil
	if s.warm {
		copy(s.start, state)
	}
	return it.N, err
}

// guess spreads the charge evenly over the atoms and, on each, over the shells
// as its electrons are.
func (s *Surface) guess() {
	b := s.model.basis
	clear(s.start)
	each := s.charge / float64(b.atoms())
	for a := range b.atoms() {
		var electrons float64
		for i := b.atomShell[a]; i < b.atomShell[a+1]; i++ {
			electrons += b.shells[i].Occupation
		}
		for i := b.atomShell[a]; i < b.atomShell[a+1]; i++ {
			s.start[i] = each * b.shells[i].Occupation / electrons
		}
	}
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
	c.orbitals.energyDensity(s.energyRho)
	m.hamiltonian.addElectronic(grad, s.dEdCN, c.density, s.energyRho, c.atoms, m.geometry)
	m.cn.addGradient(m.geometry, grad, s.dEdCN)
}

// collect makes a point of the converged cycle.
func (s *Surface) collect() molecule.Point {
	m, c := s.model, s.cycle
	p := molecule.Point{Parts: []molecule.Part{
		{Name: "repulsion", Energy: s.repulsion},
		{Name: "core Hamiltonian", Energy: c.core},
	}}
	for i, part := range s.parts {
		p.Parts = append(p.Parts, molecule.Part{Name: part.name(), Energy: c.parts[i]})
	}
	p.Parts = append(p.Parts,
		molecule.Part{Name: "three-body dispersion", Energy: m.dispersion.ThreeBody()},
		molecule.Part{Name: "electronic entropy", Energy: c.orbitals.entropy})
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

func (s *Surface) warnings(cautious bool) []string {
	var w []string
	if gap, ok := s.cycle.orbitals.gap(); ok && gap < smallGap {
		w = append(w, fmt.Sprintf("gap between filled and empty orbitals is only %.2f eV: the energy is less reliable", gap/units.ElectronVolt))
	}
	if cautious {
		w = append(w, "charges became self-consistent only with cautious mixing")
	}
	return w
}
