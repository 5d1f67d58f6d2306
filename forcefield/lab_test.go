package forcefield

import (
	"context"
	"math"
	"slices"
	"testing"

	"torsieve/internal/geom"
	"torsieve/internal/relax"
)

// A lab is a molecule at the lowest minimum that some crooked starts lead to,
// for asking what its conformers cost.
type lab struct {
	t      *testing.T
	s      *Surface
	x      []float64
	energy float64 // hartree
}

// newLab relaxes from starts starting structures. The minima that tests ask for
// are then reached from the lowest by turning bonds, so few starts are enough.
func newLab(t *testing.T, smiles string, o Options, starts int) *lab {
	t.Helper()
	m := parse(t, smiles)
	s, err := New(m, o)
	if err != nil {
		t.Fatal(err)
	}
	l := &lab{t: t, s: s, energy: math.Inf(1)}
	for seed := range uint64(starts) {
		x := l.start(seed)
		if e := l.minimise(x); e < l.energy {
			l.energy, l.x = e, x
		}
	}
	if o.Charges == "eeq" {
		if err := s.FreezeCharges(l.x); err != nil {
			t.Fatal(err)
		}
		l.energy = l.minimise(l.x)
	}
	return l
}

func (l *lab) start(seed uint64) []float64 {
	x := spread(l.s.tables.m.NumAtoms(), seed+11)
	if _, err := l.s.Softened().Minimise(l.t.Context(), x, loose); err != nil {
		l.t.Fatal(err)
	}
	return x
}

// minimise relaxes x in place to the accuracy of comparing minima.
func (l *lab) minimise(x []float64) float64 {
	res, err := l.s.Minimise(l.t.Context(), x, tight)
	if err != nil || res.Status.Err() != nil {
		l.t.Fatalf("%+v, %v", res, err)
	}
	return res.Energy
}

// A hold is a dihedral angle and the degrees that it is held at.
type hold struct {
	i, j, k, l int
	degrees    float64
}

// stiff is the restraint of a scan, 1e4 kcal/mol/rad^2, as in the reference.
const stiff = 1e4 * kcal

// held turns x to the given dihedrals, relaxes all else, and returns the energy
// in kcal/mol without the restraint. Ring dihedrals are driven, not turned.
func (l *lab) held(x []float64, holds ...hold) float64 {
	for _, h := range holds {
		l.turn(x, h)
	}
	surface := relax.Func(func(ctx context.Context, grad, x []float64) (float64, error) {
		e, err := l.s.Slope().Gradient(ctx, grad, x)
		for _, h := range holds {
			off := math.Remainder(geom.Dihedral(x, h.i, h.j, h.k, h.l)-h.degrees*degree, 2*math.Pi)
			e += 0.5 * stiff * off * off
			geom.AddDihedral(grad, x, h.i, h.j, h.k, h.l, stiff*off)
		}
		return e, err
	})
	set := tight
	set.MaxGradient = 1e-6
	set.Numbers = l.s.tables.numbers
	res, err := relax.Minimise(l.t.Context(), surface, x, set)
	if err != nil || res.Status.Err() != nil {
		l.t.Fatalf("held at %v: %+v, %v", holds, res, err)
	}
	p, err := l.s.Energy(l.t.Context(), x)
	if err != nil {
		l.t.Fatal(err)
	}
	return p.Energy / kcal
}

// near brings the lowest minimum to the given dihedrals, lets go, and returns
// the minimum reached and its energy above the lowest in kcal/mol.
func (l *lab) near(holds ...hold) (float64, []float64) {
	x := slices.Clone(l.x)
	l.held(x, holds...)
	return (l.minimise(x) - l.energy) / kcal, x
}

// above returns the relaxed energy at the given dihedrals above the lowest
// minimum, kcal/mol.
func (l *lab) above(holds ...hold) float64 {
	return l.held(slices.Clone(l.x), holds...) - l.energy/kcal
}

// turn sets a dihedral by turning l's side about j-k, if the bond is in no ring.
func (l *lab) turn(x []float64, h hold) {
	m := l.s.tables.m
	if k, ok := m.BondBetween(h.j, h.k); !ok || m.BondInRing(k) {
		return
	}
	seen := map[int]bool{h.j: true, h.k: true}
	side := []int{h.k}
	for n := 0; n < len(side); n++ {
		for _, a := range m.Neighbours(side[n]) {
			if !seen[a] {
				seen[a] = true
				side = append(side, a)
			}
		}
	}
	geom.RotateAbout(x, h.j, h.k, side, h.degrees*degree-geom.Dihedral(x, h.i, h.j, h.k, h.l))
}
