package forcefield

import (
	"testing"

	"torsieve/internal/relax"
)

// BenchmarkGradient times the default surface on the largest of the reference
// ligands.
func BenchmarkGradient(b *testing.B) {
	s, x := largestLigand(b)
	grad := make([]float64, len(x))
	slope := s.Slope()
	b.ReportAllocs()
	for b.Loop() {
		if _, err := slope.Gradient(b.Context(), grad, x); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkMinimise times a relaxation from the crystal geometry to the
// accuracy of screening.
func BenchmarkMinimise(b *testing.B) {
	s, x := largestLigand(b)
	gradients := 0
	for b.Loop() {
		y := append([]float64(nil), x...)
		res, err := s.Minimise(b.Context(), y, relax.Settings{RMSGradient: 1e-4})
		if err != nil {
			b.Fatal(err)
		}
		gradients = res.Gradients
	}
	b.ReportMetric(float64(gradients), "gradients")
}

func largestLigand(b *testing.B) (*Surface, []float64) {
	recs := records(b, "uff", "ligands.sdf.gz")
	best := 0
	for n, r := range recs {
		if len(r.X) > len(recs[best].X) {
			best = n
		}
	}
	s, err := New(recs[best].Mol, Defaults())
	if err != nil {
		b.Fatal(err)
	}
	if err := s.FreezeCharges(recs[best].X); err != nil {
		b.Fatal(err)
	}
	b.Logf("%s, %d atoms", recs[best].Title, recs[best].Mol.NumAtoms())
	return s, recs[best].X
}
