// Package hf is the third tier: Hartree-Fock single points in a Gaussian basis,
// restricted or unrestricted, and the composite method HF-3c.
//
// A Surface is made for one molecule (atomic numbers, charge, multiplicity) and
// gives energies, Mulliken charges and dipoles at any geometry. What it cannot
// compute it refuses when it is made (Unsupported), before any work.
package hf

import (
	"context"
	"fmt"
	"math"

	"torsieve/hf/basis"
	"torsieve/internal/element"
	"torsieve/internal/gauss"
	"torsieve/molecule"
)

// A Surface is the energy of one molecule. It owns its scratch memory and
// serves one goroutine at a time. Every call starts from the same guess, so
// results do not depend on the order of calls.
type Surface struct {
	numbers  []int
	nuclei   []float64 // charges of the nuclei
	charge   int
	occupied []int // orbitals of each spin; one entry: closed shell
	accuracy float64
	set      *basis.Set
	shells   []gauss.Shell
	offsets  []int
	engine   engine
	beyond   *correlation // or nil
	terms    []term
}

// A term is an energy that depends on the positions of the nuclei alone.
type term struct {
	name   string
	energy func(x []float64) float64
}

// New prepares for a molecule. Where the method, the basis, the electron count
// or the memory does not allow it the error is *Unsupported; an unknown method
// or basis name is a plain error.
func New(numbers []int, charge, multiplicity int, o Options) (*Surface, error) {
	o, set, err := o.settle()
	if err != nil {
		return nil, err
	}
	s := &Surface{numbers: numbers, charge: charge, accuracy: o.Accuracy, set: set}
	for _, z := range numbers {
		if z < 1 || z > element.MaxZ {
			return nil, &Unsupported{Reason: fmt.Sprintf("there is no element number %d", z)}
		}
		s.nuclei = append(s.nuclei, float64(z))
	}
	if s.shells, err = set.Shells(numbers); err != nil {
		return nil, &Unsupported{Reason: "Hartree-Fock: " + err.Error(), Err: err}
	}
	s.offsets = gauss.Offsets(s.shells)
	if s.occupied, err = occupy(numbers, charge, multiplicity, s.offsets[len(s.shells)]); err != nil {
		return nil, err
	}
	if s.terms, err = terms(numbers, o.Method, set.Name); err != nil {
		return nil, &Unsupported{Reason: err.Error(), Err: err}
	}
	if s.beyond, err = newCorrelation(numbers, s.occupied, o, set); err != nil {
		return nil, err
	}
	s.engine, err = s.newEngine(o)
	return s, err
}

// newEngine returns what computes the repulsion of electrons.
func (s *Surface) newEngine(o Options) (engine, error) {
	matrices := matrixBytes(s.offsets[len(s.shells)], len(s.occupied))
	var auxiliary []gauss.Shell
	least, left := matrices, o.MemoryBytes-matrices
	if o.TwoElectron == twoElectronFitted {
		var err error
		if auxiliary, err = fieldFitting(s.numbers); err != nil {
			return nil, err
		}
		pairs := gauss.PairBytes(s.shells)
		least += pairs + directBytes(s.offsets[len(s.shells)], gauss.Offsets(auxiliary)[len(auxiliary)], 1)
		left -= pairs
	}
	if s.beyond != nil {
		s.accuracy *= orbitalShare
		s.beyond.budget = left
		least = max(least, s.beyond.least(matrices, s.offsets[len(s.shells)], s.occupied[0]))
	}
	if least > o.MemoryBytes {
		return nil, &Unsupported{Reason: fmt.Sprintf("Hartree-Fock in %s needs at least %d MB for this molecule, %d MB are allowed",
			s.set.Name, least>>20+1, o.MemoryBytes>>20)}
	}
	if auxiliary != nil {
		return newFittedEngine(s.shells, auxiliary, left), nil
	}
	return newExactEngine(newFockBuilder(s.shells, left)), nil
}

// Reset forgets the state of earlier calls; there is none to forget.
func (s *Surface) Reset() {}

// A TooClose error says that two atoms sit on one another.
type TooClose struct {
	A, B     int     // atoms, from 0
	Distance float64 // bohr
}

func (e *TooClose) Error() string {
	return fmt.Sprintf("atoms %d and %d are %.3f bohr apart: they sit on one another", e.A+1, e.B+1, e.Distance)
}

// closest is the distance in bohr under which atoms count as one on another; the
// shortest bonds, to hydrogen, have 1.4.
const closest = 0.5

// repulsion returns the energy of the nuclei among themselves, or an error where
// x is not a geometry.
func (s *Surface) repulsion(x []float64) (float64, error) {
	if len(x) != 3*len(s.numbers) {
		panic("hf: coordinates for another number of atoms")
	}
	for i, v := range x {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return 0, fmt.Errorf("hf: coordinate %g of atom %d is not finite", v, i/3+1)
		}
	}
	sum := 0.0
	for a, za := range s.nuclei {
		for b, zb := range s.nuclei[:a] {
			r := math.Hypot(math.Hypot(x[3*a]-x[3*b], x[3*a+1]-x[3*b+1]), x[3*a+2]-x[3*b+2])
			if r < closest {
				return 0, &TooClose{A: b, B: a, Distance: r}
			}
			sum += za * zb / r
		}
	}
	return sum, nil
}

// Energy returns the energy at x (3N, bohr) with its parts, Mulliken charges and
// the dipole moment: of an ion about its centre of mass, which a warning says.
// Errors: *NotConverged, *TooClose, coordinates that are not finite, and ctx's.
func (s *Surface) Energy(ctx context.Context, x []float64) (molecule.Point, error) {
	repulsion, err := s.repulsion(x)
	if err != nil {
		return molecule.Point{}, err
	}
	r, err := s.solve(ctx, x, repulsion)
	if err != nil {
		return molecule.Point{}, err
	}
	f := r.field
	kinetic := inner(f.densities.total, r.one.Kinetic)
	p := molecule.Point{
		Iterations: r.iterations,
		Charges:    s.mulliken(f.densities.total, r.one.Overlap),
		Dipole:     s.dipole(f.densities.total, r.one.Dipole, x),
		Warnings:   s.doubts(r, kinetic),
		Parts: []molecule.Part{
			{Name: "nuclear repulsion", Energy: repulsion},
			{Name: "kinetic", Energy: kinetic},
			{Name: "nuclear attraction", Energy: f.parts.core - kinetic},
			{Name: "coulomb", Energy: f.parts.coulomb},
			{Name: "exchange", Energy: f.parts.exchange},
		},
	}
	if s.beyond != nil {
		s.engine.release()
		if err := s.beyond.add(ctx, &p, s, f, x); err != nil {
			return molecule.Point{}, err
		}
	}
	for _, t := range s.terms {
		p.Parts = append(p.Parts, molecule.Part{Name: t.name, Energy: t.energy(x)})
	}
	for _, part := range p.Parts {
		p.Energy += part.Energy
	}
	return p, nil
}

// A result is a converged field and what it was made from.
type result struct {
	field      *field
	one        *gauss.OneElectron
	iterations int
	doubt      string // about the solution, or ""
}

// integralCut is the size of integrals, in hartree, that are left out at
// accuracy 1.
const integralCut = 1e-10

func (s *Surface) threshold() float64 { return integralCut * min(1, max(s.accuracy, 1e-2)) }

func (s *Surface) solve(ctx context.Context, x []float64, repulsion float64) (*result, error) {
	f, one, err := s.prepare(ctx, x, repulsion)
	if err != nil {
		return nil, err
	}
	start, err := s.atoms()
	if err != nil {
		return nil, err
	}
	r := &result{field: f, one: one}
	if r.iterations, err = f.converge(ctx, s.accuracy, func() { f.guess(start) }); err != nil {
		return nil, err
	}
	more, doubt, err := f.settle(ctx, s.accuracy)
	r.iterations += more
	r.doubt = doubt
	return r, err
}

// prepare computes the integrals at x.
func (s *Surface) prepare(ctx context.Context, x []float64, repulsion float64) (*field, *gauss.OneElectron, error) {
	one := gauss.NewOneElectron(s.shells, x)
	n := s.offsets[len(s.shells)]
	orthogonal, err := newOrthogonal(one.Overlap, n)
	if err != nil {
		return nil, nil, err
	}
	core := make([]float64, n*n)
	if err := gauss.Nuclear(ctx, core, s.shells, x, x, s.nuclei); err != nil {
		return nil, nil, err
	}
	for i, t := range one.Kinetic {
		core[i] += t
	}
	if err := s.engine.place(ctx, x, s.threshold()); err != nil {
		return nil, nil, err
	}
	return newField(s.engine, orthogonal, core, repulsion, s.occupied), one, nil
}
