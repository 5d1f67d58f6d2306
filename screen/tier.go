package screen

import (
	"context"
	"fmt"
	"strings"

	"torsieve/molecule"
	"torsieve/screen/ensemble"
)

// A Tier is one level of theory. The interfaces stand here, with their only
// user; the tiers do not import this package. Their surfaces fit by having the
// methods, and cmd/torsieve makes a Tier of each.
type Tier interface {
	// Name is the tier's word in options, files and messages.
	Name() string
	// Method is what a paper would cite: "GFN2-xTB", "HF-3c".
	Method() string
	// Settings is all that decides the tier's numbers beside the molecule, as
	// text: results are taken from an earlier run where it is the same.
	Settings() string
	// Surface returns a new surface for m, or an error that says what of m the
	// tier cannot take. It may be called by several goroutines at once.
	Surface(m *molecule.Molecule) (Surface, error)
	// Memory is an upper estimate of what one surface of m holds, in bytes.
	Memory(m *molecule.Molecule) int64
	// Scatter is how far conformer energies of this tier lie from the truth for
	// a molecule like m, and whether that is known.
	Scatter(m *molecule.Molecule) (s ensemble.Scatter, known bool)
}

// A Surface is a tier's energy for one molecule. It owns its scratch memory and
// keeps its last converged state as the next start, so it serves one goroutine
// at a time. Reset forgets that state.
//
// Energy takes 3N coordinates in bohr and neither keeps nor changes x. It
// returns ctx.Err() soon after ctx ends; any other error is about x alone.
type Surface interface {
	Energy(ctx context.Context, x []float64) (molecule.Point, error)
	Reset()
}

// A Sloped surface also has a gradient; hf's, for one, does not. A tier whose
// surfaces are sloped relaxes the geometries that come to it, another one takes
// them as they are.
//
// Gradient writes dE/dx in hartree/bohr into grad, len(grad) == len(x).
type Sloped interface {
	Surface
	Gradient(ctx context.Context, grad, x []float64) (molecule.Point, error)
}

// A Solvated tier's surfaces may have a solvent about the molecule, whose free
// energy is then part of their energy.
//
// Solvent is its name, empty where there is none. Gas returns a surface without
// it: what the two differ by at one geometry is the solvation free energy that
// tiers above, which know no solvent, are given.
type Solvated interface {
	Tier
	Solvent() string
	Gas(m *molecule.Molecule) (Surface, error)
}

// inSolvent returns the tier as a Solvated one if it has a solvent.
func inSolvent(t Tier) (s Solvated, ok bool) {
	s, ok = t.(Solvated)
	return s, ok && s.Solvent() != ""
}

// TierError puts the tier's name in front of an error that does not say it yet.
func TierError(t Tier, err error) error {
	if strings.HasPrefix(err.Error(), t.Name()+":") {
		return err
	}
	return fmt.Errorf("%s: %w", t.Name(), err)
}
