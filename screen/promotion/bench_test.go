package promotion

import (
	"math/rand/v2"
	"testing"
)

// A ligand of a thousand conformers after its first batch: what one look at the
// missed weight costs.
func BenchmarkMissed(b *testing.B) {
	l := maker{prior: quantum, least: 1000, most: 1000, span: 10}.ligand(rand.New(rand.NewPCG(1, 2)))
	p, err := New(l.candidates, quantum, Defaults())
	if err != nil {
		b.Fatal(err)
	}
	for _, i := range p.Next() {
		if err := p.Computed(i, l.upper[i]); err != nil {
			b.Fatal(err)
		}
	}
	for b.Loop() {
		p.fresh = nil
		p.Missed()
	}
}
