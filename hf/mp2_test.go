package hf

import (
	"math"
	"strings"
	"testing"
)

// Values: testdata/reference/hf/ri-mp2.json; their source is in it.
func TestMP2(t *testing.T) {
	var f struct {
		Systems []struct {
			Name, Basis string
			Field       float64 `json:"hf_df"`
			Same        float64 `json:"same_spin"`
			Opposite    float64 `json:"opposite_spin"`
		}
	}
	decodeFile(t, "../testdata/reference/hf/ri-mp2.json", &f)
	if len(f.Systems) != 11 {
		t.Fatalf("%d systems, want 11", len(f.Systems))
	}
	for _, want := range f.Systems {
		t.Run(want.Name+"/"+want.Basis, func(t *testing.T) {
			s := find(t, want.Name)
			p := point(t, s.numbers(t), s.Charge, 1, s.coordinates(), Options{Method: "mp2", Basis: want.Basis})
			part := map[string]float64{}
			for _, q := range p.Parts {
				part[q.Name] = q.Energy
			}
			same, opposite := part["same-spin correlation"], part["opposite-spin correlation"]
			t.Logf("off by %.1e, %.1e, %.1e", p.Energy-same-opposite-want.Field, same-want.Same, opposite-want.Opposite)
			if math.Abs(same-want.Same) > 1e-7 || math.Abs(opposite-want.Opposite) > 1e-7 {
				t.Errorf("same and opposite spin %.9f, %.9f; want %.9f, %.9f", same, opposite, want.Same, want.Opposite)
			}
			if d := p.Energy - same - opposite - want.Field; math.Abs(d) > 1e-8 {
				t.Errorf("the field's energy is off by %.1e", d)
			}
		})
	}
}

// The scaled forms are made of the same two numbers, and blocks of orbitals, down
// to one at a time, change neither.
func TestMP2ScaledAndBlocked(t *testing.T) {
	s := find(t, "formamide")
	numbers, x := s.numbers(t), s.coordinates()
	energies := func(method string, budget int64) (same, opposite, all float64) {
		surface, err := New(numbers, 0, 1, Options{Method: method})
		if err != nil {
			t.Fatal(err)
		}
		if budget > 0 {
			surface.beyond.budget = budget
		}
		p, err := surface.Energy(t.Context(), x)
		if err != nil {
			t.Fatal(err)
		}
		for _, q := range p.Parts {
			switch q.Name {
			case "same-spin correlation":
				same = q.Energy
			case "opposite-spin correlation":
				opposite = q.Energy
			}
		}
		return same, opposite, p.Energy
	}
	same, opposite, _ := energies("mp2", 0)
	for _, c := range []struct {
		method string
		budget int64
		s, o   float64
	}{{"scs-mp2", 0, 1.0 / 3, 1.2}, {"sos-mp2", 0, 0, 1.3}, {"mp2", 1, 1, 1}, {"mp2", 8 << 20, 1, 1}} {
		gotSame, gotOpposite, _ := energies(c.method, c.budget)
		if math.Abs(gotSame-c.s*same) > 1e-9 || math.Abs(gotOpposite-c.o*opposite) > 1e-9 {
			t.Errorf("%s with %d bytes: %.9f, %.9f; want %.9f, %.9f", c.method, c.budget, gotSame, gotOpposite, c.s*same, c.o*opposite)
		}
	}
}

func TestMP2Refusals(t *testing.T) {
	if _, err := New([]int{6, 1, 1, 1}, 0, 2, Options{Method: "mp2"}); err == nil || !strings.Contains(err.Error(), "closed shells only") {
		t.Errorf("a radical: %v", err)
	}
	if _, err := New([]int{8, 1, 1}, 0, 1, Options{Method: "mp2", Basis: "6-31G*"}); err == nil || !strings.Contains(err.Error(), "no fitting set for the basis 6-31G*") {
		t.Errorf("6-31G*: %v", err)
	}
}
