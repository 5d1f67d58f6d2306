package relax

import (
	"errors"
	"fmt"
)

// Status says why a minimisation ended. Most ends are answers, not errors.
type Status int

// The ends of a minimisation.
const (
	Converged     Status = iota // all criteria are met
	Flat                        // no lower energy to be found: numerical noise
	GradientLimit               // Settings.MaxGradients are spent
	Exploded                    // an energy or a gradient was not finite
)

// What Err returns for the ends that are errors.
var (
	ErrGradientLimit = errors.New("relax: gradient limit reached before convergence")
	ErrExploded      = errors.New("relax: energy or gradient not finite")
)

func (s Status) String() string {
	switch s {
	case Converged:
		return "converged"
	case Flat:
		return "flat"
	case GradientLimit:
		return "gradient limit"
	case Exploded:
		return "not finite"
	}
	return fmt.Sprintf("Status(%d)", int(s))
}

// Err returns nil where the geometry is as good as the surface allows, and the
// reason where it is not.
func (s Status) Err() error {
	switch s {
	case Converged, Flat:
		return nil
	case GradientLimit:
		return ErrGradientLimit
	case Exploded:
		return ErrExploded
	}
	panic(fmt.Sprintf("relax: unknown status %d", int(s)))
}
