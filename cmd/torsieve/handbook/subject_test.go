package handbook

import (
	"context"
	"errors"
	"fmt"
	"math/rand/v2"
	"slices"

	"torsieve/dedupe"
	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/molecule/smiles"
	"torsieve/screen"
	"torsieve/screen/generate"
)

// A subject is a molecule and the minima that one level has for it.
type subject struct {
	m            *molecule.Molecule
	level        level
	surface      screen.Sloped
	same, mirror [][]int // the symmetries of the graph; those that turn all centres over
	minima       []*point
	top          screen.Surface // HF-3c; nil on the levels of the force field, and for iodine
}

// A point is a geometry with its energies in kcal/mol.
type point struct {
	x      []float64
	energy float64
	hf     float64
	hfDone bool
	led    bool // not reached from the search's shapes: brought there by hand
}

// A search is a molecule and the shapes that the search finds for it.
type search struct {
	m      *molecule.Molecule
	shapes [][]float64
}

func searchFor(ctx context.Context, code string) (search, error) {
	m, _, err := smiles.Parse(code)
	if err != nil {
		return search{}, err
	}
	found, err := generate.Conformers(ctx, m, code, generate.Defaults())
	if err != nil {
		return search{}, err
	}
	s := search{m: m}
	for _, c := range found.Conformers {
		s.shapes = append(s.shapes, c.X)
	}
	return s, nil
}

// subjectAt relaxes the shapes of a search at one level.
func subjectAt(ctx context.Context, from search, l level, hydrogens bool) (*subject, error) {
	surface, err := l.surface(from.m, from.shapes[0])
	if err != nil {
		return nil, err
	}
	sub := &subject{m: from.m, level: l, surface: surface}
	sub.same, sub.mirror = relabellings(from.m, hydrogens)
	if l.name == gfn2.name {
		if sub.top, err = hf3c(from.m); err != nil {
			return nil, err
		}
	}
	return sub, sub.relaxAll(ctx, from.shapes)
}

// relaxAll fills the list of minima, the lowest first.
func (sub *subject) relaxAll(ctx context.Context, shapes [][]float64) error {
	var xs [][]float64
	var energies []float64
	for n, start := range shapes {
		p, err := sub.freed(ctx, start)
		if err != nil {
			return fmt.Errorf("%s: shape %d: %w", sub.level.name, n+1, err)
		}
		xs, energies = append(xs, p.x), append(energies, p.energy*units.KcalPerMol)
	}
	c := dedupe.NewComparer(sub.m, dedupe.Options{PolarHydrogens: true}) // as a run does
	for _, g := range dedupe.Unique(c, xs, energies, dedupe.DefaultThresholds()) {
		sub.minima = append(sub.minima, &point{x: xs[g.Keep], energy: energies[g.Keep] / units.KcalPerMol})
	}
	return nil
}

// settled relaxes start under holds.
func (sub *subject) settled(ctx context.Context, start []float64, holds []hold) (*point, error) {
	p := &point{x: slices.Clone(start)}
	var err error
	p.energy, err = settle(ctx, sub.m, sub.surface, p.x, holds, sub.level.rms)
	return p, err
}

// freed relaxes start without holds, as it is and shaken, and returns the lowest
// point: symmetry keeps methyl groups on top of their barriers where two tiers
// disagree about the way they point, and that may cost 1 kcal/mol.
func (sub *subject) freed(ctx context.Context, start []float64) (*point, error) {
	lowest, err := sub.settled(ctx, start, nil)
	for seed := uint64(1); seed <= 2 && err == nil; seed++ {
		var p *point
		if p, err = sub.settled(ctx, shaken(start, seed), nil); err == nil && p.energy < lowest.energy {
			lowest = p
		}
	}
	return lowest, err
}

// shaken moves each coordinate by up to 0.1 angstrom.
func shaken(x []float64, seed uint64) []float64 {
	random := rand.New(rand.NewPCG(seed, 2))
	y := slices.Clone(x)
	for i := range y {
		y[i] += (2*random.Float64() - 1) * 0.1 * units.Angstrom
	}
	return y
}

// errNoMinimum: the level has no minimum of the shape asked for.
var errNoMinimum = errors.New("no such minimum")

// minimaOf returns the minima that have the shape. Where the search led to
// none, the lowest minimum is brought to the shape and let go.
func (sub *subject) minimaOf(ctx context.Context, s shape) ([]*point, error) {
	var found []*point
	for _, p := range sub.minima {
		if sub.has(p.x, s) {
			found = append(found, p)
		}
	}
	if len(found) > 0 {
		return found, nil
	}
	p, err := sub.held(ctx, s, keep(s))
	if err == nil {
		p, err = sub.freed(ctx, p.x)
	}
	if err != nil {
		return nil, err
	}
	if !sub.has(p.x, s) {
		return nil, errNoMinimum
	}
	p.led = true
	sub.minima = append(sub.minima, p)
	return []*point{p}, nil
}

// held brings the lowest minimum to a shape and relaxes the rest under holds.
func (sub *subject) held(ctx context.Context, s shape, holds []hold) (*point, error) {
	x := slices.Clone(sub.minima[0].x)
	bring(sub.m, x, s)
	p, err := sub.settled(ctx, x, keep(s))
	if err != nil {
		return nil, err
	}
	return sub.settled(ctx, p.x, holds)
}

// hfEnergy is the HF-3c energy at p, kcal/mol.
func (sub *subject) hfEnergy(ctx context.Context, p *point) (float64, error) {
	if !p.hfDone {
		e, err := sub.top.Energy(ctx, p.x)
		if err != nil {
			return 0, err
		}
		p.hf, p.hfDone = e.Energy/units.KcalPerMol, true
	}
	return p.hf, nil
}
