package generate

import (
	"cmp"
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"

	"torsieve/forcefield"
	"torsieve/internal/geom"
	"torsieve/internal/relax"
	"torsieve/internal/units"
	"torsieve/molecule"
)

// What is kept of a fragment's shapes.
const (
	shapeWindow  = 12 * units.KcalPerMol // above the fragment's lowest
	shapeNoise   = 0.15 * units.Angstrom // RMSD below which two shapes are one
	shapeLimit   = 40
	macroLimit   = 150 // of a fragment with a large ring
	macroSize    = 9   // atoms from which a ring is a large one
	quietStarts  = 12  // starts without a new shape that end the search
	stiffStarts  = 3
	bendyStarts  = 16 // and more with each flexible ring bond
	startsPerBit = 5
	mostStarts   = 160
)

// loose convergence: the shape is that of the minimum, the last digits are not.
var looseSettings = relax.Settings{RMSGradient: 5e-4, MaxGradients: 150, EnergyChange: 1e-5}

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
		s.failure = err
		return false, nil
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

// compared lists the points (as numbers within a shape) that make a shape: all
// but the hydrogens on carbon and other atoms whose names could be swapped.
func (f *fragment) compared(nameless []bool) []int {
	var list []int
	for k, i := range f.atoms[:len(f.core)+len(f.outside)] {
		inside := k < len(f.core)
		if inside && (nameless[i] || f.model.Atom(k).Number == 1 && !(polarHydrogen(f.model, k) && !f.freeHydrogen(k))) {
			continue
		}
		list = append(list, k)
	}
	return list
}

// nameless marks the atoms that turning an idle rotor puts in each other's
// places: the fluorines of CF3, the methyl groups of tert-butyl.
func nameless(m *molecule.Molecule) []bool {
	mark := make([]bool, m.NumAtoms())
	for _, r := range m.Rotors() {
		if !r.Idle {
			continue
		}
		for _, end := range [2][3]int{{r.J, r.K, r.PeriodJ}, {r.K, r.J, r.PeriodK}} {
			for _, i := range m.Neighbours(end[0]) {
				mark[i] = mark[i] || end[2] == 3 && i != end[1]
			}
		}
	}
	return mark
}

// freeHydrogen says whether hydrogen p has a twin on the same atom.
func (f *fragment) freeHydrogen(p int) bool {
	count := 0
	for _, j := range f.model.Neighbours(f.model.Neighbours(p)[0]) {
		if f.model.Atom(j).Number == 1 {
			count++
		}
	}
	return count > 1
}

// pick takes the positions of core and outside.
func (f *fragment) pick(x []float64) []float64 {
	n := len(f.core) + len(f.outside)
	return slices.Clone(x[:3*n])
}

// keep adds a shape if it is new, or lowers the energy of the one it equals.
func (f *fragment) keep(s shape, compared []int) bool {
	a := choose(s.x, compared)
	for k := range f.shapes {
		if same, _ := geom.RMSD(choose(f.shapes[k].x, compared), a); same < shapeNoise {
			if s.energy < f.shapes[k].energy {
				f.shapes[k] = s
			}
			return false
		}
	}
	f.shapes = append(f.shapes, s)
	return true
}

func choose(x []float64, which []int) []float64 {
	out := make([]float64, 0, 3*len(which))
	for _, i := range which {
		out = append(out, x[3*i:3*i+3]...)
	}
	return out
}

// trim sorts by energy and drops what is too high or too much.
func (f *fragment) trim() {
	slices.SortStableFunc(f.shapes, func(a, b shape) int { return cmp.Compare(a.energy, b.energy) })
	lowest, limit := f.shapes[0].energy, shapeLimit
	for _, ring := range f.model.Rings() {
		if len(ring) >= macroSize {
			limit = macroLimit
		}
	}
	for k := range f.shapes {
		f.shapes[k].energy -= lowest
		if f.shapes[k].energy > shapeWindow || k >= limit {
			f.shapes = f.shapes[:k]
			break
		}
	}
}

// weights returns the share of sampling that each shape gets: by Boltzmann's
// factor at an effective kT wide enough not to trust the force field.
func (f *fragment) weights() []float64 {
	const kT = 4 * units.KcalPerMol
	w := make([]float64, len(f.shapes))
	for k, s := range f.shapes {
		w[k] = math.Exp(-s.energy / kT)
	}
	return w
}
