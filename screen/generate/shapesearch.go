package generate

import (
	"context"
	"fmt"
	"math/rand/v2"

	"torsieve/forcefield"
	"torsieve/molecule"
)

// A shapeSearch fills a fragment's shapes.
type shapeSearch struct {
	f        *fragment
	e        *embedder
	surface  *forcefield.Surface
	compared []int
	stream   func(start int) *rand.Rand
	failure  error // of the last start that came to nothing
}

// findShapes fills f.shapes: ring templates and embeddings, relaxed in the
// force field, each shape once, lowest first. index keeps the fragments' random
// streams apart.
func (f *fragment) findShapes(ctx context.Context, m *molecule.Molecule, o Options, id string, index int) error {
	label := func(i int) string {
		if i < len(f.atoms) {
			return atomLabel(m, f.atoms[i])
		}
		return fmt.Sprintf("%s (added)", atomLabel(f.model, i))
	}
	s := &shapeSearch{f: f, compared: f.compared(nameless(m))}
	s.stream = func(start int) *rand.Rand { return stream(o.Seed, id, streamShapes, index<<16+start) }
	var err error
	if s.e, err = newEmbedder(f.model, f.held, f.bonds, label); err != nil {
		return err
	}
	if s.surface, err = forcefield.New(f.model, o.fragmentField()); err != nil {
		return err
	}
	done, err := s.fromTemplates(ctx)
	if err != nil {
		return err
	}
	if err := s.fromEmbedding(ctx, done); err != nil {
		return err
	}
	if len(f.shapes) == 0 {
		return fmt.Errorf("fragment at atom %s: %w", atomLabel(m, f.core[0]), s.failure)
	}
	f.trim()
	return nil
}

// fromTemplates tries the usual shapes of a ring and returns how many there were.
func (s *shapeSearch) fromTemplates(ctx context.Context) (int, error) {
	if s.e.problems[0] == nil {
		return 0, nil
	}
	problems, err := s.f.ringProblems(s.e.problems[0])
	if err != nil {
		return 0, err
	}
	const each = 3 // attempts; a template that fits no stereo never succeeds
	for start, p := range problems {
		x, _, err := s.e.solve(ctx, p, s.stream(start), each)
		if err != nil {
			return 0, err
		}
		if x != nil {
			if _, err := s.relax(ctx, x); err != nil {
				return 0, err
			}
		}
	}
	return len(problems), nil
}

// fromEmbedding embeds until nothing new turns up. first is the number of its
// first random stream.
func (s *shapeSearch) fromEmbedding(ctx context.Context, first int) error {
	quiet := 0
	for start := range s.f.starts() {
		x, err := s.e.next(ctx, s.stream(first+start))
		if ctx.Err() != nil {
			return ctx.Err()
		}
		if err != nil {
			s.failure = err
			if len(s.f.shapes) == 0 && start < 2 {
				continue
			}
			return nil
		}
		fresh, err := s.relax(ctx, x)
		if err != nil {
			return err
		}
		if quiet++; fresh {
			quiet = 0
		}
		if quiet >= quietStarts {
			return nil
		}
	}
	return nil
}

// relax minimises a start and keeps it if it is a new shape with the right
// stereo. Only the end of ctx is an error.
func (s *shapeSearch) relax(ctx context.Context, x []float64) (fresh bool, err error) {
	res, err := s.surface.Minimise(ctx, x, looseSettings)
	if ctx.Err() != nil {
		return false, ctx.Err()
	}
	if err == nil {
		err = s.e.stereo(x)
	}
	if err != nil {
		s.failure = err   // told if nothing at all comes through
		return false, nil //nolint:nilerr // one start that fails is no error
	}
	return s.f.keep(shape{x: s.f.pick(x), energy: res.Energy}, s.compared), nil
}

// starts is how often the fragment is embedded at most.
func (f *fragment) starts() int {
	if f.rings == 0 && !f.invertible() {
		return stiffStarts
	}
	return min(mostStarts, bendyStarts+startsPerBit*f.rings)
}

// invertible says whether a core atom can have two arrangements that nothing
// in the graph holds: pyramidal nitrogen and the like.
func (f *fragment) invertible() bool {
	held := make(map[int]bool)
	for _, h := range f.held {
		held[h.centre] = true
	}
	h := hybrids(f.model)
	for i := range f.core {
		if n := len(f.model.Neighbours(i)); h[i] == tetrahedral && (n == 3 || n == 4) && !held[i] {
			return true
		}
	}
	return false
}
