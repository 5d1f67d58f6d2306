package screen

import (
	"context"
	"errors"
	"math"
	"strings"
	"testing"

	"torsieve/internal/geom"
	"torsieve/molecule"
)

// wetTier is the force field in a solvent whose free energy is pull hartree per
// bohr between the first atom and the last.
type wetTier struct {
	fieldTier
	pull   float64
	gasErr error
}

func (wetTier) Solvent() string { return "a solvent" }

func (t wetTier) Gas(m *molecule.Molecule) (Surface, error) {
	dry := t.fieldTier
	if t.gasErr != nil {
		dry.before = func(context.Context, *molecule.Molecule) error { return t.gasErr }
	}
	return dry.Surface(m)
}

func (t wetTier) Surface(m *molecule.Molecule) (Surface, error) {
	s, err := t.fieldTier.Surface(m)
	if err != nil {
		return nil, err
	}
	return wetSurface{s.(Sloped), t.pull, m.NumAtoms() - 1}, nil
}

type wetSurface struct {
	Sloped
	pull float64
	last int
}

func (s wetSurface) Gradient(ctx context.Context, grad, x []float64) (molecule.Point, error) {
	p, err := s.Sloped.Gradient(ctx, grad, x)
	d := geom.Distance(x, 0, s.last)
	for k := range 3 {
		f := s.pull * (x[3*s.last+k] - x[k]) / d
		grad[3*s.last+k] += f
		grad[k] -= f
	}
	p.Energy += s.pull * d
	return p, err
}

// The solvation of a conformer is what its solvent's tier says at the relaxed
// geometry, and stands in the final energy once: as a part of that tier's energy
// or beside that of a tier above.
func TestSolvationStandsInTheFinalEnergyOnce(t *testing.T) {
	const pull = 0.002
	for _, through := range []int{2, 3} {
		tiers := []Tier{fieldTier{name: "first"}, wetTier{fieldTier: fieldTier{name: "second"}, pull: pull}, fieldTier{name: "third", flat: true}}
		res, err := results(t.Context(), t, ligandsOf(t, NewIntake(), "OCCCN"), tiers[:through], quick())
		if err != nil || len(res[0].Kept) < 2 {
			t.Fatalf("%d tiers: %v, %d kept (%s)", through, err, len(res[0].Kept), res[0].Reason)
		}
		for _, i := range res[0].Kept {
			c := res[0].Conformers[i]
			want := pull * geom.Distance(c.X, 0, res[0].Mol.NumAtoms()-1)
			if !c.Solvated || math.Abs(c.Solvation-want) > 1e-9 {
				t.Errorf("conformer %d: solvation %.9f (%t), want %.9f hartree", c.Number, c.Solvation, c.Solvated, want)
			}
			if math.Abs(c.Final()-c.Energies[1]) > 1e-9 { // the third tier is the second without the solvent
				t.Errorf("%d tiers, conformer %d: final energy %.9f, want %.9f hartree", through, c.Number, c.Final(), c.Energies[1])
			}
		}
	}
}

// A conformer without an energy in the gas phase has no solvation to hand on.
func TestNoEnergyWithoutTheSolvent(t *testing.T) {
	wet := wetTier{fieldTier: fieldTier{name: "second"}, gasErr: errors.New("it would not settle")}
	res, err := results(t.Context(), t, ligandsOf(t, NewIntake(), "CCO"), []Tier{fieldTier{name: "first"}, wet}, quick())
	if err != nil || res[0].Status != Failed || !strings.Contains(res[0].Reason, "without the solvent: it would not settle") {
		t.Errorf("%v, %s: %s", err, res[0].Status, res[0].Reason)
	}
}
