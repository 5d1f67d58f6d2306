// Package generate finds the shapes that a molecule can take: it cuts the
// molecule at its rotors, embeds and relaxes the stiff pieces, puts them
// together again with the angles that each kind of bond likes, and relaxes what
// does not collide in the force field.
//
// Read Conformers first. All is decided by the molecule, its id, the options
// and the seed; nothing depends on time or on what else the machine does.
package generate

import (
	"context"
	"fmt"

	"torsieve/molecule"
)

// A Conformer is a relaxed shape.
type Conformer struct {
	X      []float64 // 3N, bohr
	Energy float64   // of the force field, hartree
	Family int       // conformers of one family have the same ring shapes
	Hits   int       // starts that ended here
}

// A Result is what a search found.
type Result struct {
	Conformers []Conformer // the lowest first, then so that any prefix is the best choice of its size
	Starts     int         // structures that were put together or embedded
	Embedded   int         // of them without collisions
	Relaxed    int         // of them relaxed with the right stereo
	Found      int         // distinct shapes within the window, before the cap
	Unseen     float64     // chance that one more start would have found a new shape, where starts were drawn
	Complete   bool        // all combinations of states and ring shapes were tried, and no cap cut the list
	Warnings   []string
}

// Conformers searches the shapes of m, whose stereo must be stated in full. id
// only seeds the random numbers. The error is an *EmbedError, an error of the
// force field about an atom that it does not know, or ctx.Err().
func Conformers(ctx context.Context, m *molecule.Molecule, id string, o Options) (Result, error) {
	if err := o.Check(); err != nil {
		return Result{}, err
	}
	if err := check(m); err != nil {
		return Result{}, err
	}
	s, err := newSearch(ctx, m, id, o)
	if err != nil {
		return Result{}, err
	}
	if err := s.run(ctx); err != nil {
		return Result{}, err
	}
	return s.finish(ctx)
}

// check refuses what the caller should have settled.
func check(m *molecule.Molecule) error {
	if m.NumAtoms() == 0 {
		return fmt.Errorf("a molecule without atoms has no shape")
	}
	if n := len(m.Fragments()); n > 1 {
		return fmt.Errorf("the molecule has %d parts without a bond between them", n)
	}
	if n := m.UnspecifiedStereo(); n > 0 {
		return fmt.Errorf("the stereo of %d centres or double bonds is not stated", n)
	}
	return nil
}
