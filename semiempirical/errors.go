package semiempirical

import (
	"errors"
	"fmt"

	periodic "torsieve/internal/element"
	"torsieve/internal/scf"
	"torsieve/internal/units"
)

// ErrNotConverged says that the charges did not become self-consistent, with
// the ordinary mixing, with a cautious one, and with hotter electrons.
var ErrNotConverged = fmt.Errorf("semiempirical: charges not self-consistent: %w", scf.ErrNotConverged)

// ErrSingular says that two basis functions are as good as equal.
var ErrSingular = errors.New("semiempirical: overlap matrix is singular: atoms too close")

// Unsupported is the error for an element without parameters.
type Unsupported struct {
	Atom int // from 0
	Z    int
}

func (e *Unsupported) Error() string {
	if e.Z >= 1 && e.Z <= periodic.MaxZ {
		return fmt.Sprintf("semiempirical: atom %d is %s: GFN2-xTB has parameters up to Rn", e.Atom+1, periodic.Symbol(e.Z))
	}
	return fmt.Sprintf("semiempirical: atom %d has atomic number %d: GFN2-xTB has parameters for 1 to %d", e.Atom+1, e.Z, MaxZ)
}

// An ElectronsError says that charge and multiplicity do not go with the
// atoms.
type ElectronsError struct {
	Charge, Multiplicity int
	Electrons            int // in the valence shells, at this charge
	Msg                  string
}

func (e *ElectronsError) Error() string {
	return fmt.Sprintf("semiempirical: charge %d and multiplicity %d with %d valence electrons: %s",
		e.Charge, e.Multiplicity, e.Electrons, e.Msg)
}

// A CloseAtomsError names two atoms that lie on one another.
type CloseAtomsError struct {
	I, J     int     // from 0
	Distance float64 // bohr
}

func (e *CloseAtomsError) Error() string {
	return fmt.Sprintf("semiempirical: atoms %d and %d are %.3f angstrom apart, nearer than any bond",
		e.I+1, e.J+1, e.Distance/units.Angstrom)
}

// A NotFiniteError names a coordinate that is no number or infinite.
type NotFiniteError struct {
	Atom int // from 0
	Axis int // 0, 1, 2: x, y, z
}

func (e *NotFiniteError) Error() string {
	return fmt.Sprintf("semiempirical: atom %d: coordinate %c is not a finite number", e.Atom+1, "xyz"[e.Axis])
}
