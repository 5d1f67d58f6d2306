package generate

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"

	"torsieve/internal/element"
	"torsieve/internal/geom"
	"torsieve/molecule"
	"torsieve/screen/generate/embed"
)

// attempts of one embedding at each looseness of the contacts.
const attempts = 20

// loosenesses are tried in turn: crowded molecules need less room between
// atoms that are far apart in the graph.
var loosenesses = [...]float64{1, 0.9, 0.75, 0.5}

// An EmbedError says that no coordinates could be found for a molecule.
type EmbedError struct {
	Attempts int
	Reason   string // what went wrong in the last of them
}

func (e *EmbedError) Error() string {
	return fmt.Sprintf("could not embed after %d attempts: %s", e.Attempts, e.Reason)
}

// An embedder makes coordinates for one graph from random distances.
type embedder struct {
	m        *molecule.Molecule
	held     []handedness
	bonds    map[int]doubleBond
	label    func(atom int) string
	problems []*embed.Problem // by looseness; nil where the bounds contradict each other
	reason   string           // of the last failure
}

func newEmbedder(m *molecule.Molecule, held []handedness, bonds map[int]doubleBond, label func(int) string) (*embedder, error) {
	e := &embedder{m: m, held: held, bonds: bonds, label: label}
	h := hybrids(m)
	for _, loose := range loosenesses {
		p, err := e.problem(h, loose)
		var wrong *embed.Contradiction
		if errors.As(err, &wrong) {
			e.reason = fmt.Sprintf("the distance between %s and %s fits no bounds", label(wrong.I), label(wrong.J))
		} else if err != nil {
			return nil, err
		}
		e.problems = append(e.problems, p)
	}
	return e, nil
}

func (e *embedder) problem(h []hybrid, loose float64) (*embed.Problem, error) {
	bounds, err := distanceBounds(e.m, h, e.bonds, loose)
	if err != nil {
		return nil, err
	}
	p := &embed.Problem{Bounds: bounds, Planar: planes(e.m, h)}
	middle := func(i, j int) float64 {
		l, u := bounds.At(i, j)
		return (l + u) / 2
	}
	for _, hand := range e.held {
		p.Chiral = append(p.Chiral, hand.volume(e.m, middle))
	}
	return p, nil
}

// next returns coordinates with the right stereo, bohr. The error is an
// *EmbedError or ctx.Err().
func (e *embedder) next(ctx context.Context, r *rand.Rand) ([]float64, error) {
	tried := 0
	for _, p := range e.problems {
		if p == nil {
			continue
		}
		x, n, err := e.solve(ctx, p, r, attempts)
		tried += n
		if x != nil || err != nil {
			return x, err
		}
	}
	return nil, &EmbedError{Attempts: tried, Reason: e.reason}
}

// solve makes up to limit attempts at a problem. It returns nil where all come
// to nothing; only the end of ctx is an error.
func (e *embedder) solve(ctx context.Context, p *embed.Problem, r *rand.Rand, limit int) (x []float64, tried int, err error) {
	for tried < limit {
		tried++
		x, err := p.Once(ctx, r)
		if ctx.Err() != nil {
			return nil, tried, ctx.Err()
		}
		if err == nil {
			err = e.stereo(x)
		}
		if err == nil {
			return x, tried, nil
		}
		e.reason = e.explain(err)
	}
	return nil, tried, nil
}

// stereo says which stated element came out wrong at x, if one did.
func (e *embedder) stereo(x []float64) error {
	for k, h := range e.held {
		if h.sign*geom.SignedVolume(x, h.points[0], h.points[1], h.points[2], h.points[3]) <= 0 {
			return &embed.Failure{Chiral: k, Planar: -1}
		}
	}
	for k := range e.m.Bonds() {
		if d, ok := e.bonds[k]; ok {
			if cis := math.Cos(geom.Dihedral(x, d.a, d.j, d.k, d.b)) > 0; cis != d.cis {
				return fmt.Errorf("double bond %s=%s came out wrong", e.label(d.j), e.label(d.k))
			}
		}
	}
	return nil
}

// explain puts the atoms' names into a failure.
func (e *embedder) explain(err error) string {
	var f *embed.Failure
	if !errors.As(err, &f) {
		return err.Error()
	}
	switch {
	case f.Err != nil:
		return f.Err.Error()
	case f.Chiral >= 0:
		return fmt.Sprintf("stereo centre at atom %s came out wrong", e.label(e.held[f.Chiral].centre))
	case f.Planar >= 0:
		return "a flat group came out bent"
	}
	return fmt.Sprintf("atoms %s and %s came out %.2f bohr off", e.label(f.Distance[0]), e.label(f.Distance[1]), f.By)
}

// atomLabel names an atom of m as a chemist reads it: symbol and number from 1.
func atomLabel(m *molecule.Molecule, i int) string {
	return fmt.Sprintf("%s%d", element.Symbol(m.Atom(i).Number), i+1)
}
