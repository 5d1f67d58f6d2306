package generate

import (
	"context"
	"errors"
	"fmt"
	"math"

	"torsieve/dedupe"
	"torsieve/forcefield"
	"torsieve/internal/geom"
	"torsieve/internal/relax"
	"torsieve/molecule"
)

// A search is one call of Conformers.
type search struct {
	m        *molecule.Molecule
	id       string
	o        Options
	numbers  []int
	held     []handedness
	embedder *embedder
	screen   *clashScreen
	assembly *assembly // nil where the molecule could not be cut into fragments
	sampler  *sampler
	surface  *forcefield.Surface
	soft     *forcefield.Surface
	comparer *dedupe.Comparer
	pool     []entry
	charged  bool // the surface has its charges
	result   Result
	failure  error // of the last start that came to nothing
}

// An entry is a relaxed structure.
type entry struct {
	x      []float64
	energy float64
	recipe recipe // empty for structures that were embedded whole
	start  int    // number of the start
}

func newSearch(ctx context.Context, m *molecule.Molecule, id string, o Options) (*search, error) {
	s := &search{m: m, id: id, o: o, numbers: m.Numbers(), held: handednesses(m), screen: newClashScreen(m)}
	var err error
	if s.surface, err = forcefield.New(m, o.Field); err != nil {
		return nil, err
	}
	s.soft = s.surface.Softened()
	s.comparer = dedupe.NewComparer(m, dedupe.Options{PolarHydrogens: true})
	label := func(i int) string { return atomLabel(m, i) }
	if s.embedder, err = newEmbedder(m, s.held, heldBonds(m), label); err != nil {
		return nil, err
	}
	if err = s.cut(ctx); err != nil {
		return nil, err
	}
	return s, nil
}

// cut makes the assembly. A fragment that cannot be embedded alone is no reason
// to give up: the whole molecule may be embedded all the same.
func (s *search) cut(ctx context.Context) error {
	var rotors []molecule.Rotor
	for _, r := range s.m.Rotors() {
		if !r.Idle {
			rotors = append(rotors, r)
		}
	}
	turns, err := torsions(s.m, rotors)
	if err != nil {
		return err
	}
	frags, err := fragments(s.m, rotors)
	if err != nil {
		s.result.Warnings = append(s.result.Warnings, fmt.Sprintf("searched as a whole: %v", err))
		return nil
	}
	for k, f := range frags {
		if err := f.findShapes(ctx, s.m, s.o, s.id, k); err != nil {
			if ctx.Err() != nil {
				return ctx.Err()
			}
			s.result.Warnings = append(s.result.Warnings, fmt.Sprintf("searched as a whole: %v", err))
			return nil
		}
	}
	s.assembly = newAssembly(s.m, s.screen, frags, turns)
	s.sampler = newSampler(s.assembly)
	return nil
}

// run makes starts and relaxes them.
func (s *search) run(ctx context.Context) error {
	if err := s.given(ctx); err != nil {
		return err
	}
	if s.assembly != nil {
		if err := s.assembled(ctx); err != nil {
			return err
		}
	}
	return s.embedded(ctx)
}

// given relaxes the caller's own geometries.
func (s *search) given(ctx context.Context) error {
	for _, x := range s.o.Start {
		if len(x) != 3*s.m.NumAtoms() {
			panic("generate: a start of another molecule")
		}
		if err := s.m.StereoMatches(x); err != nil {
			return fmt.Errorf("given geometry: %w", err)
		}
		s.result.Starts++
		s.result.Embedded++
		if err := s.add(ctx, append([]float64(nil), x...), recipe{}); err != nil {
			return err
		}
	}
	return nil
}

// loosely is how structures are relaxed before duplicates are dropped, tightly
// how the survivors are; rms gradients in hartree/bohr.
var (
	softly  = relax.Settings{RMSGradient: 5e-3, MaxGradients: 40}
	loosely = relax.Settings{RMSGradient: 4e-4, MaxGradients: 150, EnergyChange: 2e-5}
	tightly = relax.Settings{RMSGradient: 1e-4, MaxGradients: 1500}
)

// add relaxes a start and keeps it if its stereo is still right. Only the end
// of ctx is an error.
func (s *search) add(ctx context.Context, x []float64, r recipe) error {
	if trace != nil {
		trace("start", x)
		defer func() { trace("loose", x) }()
	}
	start := s.result.Starts
	if err := s.charge(ctx, x); err != nil {
		return err
	}
	energy, err := s.relaxed(ctx, x, loosely)
	if ctx.Err() != nil {
		return ctx.Err()
	}
	if err != nil {
		s.failure = err
		return nil
	}
	s.result.Relaxed++
	s.pool = append(s.pool, entry{x: x, energy: energy, recipe: r, start: start})
	return nil
}

// relaxed minimises x in place, with the soft core first where atoms collide.
func (s *search) relaxed(ctx context.Context, x []float64, set relax.Settings) (float64, error) {
	if s.collides(x) {
		if _, err := s.soft.Minimise(ctx, x, softly); err != nil {
			return 0, err
		}
	}
	set.Numbers = s.numbers
	res, err := s.surface.Minimise(ctx, x, set)
	if err != nil {
		return 0, err
	}
	if res.Status == relax.Exploded || math.IsNaN(res.Energy) {
		return 0, relax.ErrExploded
	}
	if err := s.stereo(x); err != nil {
		return 0, err
	}
	return res.Energy, nil
}

// collides says whether the force field's repulsion would be violent at x.
func (s *search) collides(x []float64) bool {
	n := s.m.NumAtoms()
	for i := range n {
		for j := range i {
			if hard := s.screen.hard[i*n+j]; hard > 0 {
				if d := geom.Distance(x, i, j); d*d < hard {
					return true
				}
			}
		}
	}
	return false
}

// stereo holds x to the stated stereo.
func (s *search) stereo(x []float64) error {
	if err := s.m.StereoMatches(x); err != nil {
		return err
	}
	if err := s.embedder.stereo(x); err != nil {
		return errors.New(s.embedder.explain(err))
	}
	return nil
}

// charge freezes the force field's charges at the first structure, relaxed
// without them.
func (s *search) charge(ctx context.Context, x []float64) error {
	if s.charged {
		return nil
	}
	y := append([]float64(nil), x...)
	if _, err := s.relaxed(ctx, y, loosely); err != nil {
		return ctx.Err()
	}
	s.charged = true
	return s.surface.FreezeCharges(y)
}

var trace func(stage string, x []float64)
