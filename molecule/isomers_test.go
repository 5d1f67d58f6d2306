package molecule_test

import "testing"

// Numbers of stereoisomers as textbooks give them. E. L. Eliel, S. H. Wilen,
// Stereochemistry of Organic Compounds (Wiley, 1994) for the general cases;
// inositol: nine, of which one pair of enantiomers (IUPAC-IUB, Eur. J. Biochem.
// 1975, 57, 1); bicyclic ones halved because bridgeheads invert together.
func TestIsomerCounts(t *testing.T) {
	for _, tc := range []struct {
		name, smiles string
		want         int
	}{
		{"tartaric acid", "OC(=O)C(O)C(O)C(=O)O", 3},
		{"pentane-2,3,4-triol", "CC(O)C(O)C(O)C", 4},
		{"aldohexose", "OCC(O)C(O)C(O)C(O)C=O", 16},
		{"inositol", "OC1C(O)C(O)C(O)C(O)C1O", 9},
		{"1,4-dimethylcyclohexane", "CC1CCC(C)CC1", 2},
		{"1,3-dimethylcyclohexane", "CC1CCCC(C)C1", 3},
		{"1,2-dimethylcyclopropane", "CC1CC1C", 3},
		{"1,3-dimethylcyclobutane", "CC1CC(C)C1", 2},
		{"decalin", "C1CCC2CCCCC2C1", 2},
		{"2,4-hexadiene", "CC=CC=CC", 3},
		{"2,4,6-octatriene", "CC=CC=CC=CC", 6},
		{"cyclooctene", "C1CCCC=CCC1", 2},
		{"cycloheptene", "C1CCCC=CC1", 1},
		{"menthol", "CC1CCC(C(C)C)C(O)C1", 8},
		{"camphor", "CC1(C)C2CCC1(C)C(=O)C2", 2},
		{"borneol", "CC1(C)C2CCC1(C)C(O)C2", 4},
		{"alpha-pinene", "CC1=CCC2CC1C2(C)C", 2},
		{"norbornane", "C1CC2CCC1C2", 1},
		{"2-norbornanol", "OC1CC2CCC1C2", 4},
		{"cocaine", "COC(=O)C1C(OC(=O)c2ccccc2)CC2CCC1N2C", 8},
		{"tropine and pseudotropine", "CN1C2CCC1CC(O)C2", 2},
		{"adamantane", "C1C2CC3CC1CC(C2)C3", 1},
		{"cubane", "C12C3C4C1C5C2C3C45", 1},
		{"bicyclo[1.1.0]butane", "C1C2C1C2", 1},
		{"methyl phenyl sulfoxide", "CS(=O)c1ccccc1", 2},
		{"dimethyl sulfoxide", "CS(C)=O", 1},
		{"acetaldoxime", "CC=NO", 2},
		{"acetamidine, proton hops", "CC(=N)N", 1},
		{"N-methylacetamidine", "CC(N)=NC", 1},
		{"ethyl methyl amine inverts", "CCNC", 1},
		{"triethylmethylammonium", "CC[N+](C)(CC)CC", 1},
		{"allyl ethyl methyl phenyl ammonium", "C=CC[N+](C)(CC)c1ccccc1", 2},
		{"methyl hydrogen methylphosphonate, proton hops", "COP(C)(=O)O", 1},
		{"methyl phosphinate ester with two alkyls", "COP(C)(=O)CC", 2},
		{"diphenylmethanol", "OC(c1ccccc1)c1ccccc1", 1},
		{"4-ethylidene-1-methylcyclohexane", "CC=C1CCC(C)CC1", 2},
		{"truxillic acids", "OC(=O)C1C(c2ccccc2)C(C(=O)O)C1c1ccccc1", 5},
	} {
		isomers, err := parse(t, tc.smiles).Isomers(100)
		if err != nil {
			t.Errorf("%s: %v", tc.name, err)
			continue
		}
		if len(isomers) != tc.want {
			t.Errorf("%s: %d stereoisomers, want %d", tc.name, len(isomers), tc.want)
			for _, m := range isomers {
				t.Log(m.SMILES())
			}
		}
	}
}

// A molecule that is its own mirror image is not chiral, whatever its centres.
func TestChiral(t *testing.T) {
	for s, want := range map[string]bool{
		"OC(=O)[C@H](O)[C@@H](O)C(=O)O":   true,
		"OC(=O)[C@H](O)[C@H](O)C(=O)O":    false, // meso
		"C[C@H](N)C(=O)O":                 true,
		"CC(N)C(=O)O":                     false, // not stated
		"C[C@H]1CC[C@@H](C)CC1":           false,
		"C[C@H]1C[C@@H]1C":                true, // trans
		"C[C@H]1C[C@H]1C":                 false,
		"C[S@](=O)c1ccccc1":               true,
		"F/C=C/F":                         false,
		"CC1(C)[C@@H]2CC[C@@]1(C)C(=O)C2": true,
		"C[C@@H](O)[C@H](C)[C@@H](C)O":    true,
	} {
		if got := parse(t, s).Chiral(); got != want {
			t.Errorf("%s: chiral %v, want %v", s, got, want)
		}
	}
}

func TestTooManyIsomers(t *testing.T) {
	_, err := parse(t, "OCC(O)C(O)C(O)C(O)C=O").Isomers(8)
	if err == nil {
		t.Fatal("16 isomers fit into 8")
	}
	const want = "more than 8 stereoisomers: not stated are atom 3 (carbon), atom 5 (carbon), atom 7 (carbon), atom 9 (carbon)"
	if err.Error() != want {
		t.Errorf("%q, want %q", err, want)
	}
}
