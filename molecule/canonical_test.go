package molecule_test

import (
	"math/rand/v2"
	"testing"

	"torsieve/molecule/smiles"
)

// cages are molecules whose symmetry is hard on a canonical order; with stereo
// where it has a pattern of its own.
var cages = []string{
	"C12C3C4C1C5C2C3C45", // cubane
	"C1C2CC3CC1CC(C2)C3", // adamantane
	"C12C3C1C4C2C34",     // prismane-like
	"C1CC2CCC1CC2",       // bicyclo[2.2.2]octane
	"C12C3C4C5C1C6C7C2C8C3C9C4C%10C5C6C%11C7C8C9C%10%11", // dodecahedrane
	"O[C@H]1[C@H](O)[C@@H](O)[C@H](O)[C@H](O)[C@@H]1O",   // inositols
	"O[C@H]1[C@@H](O)[C@@H](O)[C@H](O)[C@H](O)[C@@H]1O",
	"O[C@H]1[C@H](O)[C@H](O)[C@H](O)[C@H](O)[C@H]1O",
	"O[C@H]1[C@H](O)[C@H](O)[C@@H](O)[C@@H]1O", // a cyclopentanepentol
	"F/C=C/C=C\\C=C/F",
	"C/C=C/C(/C=C\\C)=C(/C=C\\C)C(C)=O",
	"C[C@H](O)[C@H](O)[C@@H](C)O",
	"C[C@H]1C[C@@H](C)C1",
	"C/C=C1/C[C@H](C)C1",
	"C[C@@H]1C[C@@H]1/C=C/[C@H]1C[C@H]1C",
	"CC(C)(C)P(C(C)(C)C)C(C)(C)C",
	"c1cc2ccc3ccc4ccc5ccc6ccc1c1c2c3c4c5c61", // coronene
	"O=S1(=O)CC[S@](=O)CC1",
	"[2H]C([2H])([2H])[C@H]([13CH3])C",
	"C[C@H](Cl)C.CC[C@@H](C)O.[Cl-].[Na+]",
	"C[N@@+](CC)(CCC)c1ccccc1.[Br-]",
	"F[P-](F)(F)(F)(F)F.CC[n+]1ccn(C)c1",
}

// The canonical SMILES does not depend on the order of the atoms, nor on the
// Kekule form that comes with it, and reading it back gives it again.
func TestCanonicalLaw(t *testing.T) {
	random := rand.New(rand.NewPCG(1, 2))
	list := append(vectorSMILES(t), cages...)
	for _, l := range ligands(t) {
		list = append(list, l.smiles)
	}
	for _, s := range list {
		m := parse(t, s)
		want := m.SMILES()
		if again := parse(t, want).SMILES(); again != want {
			t.Errorf("%s gives %s, which gives %s", s, want, again)
		}
		for range 4 {
			other := shuffled(t, m, random)
			if got := other.SMILES(); got != want {
				t.Errorf("%s gives %s, in another order %s", s, want, got)
				break
			}
			if other.RotatableBonds() != m.RotatableBonds() || other.Chiral() != m.Chiral() ||
				other.UnspecifiedStereo() != m.UnspecifiedStereo() || len(other.Rings()) != len(m.Rings()) {
				t.Errorf("%s: the facts depend on the order of the atoms", s)
			}
		}
	}
}

// Stereoisomers that differ have different canonical SMILES: the number of
// distinct ones equals the textbook number (TestIsomerCounts), and each reads
// back to itself.
func TestIsomersReadBack(t *testing.T) {
	for _, s := range []string{"OC1C(O)C(O)C(O)C(O)C1O", "CC=CC=CC=CC", "CC1CC(C)C1", "CC(O)C(O)C(C)O"} {
		isomers, err := parse(t, s).Isomers(100)
		if err != nil {
			t.Fatal(err)
		}
		for _, m := range isomers {
			again, warnings, err := smiles.Parse(m.SMILES())
			if err != nil || again.SMILES() != m.SMILES() || len(warnings) > 0 {
				t.Errorf("%s: %s reads back as %v (%v, %v)", s, m.SMILES(), again, warnings, err)
			}
			if again != nil && again.UnspecifiedStereo() != 0 {
				t.Errorf("%s: %s leaves elements open", s, m.SMILES())
			}
		}
	}
}
