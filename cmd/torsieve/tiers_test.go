package main

import (
	"testing"

	"torsieve/molecule"
	"torsieve/molecule/smiles"
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
