package forcefield

import (
	"context"

	"torsieve/molecule"
)

// Energy returns the energy at x (3N, bohr), by terms. The error is ctx's,
// ErrCoincident or ErrNotFinite.
func (s *Surface) Energy(ctx context.Context, x []float64) (molecule.Point, error) {
	return s.point(ctx, nil, x)
}

// Gradient is Energy, and writes dE/dx in hartree/bohr into grad.
func (s *Surface) Gradient(ctx context.Context, grad, x []float64) (molecule.Point, error) {
	if len(grad) != len(x) {
		panic("forcefield: gradient of the wrong length")
	}
	return s.point(ctx, grad, x)
}

func (s *Surface) point(ctx context.Context, grad, x []float64) (molecule.Point, error) {
	p := molecule.Point{Charges: s.charges, Warnings: s.warnings, Parts: make([]molecule.Part, 0, len(s.terms)+2)}
	var err error
	p.Energy, err = s.sum(ctx, &p.Parts, grad, x)
	return p, err
}

// sum adds the terms up, and appends them to parts unless that is nil. It
// allocates nothing.
func (s *Surface) sum(ctx context.Context, parts *[]molecule.Part, grad, x []float64) (float64, error) {
	if err := ctx.Err(); err != nil {
		return 0, err
	}
	s.check(x)
	if err := separate(x); err != nil {
		return 0, err
	}
	clear(grad)
	var energy float64
	note := func(name string, e float64) {
		energy += e
		if parts != nil {
			*parts = append(*parts, molecule.Part{Name: name, Energy: e})
		}
	}
	for _, t := range s.terms {
		note(t.name(), t.addTo(grad, x))
	}
	if s.soft {
		note(vanDerWaals, s.nonbonded.addSoftTo(grad, x))
	} else {
		vdw, electrostatic := s.nonbonded.addTo(grad, x)
		note(vanDerWaals, vdw)
		if s.charges != nil {
			note("electrostatic", electrostatic)
		}
	}
	if err := finite(energy, grad); err != nil {
		return 0, err
	}
	return energy, nil
}

const vanDerWaals = "van der Waals"
