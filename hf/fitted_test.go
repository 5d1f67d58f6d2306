package hf

import (
	"context"
	"errors"
	"math"
	"testing"
	"time"
)

func TestFittedSmallSystems(t *testing.T) {
	entries(t, "fitted-small-systems.json.gz",
		func(s *referenceSystem, r *referenceResult) bool { return r.Functions <= 40 },
		func(t *testing.T, s *referenceSystem, r *referenceResult) { check(t, s, r, 0.01, 1e-8) })
}

func TestFittedUnrestrictedSystems(t *testing.T) {
	entries(t, "fitted-uhf-small-systems.json.gz",
		func(s *referenceSystem, r *referenceResult) bool { return r.Functions <= 62 },
		func(t *testing.T, s *referenceSystem, r *referenceResult) { check(t, s, r, 0.01, 1e-8) })
}

// Integrals that are computed anew in each build, for some orbitals at a time or
// for all, give what stored ones give; one spin and two.
func TestFittedDirectMatchesStored(t *testing.T) {
	for _, c := range []struct {
		name, basis string
		mult        int
	}{{"H2CO", "def2-SVP", 1}, {"CH3OH", "MINIX", 3}, {"H2S", "def2-TZVP", 1}} {
		s := find(t, c.name)
		surface, err := New(s.numbers(t), 0, c.mult, Options{Method: "hf", Basis: c.basis, Accuracy: 0.01, TwoElectron: "fitted"})
		if err != nil {
			t.Fatal(err)
		}
		e := surface.engine.(*fittedEngine)
		var want float64
		for i := range 3 {
			switch i {
			case 1:
				e.budget = storedBytes(e.n, e.aux, e.pairs.rows()) - 1
			case 2:
				e.budget = directBytes(e.n, e.aux, 2)
			}
			p, err := surface.Energy(t.Context(), s.coordinates())
			if err != nil {
				t.Fatal(err)
			}
			if e.stored != (i == 0) {
				t.Fatalf("%s: stored is %v with %d bytes", c.name, e.stored, e.budget)
			}
			if i == 0 {
				want = p.Energy
			} else if d := p.Energy - want; math.Abs(d) > 1e-9 {
				t.Errorf("%s: computed anew, the energy differs by %.1e hartree", c.name, d)
			}
		}
	}
}

// The same call gives the same bits, whatever geometry came between, where the
// integrals are kept and where they are not; also after the correlation energy has
// given them up.
func TestFittedSameBits(t *testing.T) {
	s := find(t, "H2CO")
	x := s.coordinates()
	far := clone(x)
	far[0] += 0.7
	far[5] -= 3
	for _, method := range []string{"hf-d3", "scs-mp2"} {
		for _, budget := range []int64{0, 1} {
			surface, err := New(s.numbers(t), 0, 1, Options{Method: method})
			if err != nil {
				t.Fatal(err)
			}
			if budget > 0 {
				surface.engine.(*fittedEngine).budget = budget
			}
			var energies []float64
			for _, at := range [][]float64{x, far, x} {
				p, err := surface.Energy(t.Context(), at)
				if err != nil {
					t.Fatal(err)
				}
				energies = append(energies, p.Energy)
			}
			if energies[0] != energies[2] || energies[0] == energies[1] {
				t.Errorf("%s: %.17g, then %.17g; between them %.17g", method, energies[0], energies[2], energies[1])
			}
		}
	}
}

// A context that ends stops a fitted run soon, in the integrals too.
func TestFittedStops(t *testing.T) {
	s := readReference(t, "drug-like.json")[0]
	surface, err := New(s.numbers(t), s.Charge, 1, Options{Method: "hf-d3"})
	if err != nil {
		t.Fatal(err)
	}
	ctx, cancel := context.WithTimeout(t.Context(), 50*time.Millisecond)
	defer cancel()
	if _, err := surface.Energy(ctx, s.coordinates()); !errors.Is(err, context.DeadlineExceeded) {
		t.Errorf("error %v, want that of the context", err)
	}
}
