package generate

import (
	"context"
	"fmt"

	"torsieve/dedupe"
	"torsieve/forcefield"
	"torsieve/internal/relax"
	"torsieve/molecule"
)

// A search is one call of Conformers.
type search struct {
	m         *molecule.Molecule
	id        string
	o         Options
	numbers   []int
	held      []handedness
	embedder  *embedder
	screen    *clashScreen
	assembly  *assembly // nil where the molecule could not be cut into fragments
	sampler   *sampler
	surface   *forcefield.Surface
	soft      *forcefield.Surface
	comparer  *dedupe.Comparer
	minimiser *relax.Minimiser // of structures whose rotors are held
	pool      []entry
	charged   bool // the surface has its charges
	result    Result
	failure   error // of the last start that came to nothing
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
	s.warnOfSlowRotors(turns)
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
	s.sampler.evenly = s.o.Minima
	return nil
}

// hindered is the class of bonds whose two twists are isomers that can be kept
// apart (barriers above 20 kcal/mol).
const hindered = "biaryl, three or four ortho"

func (s *search) warnOfSlowRotors(turns []torsion) {
	for _, t := range turns {
		if t.class == hindered {
			s.result.Warnings = append(s.result.Warnings, fmt.Sprintf(
				"the bond between %s and %s hardly turns at room temperature: conformers of either twist are listed together",
				atomLabel(s.m, t.b), atomLabel(s.m, t.c)))
		}
	}
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
		if err := s.add(ctx, append([]float64(nil), x...), recipe{}, false); err != nil {
			return err
		}
	}
	return nil
}
