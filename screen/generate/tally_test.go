package generate

import (
	"context"
	"math"
	"testing"

	"torsieve/internal/geom"
)

// Of shapes a, a, b, c, c, c one was met once in six: Good's estimate, worked
// out by hand.
func TestUnseen(t *testing.T) {
	s := searchOf(t, "OCCCCCO")
	tally := s.newTally()
	if got := tally.unseen(); got != 1 {
		t.Errorf("nothing seen: %g, want 1", got)
	}
	for k, turns := range [][]float64{{0, 0}, {0, 0}, {1, 0}, {2, 2}, {2, 2}, {2, 2}} {
		x := make([]float64, 3*s.m.NumAtoms())
		rec := recipe{make([]int, len(s.assembly.frags)), make([]float64, len(s.assembly.turns))}
		copy(rec.angles, turns)
		s.assembly.force(rec, x)
		s.pool = append(s.pool, entry{x: x, energy: 0, start: k})
	}
	tally.take(s.pool)
	if got := tally.unseen(); math.Abs(got-1.0/6) > 1e-15 {
		t.Errorf("unseen %g, want 1/6", got)
	}
	if tally.exhausted() {
		t.Error("six structures end the search")
	}
}

// A search of few shapes ends long before its budget, one of many does not, and
// says that there is more.
func TestSearchEnds(t *testing.T) {
	o := Defaults()
	o.Max, o.Relaxations = 50, 1000
	for _, c := range []struct {
		smiles string
		ends   bool
	}{{"CCCC", true}, {"OCC(O)CC(N)CCC(O)CCO", false}} {
		m := parse(t, c.smiles)
		isomers, err := m.Isomers(8)
		if err != nil {
			t.Fatal(err)
		}
		res, err := Conformers(context.Background(), isomers[0], c.smiles, o)
		if err != nil {
			t.Fatal(err)
		}
		if ended := res.Relaxed < o.Relaxations/2; ended != c.ends || c.ends != (res.Unseen < shapeTolerance) {
			t.Errorf("%s: %d relaxed, unseen %g; ends: want %v", c.smiles, res.Relaxed, res.Unseen, c.ends)
		}
	}
}

// The restraint's gradient is that of its energy: central differences along
// every coordinate of a bent structure.
func TestHeldGradient(t *testing.T) {
	s := searchOf(t, drugs[1])
	ctx := context.Background()
	x := make([]float64, 3*s.m.NumAtoms())
	rec, ok := s.sampler.draw(stream(1, "x", streamDraw, 0), nil, x)
	if !ok {
		t.Fatal("no structure")
	}
	angles := append([]float64(nil), rec.angles...)
	for k := range angles {
		angles[k] += 0.3 * float64(k%3-1)
	}
	h := &heldSurface{field: s.surface.Slope(), turns: s.assembly.turns, angles: angles, strength: holding}
	grad, scratch := make([]float64, len(x)), make([]float64, len(x))
	if _, err := h.Gradient(ctx, grad, x); err != nil {
		t.Fatal(err)
	}
	const step = 1e-4
	value := func() float64 {
		e, err := h.Gradient(ctx, scratch, x)
		if err != nil {
			t.Fatal(err)
		}
		return e
	}
	for i := range x {
		was := x[i]
		x[i] = was + step
		up := value()
		x[i] = was - step
		down := value()
		x[i] = was
		if want := (up - down) / (2 * step); math.Abs(grad[i]-want) > 1e-6*(1+math.Abs(want)) {
			t.Errorf("coordinate %d: gradient %g, difference %g hartree/bohr", i, grad[i], want)
		}
	}
}

// Held structures stay nearer to the angles that they were put at than free ones.
func TestHeldStays(t *testing.T) {
	s := searchOf(t, drugs[2])
	ctx := context.Background()
	var held, free float64
	for k := range 10 {
		x := make([]float64, 3*s.m.NumAtoms())
		rec, ok := s.sampler.draw(stream(2, "x", streamDraw, k), nil, x)
		if !ok {
			continue
		}
		y := append([]float64(nil), x...)
		if _, err := s.relaxedHeld(ctx, x, rec, barely); err != nil {
			t.Fatal(err)
		}
		if _, err := s.relaxed(ctx, y, barely); err != nil {
			t.Fatal(err)
		}
		for n, turn := range s.assembly.turns {
			held += math.Abs(math.Remainder(geom.Dihedral(x, turn.a, turn.b, turn.c, turn.d)-rec.angles[n], 2*math.Pi))
			free += math.Abs(math.Remainder(geom.Dihedral(y, turn.a, turn.b, turn.c, turn.d)-rec.angles[n], 2*math.Pi))
		}
	}
	if held > 0.6*free {
		t.Errorf("rotors moved by %g radians held and %g free in sum", held, free)
	}
}

// What is bred has every rotor near an angle of one of its parents but the few
// drawn anew, and ring shapes of theirs.
func TestBreeding(t *testing.T) {
	s := searchOf(t, drugs[0])
	ctx := context.Background()
	for k := range 40 {
		x := make([]float64, 3*s.m.NumAtoms())
		if rec, ok := s.sampler.draw(stream(4, "x", streamDraw, k), nil, x); ok {
			if err := s.add(ctx, x, rec, true); err != nil {
				t.Fatal(err)
			}
		}
	}
	b := &breeder{s: s}
	b.learn()
	if !b.ready() {
		t.Fatalf("%d parents", len(b.parents))
	}
	rotors, strange := 0, 0
	for k := range 30 {
		x := make([]float64, 3*s.m.NumAtoms())
		rec, ok := b.draw(stream(5, "x", streamDraw, k), x)
		if !ok {
			continue
		}
		if err := s.m.StereoMatches(x); err != nil {
			t.Error(err)
		}
		for n, angle := range rec.angles {
			rotors++
			near := false
			for _, p := range b.parents {
				near = near || math.Abs(math.Remainder(angle-p.recipe.angles[n], 2*math.Pi)) < 1e-3+4*nudge*s.assembly.turns[n].states[0].spread
			}
			if !near {
				strange++
			}
		}
	}
	if rotors == 0 || strange*5 > rotors {
		t.Errorf("%d of %d rotors are like no parent's", strange, rotors)
	}
}
