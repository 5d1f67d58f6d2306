package solvent

import (
	"fmt"
	"strings"

	"torsieve/internal/element"
)

// Unsupported is the error for an element that the model was not fitted for:
// the lanthanides, polonium, astatine, radon and what comes after it.
type Unsupported struct {
	Atom int // from 0
	Z    int
}

func (e *Unsupported) Error() string {
	what := fmt.Sprintf("has atomic number %d", e.Z)
	if e.Z >= 1 && e.Z <= element.MaxZ {
		what = "is " + element.Symbol(e.Z)
	}
	return fmt.Sprintf("solvent: atom %d %s: the solvation model has no parameters for it", e.Atom+1, what)
}

// An UnknownError is the error for a name that belongs to no solvent.
type UnknownError struct {
	Name    string
	Nearest []string // solvents whose names look like it, best first; may be empty
}

func (e *UnknownError) Error() string {
	if len(e.Nearest) == 0 {
		return fmt.Sprintf("no solvent is named %q; there are %s", e.Name, strings.Join(Names(), ", "))
	}
	return fmt.Sprintf("no solvent is named %q; nearest: %s", e.Name, strings.Join(e.Nearest, ", "))
}

// A GeometryError says that the model has no value for a geometry.
type GeometryError struct {
	Atom int // from 0
	Msg  string
}

func (e *GeometryError) Error() string {
	return fmt.Sprintf("solvent: atom %d: %s", e.Atom+1, e.Msg)
}
