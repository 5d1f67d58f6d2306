package dedupe

import (
	"testing"

	"torsieve/molecule"
	"torsieve/molecule/smiles"
)

func parse(t *testing.T, text string) *molecule.Molecule {
	t.Helper()
	m, _, err := smiles.Parse(text)
	if err != nil {
		t.Fatalf("%s: %v", text, err)
	}
	return m
}

func atomsOf(m *molecule.Molecule, hydrogens bool) []int {
	var atoms []int
	for i := range m.Atoms() {
		if hydrogens || m.Atom(i).Number > 1 {
			atoms = append(atoms, i)
		}
	}
	return atoms
}

// Numbers of automorphisms: textbook facts of these graphs, as listed in
// testdata/reference/uff/generation_checks.json (heavy_atom_automorphisms).
func TestAutomorphismCounts(t *testing.T) {
	for _, c := range []struct {
		name, smiles string
		hydrogens    bool
		want         int
	}{
		{"benzene", "c1ccccc1", false, 12},
		{"toluene", "Cc1ccccc1", false, 2},
		{"biphenyl", "c1ccccc1-c1ccccc1", false, 8},
		{"neopentane", "CC(C)(C)C", false, 24},
		{"cubane", "C12C3C4C1C5C2C3C45", false, 48},
		{"tert-butylbenzene", "CC(C)(C)c1ccccc1", false, 12},
		{"p-xylene", "Cc1ccc(C)cc1", false, 4},
		{"1,4-di-tert-butylbenzene", "CC(C)(C)c1ccc(cc1)C(C)(C)C", false, 144},
		{"hexane", "CCCCCC", false, 2},
		{"neopentane with all H", "CC(C)(C)C", true, 31104},
		{"acetate", "CC(=O)[O-]", false, 2},
		{"1,1,1-trifluoroethane", "CC(F)(F)F", false, 6},
	} {
		m := parse(t, c.smiles)
		maps, all := newSymmetry(m, atomsOf(m, c.hydrogens)).renumberings(nil, 40000)
		if len(maps) != c.want || !all {
			t.Errorf("%s: %d automorphisms (all: %v), want %d", c.name, len(maps), all, c.want)
		}
	}
}

// Whether mirror images count as one follows from the stated stereo: the
// textbook cases of R. S. Cahn, C. Ingold, V. Prelog, Angew. Chem. Int. Ed.
// 1966, 5, 385: meso forms and cis rings are their own mirror images.
func TestMirrorsFollowsStereo(t *testing.T) {
	for _, c := range []struct {
		name, smiles string
		mirrors      bool
	}{
		{"butane", "CCCC", true},
		{"(R)-1,2-propanediol", "C[C@@H](O)CO", false},
		{"meso-tartaric acid", "OC(=O)[C@@H](O)[C@@H](O)C(=O)O", true},
		{"(R,R)-tartaric acid", "OC(=O)[C@H](O)[C@@H](O)C(=O)O", false},
		{"cis-1,2-dimethylcyclohexane", "C[C@@H]1CCCC[C@@H]1C", true},
		{"trans-1,2-dimethylcyclohexane", "C[C@@H]1CCCC[C@H]1C", false},
		{"cis-1,4-dimethylcyclohexane", "C[C@H]1CC[C@@H](C)CC1", true},
		{"E-2-butene", "C/C=C/C", true},
		{"centre not stated", "CC(F)Cl", true},
	} {
		got := NewComparer(parse(t, c.smiles), Options{}).Mirrors()
		if got != c.mirrors {
			t.Errorf("%s: mirror images count as one: %v, want %v", c.name, got, c.mirrors)
		}
	}
}
