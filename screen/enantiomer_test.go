package screen

import (
	"math"
	"testing"

	"torsieve/molecule/smiles"
	"torsieve/screen/generate"
)

// A law: nothing in a run tells enantiomers apart, so their shapes are mirror
// images and their energies the same.
func TestEnantiomersGetMirrorImages(t *testing.T) {
	shapes := func(s string) generate.Result {
		t.Helper()
		m, _, err := smiles.Parse(s)
		if err != nil {
			t.Fatal(err)
		}
		found, err := Shapes(t.Context(), &Ligand{Mol: m, SMILES: m.SMILES()}, generate.Defaults())
		if err != nil {
			t.Fatal(err)
		}
		for _, c := range found.Conformers {
			if err := m.StereoMatches(c.X); err != nil {
				t.Errorf("%s: %v", s, err)
			}
		}
		return found
	}
	for _, pair := range [][2]string{
		{"C[C@H](O)[C@@H](N)CF", "C[C@@H](O)[C@H](N)CF"},
		{"C[C@@H](NC=O)c1ccccc1", "C[C@H](NC=O)c1ccccc1"},
	} {
		a, b := shapes(pair[0]), shapes(pair[1])
		if len(a.Conformers) != len(b.Conformers) {
			t.Fatalf("%s: %d shapes, its mirror image %d", pair[0], len(a.Conformers), len(b.Conformers))
		}
		for i := range a.Conformers {
			x, y := a.Conformers[i], b.Conformers[i]
			if x.Energy != y.Energy {
				t.Errorf("%s: shape %d at %.12g, its mirror image at %.12g hartree", pair[0], i, x.Energy, y.Energy)
			}
			for k, v := range mirrorShape(x.X) {
				if math.Abs(v-y.X[k]) > 1e-12 {
					t.Fatalf("%s: shape %d is not the mirror image", pair[0], i)
				}
			}
		}
	}
}
