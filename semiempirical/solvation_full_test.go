//go:build full

package semiempirical

import "testing"

// All molecules in every solvent there are values for.
func TestAllSolvents(t *testing.T) {
	compareSolvents(t, func(atoms int, solvent string) bool { return true })
}
