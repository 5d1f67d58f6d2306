// Package forcefield is tier 1: the universal force field of Rappe and
// co-workers with switchable additions for organic molecules. It makes sane
// geometries fast; its energies are too rough to rank conformers.
//
// Source: A. K. Rappe, C. J. Casewit, K. S. Colwell, W. A. Goddard III, W. M.
// Skiff, J. Am. Chem. Soc. 1992, 114, 10024, doi:10.1021/ja00051a040.
//
// Each term is a file; skeleton.go makes the terms out of atom types and bond
// orders, types.go and its neighbours find those in a molecule.
package forcefield

import (
	"context"
	"fmt"
	"math"

	"torsieve/internal/dispersion"
	"torsieve/internal/relax"
	"torsieve/internal/units"
	"torsieve/molecule"
)

// A Surface is the force field's energy of one molecule. It keeps scratch
// memory, so it serves one goroutine at a time; Clone gives another of them.
type Surface struct {
	tables    *tables // shared by clones
	terms     []term
	nonbonded *nonbonded
	soft      bool
	charges   []float64 // frozen, e; nil before FreezeCharges
	warnings  []string
	minimiser *relax.Minimiser
}

// tables are what a surface and its clones share. Nothing in them changes.
type tables struct {
	m        *molecule.Molecule
	numbers  []int
	options  Options
	skeleton *skeleton
	apart    []int8
	hard     pairs
	bonded   []term
	open     []term   // bonded, for starting structures
	names    []string // of the atom types
}

// New builds the surface of m. The error is *Unsupported where an atom has no
// type, or says that o.Charges is unknown.
//
// With o.Charges "eeq" the surface has no electrostatic term until
// FreezeCharges is called with a geometry to take the charges from.
func New(m *molecule.Molecule, o Options) (*Surface, error) {
	if o.Charges != "none" && o.Charges != "eeq" && o.Charges != "" {
		return nil, fmt.Errorf("force field: charges %q: want \"none\" or \"eeq\"", o.Charges)
	}
	t, err := perceive(m)
	if err != nil {
		return nil, err
	}
	tab := &tables{m: m, numbers: m.Numbers(), options: o, skeleton: t.skeleton(o), names: t.names}
	tab.apart = tab.skeleton.bondsApart()
	tab.bonded = tab.skeleton.bonded(o, t, false)
	tab.open = tab.skeleton.bonded(o, t, true)
	tab.uncharged = tab.skeleton.pairs(tab.apart, o.polarShare())
	s := &Surface{tables: tab, warnings: t.warnings, terms: tab.bonded, nonbonded: tab.uncharged}
	if o.SoftCore {
		s.soften()
	}
	return s, nil
}

// polarShare is what a polar hydrogen keeps of its van der Waals distance.
func (o Options) polarShare() float64 {
	if o.PolarHydrogens && o.Charges == "eeq" {
		return 0.85
	}
	return 1
}

// skeleton hands the types over, with corrected lengths where o asks for them.
func (t *typing) skeleton(o Options) *skeleton {
	var links []link
	for k, b := range t.m.Bonds() {
		l := link{i: b.A, j: b.B, order: t.orders[k]}
		if o.Corrections {
			l.length = t.length(k)
		}
		links = append(links, l)
	}
	return newSkeleton(t.types(), links)
}

// bonded returns the terms along bonds, in the order in which they are added
// up and shown. t may be nil: then nothing beyond the published terms is known.
// open is that of bends.
func (s *skeleton) bonded(o Options, t *typing, open bool) []term {
	var angles angleRule
	var scale func(int) float64
	if t != nil {
		angles = t.angles(o)
	}
	if t != nil && o.Corrections {
		scale = t.scale
	}
	terms := []term{
		s.stretches(), s.bends(angles, open), s.torsions(scale), s.inversions(o.nitrogenBarrier() * units.KcalPerMol),
	}
	if t != nil && o.Corrections {
		terms = append(terms, t.corrections(s))
	}
	return terms
}

// Clone returns a surface that shares the tables and has scratch of its own.
func (s *Surface) Clone() *Surface {
	c := *s
	c.minimiser = nil
	return &c
}

// Softened returns a clone for starting structures with clashes: with the soft
// core of Options.SoftCore, bends that open again from 0 degrees, and without
// charges.
func (s *Surface) Softened() *Surface {
	c := s.Clone()
	c.soften()
	return c
}

func (s *Surface) soften() {
	s.terms, s.nonbonded, s.soft = s.tables.open, s.tables.uncharged, true
}

// FreezeCharges computes charges at x (3N, bohr), makes symmetry-equivalent
// atoms' charges equal, and keeps them from now on: a surface has one energy
// for each geometry, with an exact gradient. Without Options.Charges "eeq" it
// does nothing.
//
// Source: electronegativity equilibration, E. Caldeweyher et al., J. Chem.
// Phys. 2019, 150, 154122.
func (s *Surface) FreezeCharges(x []float64) error {
	o, m := s.tables.options, s.tables.m
	s.check(x)
	if o.Charges != "eeq" || m.NumAtoms() == 0 {
		return nil
	}
	q := make([]float64, m.NumAtoms())
	if err := dispersion.NewEEQ(s.tables.numbers).Charges(x, float64(m.Charge()), q); err != nil {
		return fmt.Errorf("force field: charges: %w", err)
	}
	return s.SetCharges(average(q, m.Classes()))
}

// SetCharges freezes given charges, one an atom, in elementary charges; nil
// takes the electrostatic term away.
func (s *Surface) SetCharges(q []float64) error {
	if q != nil && len(q) != s.tables.m.NumAtoms() {
		panic("forcefield: charges of the wrong length")
	}
	for i, v := range q {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("force field: charge of atom %d is not finite", i+1)
		}
	}
	s.charges = append([]float64(nil), q...)
	switch {
	case s.soft: // has no charges
	case q == nil:
		s.nonbonded = s.tables.uncharged
	default:
		s.nonbonded = s.tables.withCharges(q)
	}
	return nil
}

// average replaces each value by the mean over the atoms of its class.
func average(q []float64, classes []int) []float64 {
	sum, count := make([]float64, len(q)), make([]float64, len(q))
	for i, c := range classes {
		sum[c] += q[i]
		count[c]++
	}
	out := make([]float64, len(q))
	for i, c := range classes {
		out[i] = sum[c] / count[c]
	}
	return out
}

// Types returns the name of each atom's type.
func (s *Surface) Types() []string { return s.tables.names }

// Reset does nothing: this surface remembers no geometry.
func (s *Surface) Reset() {}

// Energy returns the energy at x (3N, bohr), by terms. The error is ctx's,
// ErrCoincident or ErrNotFinite.
func (s *Surface) Energy(ctx context.Context, x []float64) (molecule.Point, error) {
	return s.point(ctx, nil, x)
}

// Gradient is Energy, and writes dE/dx in hartree/bohr into grad.
func (s *Surface) Gradient(ctx context.Context, grad, x []float64) (molecule.Point, error) {
	if len(grad) != len(x) {
		panic("forcefield: gradient of the wrong length")
	}
	return s.point(ctx, grad, x)
}

func (s *Surface) point(ctx context.Context, grad, x []float64) (molecule.Point, error) {
	p := molecule.Point{Charges: s.charges, Warnings: s.warnings, Parts: make([]molecule.Part, 0, len(s.terms)+2)}
	var err error
	p.Energy, err = s.sum(ctx, &p.Parts, grad, x)
	return p, err
}

// sum adds the terms up, and appends them to parts unless that is nil. It
// allocates nothing.
func (s *Surface) sum(ctx context.Context, parts *[]molecule.Part, grad, x []float64) (float64, error) {
	if err := ctx.Err(); err != nil {
		return 0, err
	}
	s.check(x)
	if err := separate(x); err != nil {
		return 0, err
	}
	clear(grad)
	var energy float64
	note := func(name string, e float64) {
		energy += e
		if parts != nil {
			*parts = append(*parts, molecule.Part{Name: name, Energy: e})
		}
	}
	for _, t := range s.terms {
		note(t.name(), t.addTo(grad, x))
	}
	if s.soft {
		note(vanDerWaals, s.nonbonded.addSoftTo(grad, x))
	} else {
		vdw, electrostatic := s.nonbonded.addTo(grad, x)
		note(vanDerWaals, vdw)
		if s.charges != nil {
			note("electrostatic", electrostatic)
		}
	}
	return energy, finite(energy, grad)
}

const vanDerWaals = "van der Waals"

func (s *Surface) check(x []float64) {
	if len(x) != 3*s.tables.m.NumAtoms() {
		panic(fmt.Sprintf("forcefield: %d coordinates for %d atoms", len(x), s.tables.m.NumAtoms()))
	}
}
