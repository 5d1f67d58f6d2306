package main

import (
	"math"
	"testing"

	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/molecule/smiles"
	"torsieve/screen"
	"torsieve/screen/generate"
	"torsieve/screen/tiertest"
)

// Every tier keeps the laws that a run relies on, for a neutral molecule with
// sulfur and for an ion.
func TestTiersKeepTheLaws(t *testing.T) {
	for _, text := range []string{"OCCS", "CC(=O)[O-]"} {
		m, x := bent(t, text)
		for _, name := range tierNames {
			t.Run(name+" "+text, func(t *testing.T) {
				tier, err := newTier(name, tierOptions{finalOptions: finalOptions{Final: "hf-3c"}, Accuracy: 0.01})
				if err != nil {
					t.Fatal(err)
				}
				tiertest.Run(t, tier, m, x, 1e-8)
			})
		}
	}
}

// bent is a shape of the generator with every atom moved off its place.
func bent(t *testing.T, text string) (*molecule.Molecule, []float64) {
	t.Helper()
	m, _, err := smiles.Parse(text)
	if err != nil {
		t.Fatal(err)
	}
	r, err := generate.Conformers(t.Context(), m, text, generate.Defaults())
	if err != nil || len(r.Conformers) == 0 {
		t.Fatalf("%s: %d shapes, %v", text, len(r.Conformers), err)
	}
	x := r.Conformers[0].X
	for i := range x {
		x[i] += 0.05 * float64(i%5-2)
	}
	return m, x
}

// The error of a small stiff molecule is not extrapolated to nothing; that of
// larger ones is the published fit: for 25 heavy atoms and 5 rotatable bonds of
// GFN2-xTB 0.30 kcal/mol.
func TestScatterStaysWhereItWasMeasured(t *testing.T) {
	for _, c := range []struct {
		smiles string
		want   float64 // kcal/mol
	}{
		{"CCO", leastScatter},
		{"c1ccccc1CCCCCc1ccccc1CCCCCCCC", 0.30 * math.Pow(25.0/25, 0.43) * math.Pow(14.0/6, 1.61)},
	} {
		m, _, err := smiles.Parse(c.smiles)
		if err != nil {
			t.Fatal(err)
		}
		s, known := semiempiricalTier{}.Scatter(m)
		if got := s.Scale / units.KcalPerMol; !known || math.Abs(got-c.want) > 1e-9 {
			t.Errorf("%s, %d heavy atoms, %d rotors: %.3f kcal/mol, want %.3f", c.smiles, m.HeavyAtoms(), screen.Flexibility(m), got, c.want)
		}
	}
}
