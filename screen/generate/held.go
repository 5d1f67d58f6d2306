package generate

import (
	"context"
	"math"

	"torsieve/internal/geom"
	"torsieve/internal/relax"
	"torsieve/internal/units"
)

// A heldSurface draws the rotors to angles that they were put at, so that a
// structure is rid of its collisions and of bent angles but keeps its place
// beside the bottom of a torsion's well.
type heldSurface struct {
	field    relax.Surface
	turns    []torsion
	angles   []float64 // by rotor
	strength float64   // hartree per square radian
	strain   float64   // of the restraints in the last gradient, hartree
}

// Gradient implements relax.Surface: the field and k/2 (phi - phi0)^2 for each rotor.
func (h *heldSurface) Gradient(ctx context.Context, grad, x []float64) (float64, error) {
	e, err := h.field.Gradient(ctx, grad, x)
	if err != nil {
		return e, err
	}
	h.strain = 0
	for k, t := range h.turns {
		phi := geom.Dihedral(x, t.a, t.b, t.c, t.d)
		off := math.Remainder(phi-h.angles[k], 2*math.Pi)
		if math.IsNaN(off) { // three atoms in a row
			continue
		}
		h.strain += h.strength / 2 * off * off
		geom.AddDihedral(grad, x, t.a, t.b, t.c, t.d, h.strength*off)
	}
	return e + h.strain, nil
}

// holding is how strongly rotors are held: as strongly as a threefold barrier of
// three kcal/mol curves at its bottom.
const holding = 15 * units.KcalPerMol

// relaxedHeld minimises x in place with the rotors drawn to the angles of r, and
// returns the energy without the restraints.
func (s *search) relaxedHeld(ctx context.Context, x []float64, r recipe, set relax.Settings) (float64, error) {
	if s.collides(x) {
		if _, err := s.soft.Minimise(ctx, x, softly); err != nil {
			return 0, err
		}
	}
	if s.minimiser == nil {
		s.minimiser = relax.NewMinimiser(len(x))
	}
	set.Numbers = s.numbers
	h := &heldSurface{field: s.surface.Slope(), turns: s.assembly.turns, angles: r.angles, strength: holding}
	res, err := s.minimiser.Minimise(ctx, h, x, set)
	if err != nil {
		return 0, err
	}
	if res.Status == relax.Exploded || math.IsNaN(res.Energy) {
		return 0, relax.ErrExploded
	}
	if err := s.m.StereoMatches(x); err != nil {
		return 0, err
	}
	p, err := s.surface.Energy(ctx, x)
	return p.Energy, err
}
