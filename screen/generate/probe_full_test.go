//go:build full

package generate

import (
	"context"
	"testing"
	"time"

	"torsieve/forcefield"
	"torsieve/internal/relax"
	"torsieve/molecule/smiles"
)

func TestProbe(t *testing.T) {
	m, _, err := smiles.Parse("CCC(CC)Nc1cc(C([O-])=O)ccc1N(C(CO)(CO)CC1)C1=O")
	if err != nil {
		t.Fatal(err)
	}
	ctx := context.Background()
	s, err := newSearch(ctx, m, "x", Defaults())
	if err != nil {
		t.Fatal(err)
	}
	for k, tr := range s.assembly.turns {
		t.Log(k, tr.a, tr.b, tr.c, tr.d, tr.class, len(tr.states))
	}
	for k, f := range s.assembly.frags {
		t.Log(k, f.core, f.outside, len(f.shapes), f.model.Formula(), f.rings)
	}
	var xs [][]float64
	for k := range 40 {
		x := make([]float64, 3*m.NumAtoms())
		if _, _, ok := s.sampler.draw(stream(1, "a", 1, k), nil, x); ok {
			xs = append(xs, x)
		}
	}
	for _, charges := range []string{"none", "eeq"} {
		o := forcefield.Defaults()
		o.Charges = charges
		f, _ := forcefield.New(m, o)
		if err := f.FreezeCharges(xs[0]); err != nil {
			t.Fatal(err)
		}
		for _, set := range []relax.Settings{
			{RMSGradient: 4e-4, MaxGradients: 150, EnergyChange: 2e-5},
			{RMSGradient: 4e-4, MaxGradients: 50},
			{RMSGradient: 2e-4, MaxGradients: 1500},
			{RMSGradient: 1e-4, MaxGradients: 1500},
			{RMSGradient: 5e-5, MaxGradients: 1500},
			{RMSGradient: 1e-4, MaxGradients: 1500, Numbers: m.Numbers()},
		} {
			n := 0
			begun := time.Now()
			for _, x := range xs {
				y := append([]float64(nil), x...)
				res, err := f.Minimise(ctx, y, set)
				if err != nil {
					t.Log(err)
				}
				n += res.Gradients
			}
			d := time.Since(begun)
			t.Logf("%s %v: %d gradients each, %.1f us each", charges, set.RMSGradient, n/len(xs), d.Seconds()*1e6/float64(n))
		}
	}
}
