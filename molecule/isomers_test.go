package molecule_test

import (
	"slices"
	"strings"
	"testing"

	"torsieve/molecule/smiles"
)

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
		{"camphor, one bridgehead stated", "CC1(C)C2CC[C@@]1(C)C(=O)C2", 1},
		{"cyclooctatetraene", "C1=CC=CC=CC=C1", 1},
		{"1,5-cyclooctadiene: cis,cis, cis,trans, trans,trans", "C1CC=CCCC=C1", 3},
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

// Bridgehead nitrogens do not invert: Troeger's base was resolved (V. Prelog, P.
// Wieland, Helv. Chim. Acta 1944, 27, 1127). Of quinuclidine there is one form.
func TestHeldNitrogen(t *testing.T) {
	const base = "Cc1ccc2c(c1)C[N@]1C[N@@]2Cc2cc(C)ccc21"
	if m, warnings, err := smiles.Parse(base); err != nil || len(m.Centres()) != 2 || !m.Chiral() || len(warnings) > 0 {
		t.Errorf("Troeger's base: %v, %v", warnings, err)
	}
	impossible := strings.Replace(base, "[N@@]", "[N@]", 1)
	const want = "the stated configurations of atom 9 (nitrogen) and atom 11 (nitrogen) do not fit into one small cage"
	if _, warnings, err := smiles.Parse(impossible); err != nil || !slices.Contains(warnings, want) {
		t.Errorf("one nitrogen inside out: %v, %v", warnings, err)
	}
	one, other := parse(t, "C[N@]1C[C@@H]1C"), parse(t, "C[N@@]1C[C@@H]1C")
	if one.SMILES() == other.SMILES() {
		t.Errorf("invertomers of an aziridine are both %s", one.SMILES())
	}
	if m := parse(t, "[N@]12CCC(CC1)CC2"); len(m.Centres()) != 0 {
		t.Errorf("quinuclidine: %+v", m.Centres())
	}
}

// The cages of natural products exist, so that none of their configurations may
// be called impossible (isomeric SMILES as chemical databases list them).
func TestNaturalProductsFitTheirCages(t *testing.T) {
	for name, s := range map[string]string{
		"(+)-camphor":      "C[C@@]12CC[C@@H](C1(C)C)CC2=O",
		"cocaine":          "CN1[C@H]2CC[C@@H]1[C@H]([C@H](C2)OC(=O)C3=CC=CC=C3)C(=O)OC",
		"morphine":         "CN1CC[C@]23[C@@H]4[C@H]1CC5=C2C(=C(C=C5)O)O[C@H]3[C@H](C=C4)O",
		"alpha-pinene":     "CC1=CC[C@H]2C[C@@H]1C2(C)C",
		"benzylpenicillin": "CC1([C@@H](N2[C@H](S1)[C@@H](C2=O)NC(=O)CC3=CC=CC=C3)C(=O)O)C",
		"artemisinin":      "C[C@@H]1CC[C@H]2[C@H](C(=O)O[C@H]3[C@@]24[C@H]1CC[C@](O3)(OO4)C)C",
		"strychnine":       "C1CN2CC3=CCO[C@H]4CC(=O)N5[C@H]6[C@H]4[C@H]3C[C@H]2[C@@]61C7=CC=CC=C75",
		"quinine":          "COC1=CC2=C(C=CN=C2C=C1)[C@H]([C@@H]3C[C@@H]4CCN3C[C@@H]4C=C)O",
		"paclitaxel": "CC1=C2[C@H](C(=O)[C@@]3([C@H](C[C@@H]4[C@]([C@H]3[C@@H]([C@@](C2(C)C)(C[C@@H]1OC(=O)[C@@H]([C@H](C5=CC=CC=C5)" +
			"NC(=O)C6=CC=CC=C6)O)O)OC(=O)C7=CC=CC=C7)(CO4)OC(=O)C)O)C)OC(=O)C",
	} {
		m, warnings, err := smiles.Parse(s)
		if err != nil || len(warnings) > 0 || m.UnspecifiedStereo() > 0 || !m.Chiral() {
			t.Errorf("%s: %v, %v", name, warnings, err)
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
