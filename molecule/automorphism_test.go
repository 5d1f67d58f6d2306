package molecule_test

import (
	"testing"

	"torsieve/molecule"
)

func heavyAtoms(m *molecule.Molecule) []int {
	var list []int
	for i, a := range m.Atoms() {
		if a.Number > 1 {
			list = append(list, i)
		}
	}
	return list
}

// Orders of symmetry groups of graphs, textbook facts (point groups with the
// permutations of like ends that no rotation reaches).
func TestAutomorphismCounts(t *testing.T) {
	for _, tc := range []struct {
		name, smiles string
		hydrogens    bool
		want         int
	}{
		{"benzene", "c1ccccc1", false, 12},
		{"toluene", "Cc1ccccc1", false, 2},
		{"biphenyl", "c1ccccc1-c1ccccc1", false, 8},
		{"neopentane", "CC(C)(C)C", false, 24},
		{"neopentane with all H", "CC(C)(C)C", true, 31104},
		{"cubane", "C12C3C4C1C5C2C3C45", false, 48},
		{"C60", fullerene, false, 120},
		{"tert-butylbenzene", "CC(C)(C)c1ccccc1", false, 12},
		{"p-xylene", "Cc1ccc(C)cc1", false, 4},
		{"1,4-di-tert-butylbenzene", "CC(C)(C)c1ccc(cc1)C(C)(C)C", false, 144},
		{"hexane", "CCCCCC", false, 2},
		{"acetate", "CC(=O)[O-]", false, 2},
		{"nitromethane", "C[N+](=O)[O-]", false, 2},
		{"methanesulfonate", "CS(=O)(=O)[O-]", false, 6},
		{"guanidinium", "NC(N)=[NH2+]", false, 6},
		{"1,1,1-trifluoroethane", "CC(F)(F)F", false, 6},
		{"two waters", "O.O", true, 8},
		{"trans-1,2-dimethylcyclopropane", "C[C@H]1C[C@@H]1C", false, 2},
		{"cis-1,2-dimethylcyclopropane: only by reflection", "C[C@H]1C[C@H]1C", false, 1},
		{"tartaric acid, chiral", "OC(=O)[C@H](O)[C@@H](O)C(=O)O", false, 2},
		{"tartaric acid, meso", "OC(=O)[C@H](O)[C@H](O)C(=O)O", false, 1},
		{"(E,E)-2,4-hexadiene", "C/C=C/C=C/C", false, 2},
		{"(E,Z)-2,4-hexadiene", "C/C=C/C=C\\C", false, 1},
	} {
		m := parse(t, tc.smiles)
		atoms := heavyAtoms(m)
		if tc.hydrogens {
			atoms = atoms[:0]
			for i := range m.Atoms() {
				atoms = append(atoms, i)
			}
		}
		perms, complete := m.Automorphisms(atoms, 40000)
		if len(perms) != tc.want || !complete {
			t.Errorf("%s: %d permutations (complete %v), want %d", tc.name, len(perms), complete, tc.want)
		}
		for k, i := range atoms {
			if perms[0][k] != i {
				t.Errorf("%s: the identity is not first", tc.name)
				break
			}
		}
	}
}

// A meso form is superposed on its mirror image by the exchange of its halves,
// a chiral one by nothing.
func TestMirrorAutomorphisms(t *testing.T) {
	for s, want := range map[string]int{
		"OC(=O)[C@H](O)[C@H](O)C(=O)O":  1,
		"OC(=O)[C@H](O)[C@@H](O)C(=O)O": 0,
		"C[C@H]1C[C@H]1C":               1,
		"CCCCCC":                        2,
	} {
		m := parse(t, s)
		if perms, complete := m.MirrorAutomorphisms(heavyAtoms(m), 100); len(perms) != want || !complete {
			t.Errorf("%s: %v, want %d", s, perms, want)
		}
	}
}

func TestAutomorphismLimit(t *testing.T) {
	m := parse(t, "CC(C)(C)C")
	if perms, complete := m.Automorphisms(heavyAtoms(m), 10); len(perms) != 10 || complete {
		t.Errorf("%d permutations, complete %v", len(perms), complete)
	}
	if perms, complete := m.Automorphisms(heavyAtoms(m), 24); len(perms) != 24 || !complete {
		t.Errorf("%d permutations, complete %v", len(perms), complete)
	}
}

// Charges that a group shares make its ends alike, whatever the drawing.
func TestDelocalisedEndsAreAlike(t *testing.T) {
	for s, pair := range map[string][2]int{
		"CC(=O)[O-]":       {2, 3},
		"C[N+](=O)[O-]":    {2, 3},
		"CP(=O)([O-])[O-]": {2, 3},
		"CS(=O)[O-]":       {2, 3},
		"CC(=S)[S-]":       {2, 3},
		"NC(C)=[NH2+]":     {0, 3},
		"[nH]1cc[nH+]c1":   {0, 3},
		"[n-]1ccnc1":       {0, 3},
		"C[n+]1ccn(C)c1":   {1, 4},
		"CC1=[NH+]CCN1":    {2, 5},
	} {
		m := parse(t, s)
		if class := m.Classes(); class[pair[0]] != class[pair[1]] {
			t.Errorf("%s: classes %v", s, class)
		}
	}
	for s, pair := range map[string][2]int{
		"CC(=O)O":       {2, 3},
		"CC(=O)[S-]":    {2, 3},
		"NC(C)=N":       {0, 3},
		"CNC(C)=[NH2+]": {1, 4},
	} {
		m := parse(t, s)
		if class := m.Classes(); class[pair[0]] == class[pair[1]] {
			t.Errorf("%s: classes %v", s, class)
		}
	}
}

// Atoms that a permutation exchanges have the same class.
func TestClassesFollowSymmetry(t *testing.T) {
	for _, l := range ligands(t) {
		m := parse(t, l.smiles)
		class := m.Classes()
		atoms := heavyAtoms(m)
		perms, _ := m.Automorphisms(atoms, 50)
		for _, p := range perms {
			for k, i := range atoms {
				if class[i] != class[p[k]] {
					t.Fatalf("%s: atoms %d and %d", l.id, i, p[k])
				}
			}
		}
	}
}
