// Package semiempirical is the second tier: GFN2-xTB in the gas phase or with
// ALPB in a solvent, with self-consistent D4 dispersion, for any charge and
// multiplicity and the elements up to radon; energies, analytic gradients,
// charges and dipoles.
//
// Source: C. Bannwarth, S. Ehlert, S. Grimme, J. Chem. Theory Comput. 2019, 15,
// 1652, doi:10.1021/acs.jctc.8b01176; solvents: package solvent. Both spins share
// their orbitals; the energy is a free energy at the electronic temperature. What
// does not become self-consistent gets more cautious mixing and then, for a while,
// hotter electrons; an answer whose electrons could not be cooled again says so in
// its warnings.
//
// A Surface is built from atomic numbers and a charge; it knows no bonds. Units
// are bohr, hartree and the elementary charge.
package semiempirical

import (
	"fmt"

	"torsieve/internal/dispersion"
	"torsieve/semiempirical/solvent"
)

// A model is the method as a list of contributions for one molecule: what
// depends on the geometry alone, the core Hamiltonian, and what depends on the
// moments of the charge.
type model struct {
	basis       *basis
	geometry    *geometry
	cn          *coordination
	repulsion   *repulsion
	dispersion  *dispersion.D4
	hamiltonian *hamiltonian
	coulomb     *coulomb
	thirdOrder  thirdOrder
	anisotropic *anisotropic
	onsite      onsite
	solvent     *solvent.Model // nil in the gas phase
}

func newModel(numbers []int, solventName string) (*model, error) {
	b, err := newBasis(numbers)
	if err != nil {
		return nil, err
	}
	around, err := newSolvent(numbers, solventName)
	if err != nil {
		return nil, err
	}
	cn := newCoordination(b.elements)
	return &model{
		basis:       b,
		geometry:    newGeometry(b.atoms()),
		cn:          cn,
		repulsion:   newRepulsion(b.elements),
		dispersion:  dispersion.NewD4(numbers),
		hamiltonian: newHamiltonian(b, cn),
		coulomb:     newCoulomb(b),
		thirdOrder:  newThirdOrder(b),
		anisotropic: newAnisotropic(b, cn),
		onsite:      onsite{b.elements},
		solvent:     around,
	}, nil
}

// contributions are the parts that depend on the moments.
func (m *model) contributions() []contribution {
	parts := []contribution{m.coulomb, m.thirdOrder, m.anisotropic, m.onsite, d4{m.dispersion}}
	if m.solvent != nil {
		parts = append(parts, reactionField{m.solvent}, hydrogenBonds{m.solvent})
	}
	return parts
}

// update takes in a new geometry; slopes says whether a gradient will be wanted.
func (m *model) update(x []float64, contributions []contribution, slopes bool) error {
	if err := m.geometry.set(x); err != nil {
		return err
	}
	if m.solvent != nil {
		if err := m.solvent.Update(x); err != nil {
			return fmt.Errorf("semiempirical: %w", err)
		}
	}
	m.cn.update(m.geometry)
	m.hamiltonian.update(m.geometry, slopes)
	for _, c := range contributions {
		c.update(m.geometry)
	}
	return nil
}
