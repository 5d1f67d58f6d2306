package solvent

import (
	"fmt"
	"testing"
)

// Times of what is done once a geometry, once a gradient and once a cycle of
// self-consistency.
func BenchmarkModel(b *testing.B) {
	for _, name := range []string{"glycine_dipeptide", "1yqy", "1hwi", "1t46"} {
		m := find(b, name)
		model, x, q := m.model(b, "water"), m.coordinates(), m.solvated["water"].Charges
		grad, v := make([]float64, len(x)), make([]float64, len(q))
		for _, phase := range []struct {
			name string
			do   func() error
		}{
			{"update", func() error { return model.Update(x) }},
			{"gradient", func() error { model.AddGradient(q, grad); return nil }},
			{"potential", func() error { model.ReactionField(q, v); model.HydrogenBonds(q, v); return nil }},
		} {
			b.Run(fmt.Sprintf("atoms=%d/phase=%s", len(q), phase.name), func(b *testing.B) {
				b.ReportAllocs()
				for b.Loop() {
					if err := phase.do(); err != nil {
						b.Fatal(err)
					}
				}
			})
		}
	}
}
