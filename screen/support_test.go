package screen

import (
	"context"
	"testing"

	"torsieve/forcefield"
	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/molecule/load"
	"torsieve/molecule/smiles"
	"torsieve/screen/ensemble"
)

// fieldTier is the force field as a tier, so that a whole run takes
// milliseconds. With flat it hides its gradient, as a single-point tier does;
// before, if not nil, is asked first and may fail or panic.
type fieldTier struct {
	name   string
	flat   bool
	before func(ctx context.Context, m *molecule.Molecule) error
}

func (t fieldTier) Name() string                    { return t.name }
func (t fieldTier) Method() string                  { return "UFF" }
func (t fieldTier) Settings() string                { return "UFF" }
func (t fieldTier) Memory(*molecule.Molecule) int64 { return 1 << 20 }
func (t fieldTier) Scatter(*molecule.Molecule) (ensemble.Scatter, bool) {
	return ensemble.Scatter{Scale: 0.3 * units.KcalPerMol, Freedom: 2}, true
}

func (t fieldTier) Surface(m *molecule.Molecule) (Surface, error) {
	s, err := forcefield.New(m, withoutCharges())
	if err != nil {
		return nil, err
	}
	asked := askedSurface{Sloped: s, m: m, before: t.before}
	if t.flat {
		return flatSurface{asked}, nil
	}
	return asked, nil
}

// withoutCharges is the force field whose energy depends on the geometry alone,
// not on the one that charges were taken from.
func withoutCharges() forcefield.Options {
	o := forcefield.Defaults()
	o.Charges = "none"
	return o
}

// askedSurface asks before each energy.
type askedSurface struct {
	Sloped
	m      *molecule.Molecule
	before func(context.Context, *molecule.Molecule) error
}

func (s askedSurface) ask(ctx context.Context) error {
	if s.before == nil {
		return nil
	}
	return s.before(ctx, s.m)
}

func (s askedSurface) Energy(ctx context.Context, x []float64) (molecule.Point, error) {
	if err := s.ask(ctx); err != nil {
		return molecule.Point{}, err
	}
	return s.Sloped.Energy(ctx, x)
}

func (s askedSurface) Gradient(ctx context.Context, grad, x []float64) (molecule.Point, error) {
	if err := s.ask(ctx); err != nil {
		return molecule.Point{}, err
	}
	return s.Sloped.Gradient(ctx, grad, x)
}

// flatSurface has an energy alone.
type flatSurface struct{ s askedSurface }

func (f flatSurface) Energy(ctx context.Context, x []float64) (molecule.Point, error) {
	return f.s.Energy(ctx, x)
}

func (f flatSurface) Reset() { f.s.Reset() }

// ligandsOf takes SMILES through an Intake, named by their place.
func ligandsOf(t *testing.T, in *Intake, texts ...string) []*Ligand {
	t.Helper()
	var out []*Ligand
	for i, text := range texts {
		m, warnings, err := smiles.Parse(text)
		if err != nil {
			t.Fatalf("%s: %v", text, err)
		}
		out = append(out, in.Take("test.smi", load.Record{Mol: m, ID: text, Line: i + 1, Record: i + 1, Warnings: warnings})...)
	}
	return out
}

// quick are options for tests.
func quick() Options {
	o := Defaults()
	o.Jobs = 2
	o.Generate.Max = 8
	o.Generate.Field = withoutCharges()
	o.Temperatures = []float64{298.15, 400}
	return o
}

// results runs the ligands and returns what became of each, in their order.
func results(ctx context.Context, t *testing.T, ligands []*Ligand, tiers []Tier, o Options) ([]*Result, error) {
	t.Helper()
	out := make([]*Result, len(ligands))
	err := Run(ctx, ligands, tiers, o, func(r *Result) error {
		if out[r.Ligand.Order] != nil {
			t.Errorf("%s was handed over twice", r.Ligand.ID)
		}
		out[r.Ligand.Order] = r
		return nil
	})
	for i, r := range out {
		if r == nil && err == nil {
			t.Fatalf("%s was never handed over", ligands[i].ID)
		}
	}
	return out, err
}
