package semiempirical

import (
	"context"
	"errors"
	"math"
	"strings"
	"testing"

	"torsieve/internal/scf"
)

func TestNewRefuses(t *testing.T) {
	for _, tc := range []struct {
		name                 string
		numbers              []int
		charge, multiplicity int
		options              Options
		says                 string
	}{
		{"francium", []int{9, 87}, 0, 1, Options{}, "atom 2 is Fr"},
		{"no atoms", nil, 0, 1, Options{}, "no electrons"},
		{"negative number", []int{-6}, 0, 1, Options{}, "atomic number -6"},
		{"ghost atom", []int{0}, 0, 1, Options{}, "atomic number 0"},
		{"beyond the table", []int{200}, 0, 1, Options{}, "atomic number 200"},
		{"bare proton", []int{1}, 1, 1, Options{}, "no electrons"},
		{"too positive", []int{6, 1, 1, 1, 1}, 9, 1, Options{}, "no electrons"},
		{"too negative", []int{1, 1}, -3, 2, Options{}, "room"},
		{"odd electrons, singlet", []int{6, 1, 1, 1}, 0, 1, Options{}, "odd number of electrons"},
		{"even electrons, doublet", []int{8, 1, 1}, 0, 2, Options{}, "even number of electrons"},
		{"more unpaired than electrons", []int{1, 1}, 0, 5, Options{}, "unpaired"},
		{"unpaired without room", []int{2}, 0, 3, Options{}, ""},
		{"no multiplicity", []int{1, 1}, 0, 0, Options{}, "at least 1"},
		{"accuracy", []int{1, 1}, 0, 1, Options{Accuracy: math.NaN()}, "accuracy"},
		{"temperature", []int{1, 1}, 0, 1, Options{Temperature: -1}, "temperature"},
		{"cycles", []int{1, 1}, 0, 1, Options{MaxCycles: -1}, "cycles"},
	} {
		t.Run(tc.name, func(t *testing.T) {
			_, err := New(tc.numbers, tc.charge, tc.multiplicity, tc.options)
			if tc.says == "" { // helium has a 2p shell in the method
				if err != nil {
					t.Errorf("refused: %v", err)
				}
				return
			}
			if err == nil || !strings.Contains(err.Error(), tc.says) {
				t.Errorf("error %v, want one with %q", err, tc.says)
			}
		})
	}
	var unsupported *Unsupported
	if _, err := New([]int{92}, 0, 1, Options{}); !errors.As(err, &unsupported) || unsupported.Z != 92 {
		t.Errorf("uranium: %v, want *Unsupported", err)
	}
	var electrons *ElectronsError
	if _, err := New([]int{7}, 0, 1, Options{}); !errors.As(err, &electrons) || electrons.Electrons != 5 {
		t.Errorf("nitrogen as a singlet: %v, want *ElectronsError", err)
	}
}

func TestGeometriesRefused(t *testing.T) {
	s, err := New([]int{1, 1, 8}, 0, 1, Options{})
	if err != nil {
		t.Fatal(err)
	}
	var close *CloseAtomsError
	if _, err := s.Energy(t.Context(), []float64{0, 0, 0, 0, 0, 0.3, 0, 2, 0}); !errors.As(err, &close) || close.I != 0 || close.J != 1 {
		t.Errorf("atoms on one another: %v", err)
	}
	for _, bad := range []float64{math.NaN(), math.Inf(1)} {
		var notFinite *NotFiniteError
		_, err := s.Energy(t.Context(), []float64{0, 0, 0, 0, 0, 2, 0, bad, 0})
		if !errors.As(err, &notFinite) || notFinite.Atom != 2 || notFinite.Axis != 1 || !strings.Contains(err.Error(), "atom 3: coordinate y") {
			t.Errorf("coordinate %g: %v", bad, err)
		}
	}
	// and the surface is as good as new
	water := []float64{0, 0.119, 0, 1.43, -0.952, 0, -1.43, -0.952, 0}
	s, _ = New([]int{8, 1, 1}, 0, 1, Options{})
	want, _ := s.Energy(t.Context(), water)
	if _, err := s.Energy(t.Context(), make([]float64, 9)); err == nil {
		t.Error("three atoms at one place were accepted")
	}
	s.Reset()
	if got, err := s.Energy(t.Context(), water); err != nil || got.Energy != want.Energy {
		t.Errorf("after a refusal: %v, %v, want %v", got.Energy, err, want.Energy)
	}
}

func TestCyclesRunOut(t *testing.T) {
	m := named(t, "glycine")
	s, err := New(m.numbers(), 0, 1, Options{MaxCycles: 2})
	if err != nil {
		t.Fatal(err)
	}
	_, err = s.Energy(t.Context(), m.coordinates())
	if !errors.Is(err, ErrNotConverged) || !errors.Is(err, scf.ErrNotConverged) || !strings.Contains(err.Error(), "14 cycles") {
		t.Errorf("error %v, want ErrNotConverged after 2 cycles of each mixing and at five temperatures", err)
	}
}

func TestContextEnds(t *testing.T) {
	m := named(t, "glycine")
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	if _, err := m.surface(t, 1).Energy(ctx, m.coordinates()); !errors.Is(err, context.Canceled) {
		t.Errorf("error %v, want the context's", err)
	}
}

func TestSmallGapIsSaid(t *testing.T) {
	m := named(t, "pdb-1o3m") // the reference library gives a gap of 0.42 eV
	p, err := m.surface(t, 1).Energy(t.Context(), m.coordinates())
	if err != nil {
		t.Fatal(err)
	}
	if len(p.Warnings) != 1 || !strings.Contains(p.Warnings[0], "0.42 eV") {
		t.Errorf("warnings %q", p.Warnings)
	}
}
