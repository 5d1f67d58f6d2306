package sdf

import (
	"fmt"
	"slices"

	"torsieve/internal/units"
	"torsieve/molecule"
)

// build makes the molecule and, where there are coordinates of all its atoms in
// space, X. What it adds to the record is Mol, X and Warnings.
func (t *table) build(rec *Record) error {
	b, err := t.builder(nil)
	if err != nil {
		return err
	}
	form := t.shape()
	notes := t.setStereo(b, form)
	m, warnings, err := b.Build()
	if err != nil {
		if m, warnings, err = t.buildWithPyrroles(form, err); err != nil {
			return err
		}
	}
	rec.Mol = m
	rec.Warnings = append(rec.Warnings, warnings...)
	rec.Warnings = append(rec.Warnings, t.relevant(m, notes)...)
	if form == space {
		t.keepCoordinates(rec)
	}
	return nil
}

// builder hands atoms and bonds to a Builder. pyrroles are aromatic nitrogens
// that get a hydrogen which the table does not show.
func (t *table) builder(pyrroles []int) (*molecule.Builder, error) {
	b := molecule.NewBuilder()
	sum := t.valenceSums()
	for i, a := range t.atoms {
		hydrogens, err := t.hydrogens(i, sum[i])
		if err != nil {
			return nil, err
		}
		if slices.Contains(pyrroles, i) {
			hydrogens = 1
		}
		b.AddAtom(molecule.BuilderAtom{
			Number: a.number, Charge: a.charge, Isotope: a.isotope, Radical: max(0, a.radical), Class: a.class,
			Hydrogens: hydrogens,
		})
	}
	for k, bond := range t.bonds {
		if b.HasBond(bond.a, bond.b) {
			return nil, faultf(0, "bond %d joins atoms %d and %d a second time", k+1, bond.a+1, bond.b+1)
		}
		order := bond.kind
		if order == 4 {
			order = molecule.AromaticOrder
		}
		if _, err := b.AddBond(bond.a, bond.b, order); err != nil {
			return nil, err
		}
	}
	return b, nil
}

// hydrogens says how many hydrogens atom i gets beside those of the table, its
// bond orders adding up to sum.
func (t *table) hydrogens(i, sum int) (int, error) {
	switch a := t.atoms[i]; {
	case a.valence >= 0:
		if a.valence < sum {
			return 0, faultf(0, "atom %d states valence %d and has bonds for %d", i+1, a.valence, sum)
		}
		return a.valence - sum, nil
	case a.radical < 0: // a carbene: two electrons less to bind with
		return max(0, molecule.ImpliedHydrogens(a.number, a.charge, sum)-2), nil
	}
	return molecule.FillHydrogens, nil
}

// valenceSums are sums of bond orders, an aromatic bond counted 3/2.
func (t *table) valenceSums() []int {
	twice := make([]int, len(t.atoms))
	for _, b := range t.bonds {
		order := 2 * b.kind
		if b.kind == 4 {
			order = 3
		}
		twice[b.a] += order
		twice[b.b] += order
	}
	for i := range twice {
		twice[i] /= 2
	}
	return twice
}

// keepCoordinates fills rec.X unless hydrogens had to be added, whose places are
// not known.
func (t *table) keepCoordinates(rec *Record) {
	if missing := rec.Mol.NumAtoms() - len(t.atoms); missing > 0 {
		rec.Warnings = append(rec.Warnings, fmt.Sprintf("the 3D record lacks %d hydrogens: they are added to the formula, and the coordinates are not used", missing))
		return
	}
	rec.X = make([]float64, 0, 3*len(t.atoms))
	for _, a := range t.atoms {
		for _, c := range a.x {
			rec.X = append(rec.X, c*units.Angstrom)
		}
	}
	t.compareWedges(rec)
}
