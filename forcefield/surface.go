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
	"fmt"

	"torsieve/internal/relax"
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
	m         *molecule.Molecule
	numbers   []int
	options   Options
	skeleton  *skeleton
	apart     []int8
	uncharged *nonbonded
	bonded    []term
	open      []term   // bonded, for starting structures
	names     []string // of the atom types
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

// Types returns the name of each atom's type.
func (s *Surface) Types() []string { return s.tables.names }

// Reset does nothing: this surface remembers no geometry.
func (s *Surface) Reset() {}

func (s *Surface) check(x []float64) {
	if len(x) != 3*s.tables.m.NumAtoms() {
		panic(fmt.Sprintf("forcefield: %d coordinates for %d atoms", len(x), s.tables.m.NumAtoms()))
	}
}
