package solvent

import (
	"math"
	"slices"
	"testing"
)

// What is left in scratch memory does not matter, and nothing is allocated.
func TestScratchMemory(t *testing.T) {
	m := find(t, "difluoroacetate")
	model, x, q := m.model(t, "water"), m.coordinates(), m.solvated["water"].Charges
	want, got, v := make([]float64, len(x)), make([]float64, len(x)), make([]float64, len(q))
	model.AddGradient(q, want)
	parts := model.Parts(q)
	scratch := [][]float64{model.slope, model.unused, model.perArea, model.pairs.r, model.pairs.x, model.born.psi, model.born.radius, model.born.slope,
		model.born.response, model.reaction.matrix, model.reaction.field, model.reaction.dEdb, model.area.value}
	for _, s := range scratch {
		for i := range s {
			s[i] = math.NaN()
		}
	}
	for i := range model.area.links {
		model.area.links[i].slope[1] = math.NaN()
	}
	if err := model.Update(x); err != nil {
		t.Fatal(err)
	}
	model.AddGradient(q, got)
	if !slices.Equal(got, want) || model.Parts(q) != parts {
		t.Error("the result depends on what was in scratch memory before")
	}
	if n := testing.AllocsPerRun(20, func() {
		if err := model.Update(x); err != nil {
			t.Fatal(err)
		}
		model.ReactionField(q, v)
		model.HydrogenBonds(q, v)
		model.AddGradient(q, got)
	}); n != 0 {
		t.Errorf("%g allocations a geometry, want none", n)
	}
}
