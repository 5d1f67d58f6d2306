// Package smiles reads the line notation of the OpenSMILES specification 1.0
// (opensmiles.org, 2016): all of it that makes sense for a molecule in space.
//
// Refused by name: the wildcard atom, quadruple bonds, and the chirality
// classes other than @, @@, @TH1 and @TH2. The writer is molecule.SMILES.
package smiles

import "fmt"

// An Error says where a string is no SMILES of a molecule, and why.
type Error struct {
	Pos int    // position in the string, counted in bytes from 1; 0 if it is at fault as a whole
	Msg string // lower case, no full stop
	Err error  // the cause, or nil
}

func (e *Error) Error() string {
	if e.Pos == 0 {
		return e.Msg
	}
	return fmt.Sprintf("position %d: %s", e.Pos, e.Msg)
}

func (e *Error) Unwrap() error { return e.Err }
