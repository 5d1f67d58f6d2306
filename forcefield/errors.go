package forcefield

import (
	"errors"
	"fmt"

	"torsieve/internal/element"
)

// Unsupported says that the force field has no type for an atom.
type Unsupported struct {
	Atom   int // index, from 0
	Number int // atomic number
}

func (e *Unsupported) Error() string {
	name := "?"
	if e.Number >= 1 && e.Number <= element.MaxZ {
		name = element.Symbol(e.Number)
	}
	return fmt.Sprintf("force field: no atom type for element %s (Z = %d, atom %d)", name, e.Number, e.Atom+1)
}

// ErrCoincident comes where two atoms have the same place: no energy is
// meaningful there.
var ErrCoincident = errors.New("force field: two atoms at the same place")

// ErrNotFinite comes where a coordinate is not a finite number, or an energy or
// gradient would not be one.
var ErrNotFinite = errors.New("force field: coordinate, energy or gradient not finite")
