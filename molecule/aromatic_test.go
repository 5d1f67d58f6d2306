package molecule_test

import (
	"testing"

	"torsieve/molecule"
)

// Aromatic atoms and bonds of ring systems by the 4n+2 rule over single rings
// and fused pairs and triples (E. Hueckel, Z. Phys. 1931, 70, 204); carbonyl
// carbons lend no electron, so that pyridones and uracils are aromatic and
// quinones are not. Every Kekule form must give the same answer.
func TestAromaticityInAllKekuleForms(t *testing.T) {
	for _, tc := range []struct {
		name, smiles string
		atoms, bonds int
		forms        int // number of Kekule forms, where it is textbook knowledge
	}{
		{"benzene", "c1ccccc1", 6, 6, 2},
		{"naphthalene", "c1ccc2ccccc2c1", 10, 11, 3},
		{"anthracene", "c1ccc2cc3ccccc3cc2c1", 14, 16, 4},
		{"phenanthrene", "c1ccc2c(c1)ccc1ccccc12", 14, 16, 5},
		{"pyrene", "c1cc2cccc3ccc4cccc1c4c23", 16, 19, 6},
		{"triphenylene", "c1ccc2c(c1)c1ccccc1c1ccccc12", 18, 21, 9},
		{"coronene", "c1cc2ccc3ccc4ccc5ccc6ccc1c1c2c3c4c5c61", 24, 30, 20},
		{"azulene", "c1cccc2cccc2c1", 10, 11, 2},
		{"biphenylene", "c1ccc2c(c1)c1ccccc21", 12, 12, 5},
		{"coumarin", "O=c1ccc2ccccc2o1", 10, 11, 2},
		{"caffeine", "Cn1cnc2c1c(=O)n(C)c(=O)n2C", 9, 10, 1},
		{"isoindole", "c1ccc2c[nH]cc2c1", 9, 10, 1},
		{"carbazole", "c1ccc2c(c1)[nH]c1ccccc12", 13, 15, 4},
		{"acridone", "O=c1c2ccccc2[nH]c2ccccc12", 14, 16, 4},
		{"fluorenone", "O=C1c2ccccc2-c2ccccc12", 12, 12, 4},
		{"anthraquinone", "O=C1c2ccccc2C(=O)c2ccccc12", 12, 12, 4},
		{"carbamazepine", "NC(=O)N1c2ccccc2C=Cc2ccccc12", 12, 12, 4},
		{"phenothiazine", "N1c2ccccc2Sc2ccccc12", 12, 12, 4},
		{"phthalimide", "O=C1NC(=O)c2ccccc12", 6, 6, 2},
		{"saccharin", "O=C1NS(=O)(=O)c2ccccc12", 6, 6, 2},
		{"cyclooctatetraene", "C1=CC=CC=CC=C1", 0, 0, 2},
		{"pentalene", "C1=CC2=CC=CC2=C1", 0, 0, 2},
		{"2-pyridone", "O=C1C=CC=CN1", 6, 6, 1},
		{"uracil", "O=C1C=CNC(=O)N1", 6, 6, 1},
		{"p-benzoquinone", "O=C1C=CC(=O)C=C1", 0, 0, 1},
		{"tropone", "O=C1C=CC=CC=C1", 7, 7, 1},
		{"tropylium", "[CH+]1C=CC=CC=C1", 7, 7, 0},
		{"cyclopentadienide", "[CH-]1C=CC=C1", 5, 5, 0},
		{"furan", "O1C=CC=C1", 5, 5, 1},
		{"thiophene S-dioxide", "O=S1(=O)C=CC=C1", 0, 0, 1},
		{"pyridine N-oxide, pentavalent", "O=N1=CC=CC=C1", 6, 6, 0},
	} {
		m := parse(t, tc.smiles)
		forms := kekuleForms(t, m)
		if tc.forms > 0 && len(forms) != tc.forms {
			t.Errorf("%s: %d Kekule forms, want %d", tc.name, len(forms), tc.forms)
		}
		for _, f := range append(forms, m) {
			atoms, bonds := 0, 0
			for _, a := range f.Atoms() {
				if a.Aromatic {
					atoms++
				}
			}
			for _, b := range f.Bonds() {
				if b.Aromatic {
					bonds++
				}
			}
			if atoms != tc.atoms || bonds != tc.bonds {
				t.Errorf("%s: %d aromatic atoms and %d bonds, want %d and %d", tc.name, atoms, bonds, tc.atoms, tc.bonds)
			}
			if f.SMILES() != m.SMILES() {
				t.Errorf("%s: %s in one Kekule form, %s in another", tc.name, m.SMILES(), f.SMILES())
			}
		}
	}
}

// kekuleForms builds m with every pairing of the atoms that have double bonds
// in rings, upper case.
func kekuleForms(t *testing.T, m *molecule.Molecule) []*molecule.Molecule {
	t.Helper()
	paired := make([]bool, m.NumAtoms()) // has a double bond to another ring atom
	for k, b := range m.Bonds() {
		if b.Order == 2 && m.BondInRing(k) {
			paired[b.A], paired[b.B] = true, true
		}
	}
	mate := make([]int, m.NumAtoms())
	for i := range mate {
		mate[i] = -1
	}
	var forms []*molecule.Molecule
	var next func(i int)
	next = func(i int) {
		for i < len(mate) && (!paired[i] || mate[i] >= 0) {
			i++
		}
		if i == len(mate) {
			forms = append(forms, withPairs(t, m, paired, mate))
			return
		}
		for at, j := range m.Neighbours(i) {
			if paired[j] && mate[j] < 0 && m.BondInRing(m.NeighbourBonds(i)[at]) {
				mate[i], mate[j] = j, i
				next(i + 1)
				mate[i], mate[j] = -1, -1
			}
		}
	}
	next(0)
	return forms
}

func withPairs(t *testing.T, m *molecule.Molecule, paired []bool, mate []int) *molecule.Molecule {
	t.Helper()
	b := molecule.NewBuilder()
	for _, a := range m.Atoms() {
		b.AddAtom(molecule.BuilderAtom{Number: a.Number, Charge: a.Charge})
	}
	for k, bond := range m.Bonds() {
		order := bond.Order
		if m.BondInRing(k) && paired[bond.A] && paired[bond.B] {
			order = 1
			if mate[bond.A] == bond.B {
				order = 2
			}
		}
		if _, err := b.AddBond(bond.A, bond.B, order); err != nil {
			t.Fatal(err)
		}
	}
	form, _, err := b.Build()
	if err != nil {
		t.Fatal(err)
	}
	return form
}
