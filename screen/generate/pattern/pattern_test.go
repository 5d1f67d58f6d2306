package pattern

import (
	"strings"
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

// What a pattern means follows from the SMARTS language (Daylight theory
// manual, chapter 4): the answers were worked out by hand.
func TestStartsAt(t *testing.T) {
	for _, c := range []struct {
		pattern, smiles string
		atom            int
		want            bool
	}{
		{"C", "CO", 0, true},
		{"c", "CO", 0, false},
		{"c", "c1ccccc1", 0, true},
		{"[#6]", "c1ccccc1", 0, true},
		{"[CX4]", "CO", 0, true},
		{"[CX4H3]", "CO", 0, true},
		{"[CX4H2]", "CO", 0, false},
		{"[CH3]", "CO", 0, true},
		{"[!#1]", "CO", 0, true},
		{"[!#1]", "CO", 2, false},
		{"[N+]", "C[NH3+]", 1, true},
		{"[OX1-]", "CC(=O)[O-]", 3, true},
		{"[N,O]C", "CO", 1, true},
		{"[#7,#8;X2]", "CO", 1, true},
		{"[#7,#8;X3]", "CO", 1, false},
		{"C=O", "CC=O", 1, true},
		{"C-O", "CC=O", 1, false},
		{"C~O", "CC=O", 1, true},
		{"cc", "c1ccccc1", 0, true},
		{"c-c", "c1ccccc1", 0, false},
		{"c:c", "c1ccccc1", 0, true},
		{"C(F)(F)F", "CC(F)(F)F", 1, true},
		{"C(F)(F)F", "CC(F)F", 1, false},
		{"[CX4;!$(C(F)F)]", "OC(F)F", 1, false},
		{"[CX4;!$(C(F)F)]", "OCF", 1, true},
		{"[CX4;$(C(F)F)]", "OC(F)F", 1, true},
		{"Cl", "CCl", 1, true},
		{"C#N", "CC#N", 1, true},
		{"N(C)C", "CN", 1, false}, // each atom once
	} {
		p, err := Parse(c.pattern)
		if err != nil {
			t.Errorf("%s: %v", c.pattern, err)
			continue
		}
		if got := p.StartsAt(parse(t, c.smiles), c.atom); got != c.want {
			t.Errorf("%s at atom %d of %s: %v, want %v", c.pattern, c.atom+1, c.smiles, got, c.want)
		}
	}
}

func TestTorsions(t *testing.T) {
	p, err := Parse("O=[CX3]-[NX3H1]-[!#1]")
	if err != nil {
		t.Fatal(err)
	}
	m := parse(t, "CC(=O)NC")
	if got := p.Torsions(m, 1, 3); len(got) != 1 || got[0] != [2]int{2, 4} {
		t.Errorf("amide from the carbonyl: %v, want [[2 4]]", got)
	}
	if got := p.Torsions(m, 3, 1); len(got) != 0 {
		t.Errorf("amide from the nitrogen: %v, want none", got)
	}
}

func TestParseRefuses(t *testing.T) {
	for _, c := range []struct{ pattern, wanted string }{
		{"", "byte 1: the pattern ends too early"},
		{"C(", "byte 3: the pattern ends too early"},
		{"C)", "byte 2: want an atom or a bond"},
		{"(C)", "byte 1: a branch needs an atom before it"},
		{"[C", "byte 3: want ]"},
		{"[]", "byte 2: want a test of the atom"},
		{"[#]", "byte 3: want an atomic number"},
		{"[X]", "byte 3: want a number of neighbours"},
		{"[$C]", "byte 3: want ( after $"},
		{"C1CC1", "byte 2: want an atom"},
		{"[R]", "byte 2: want an atom"},
	} {
		_, err := Parse(c.pattern)
		if err == nil || !strings.HasSuffix(err.Error(), c.wanted) {
			t.Errorf("%q: %v, want an error that ends in %q", c.pattern, err, c.wanted)
		}
	}
}

func FuzzParse(f *testing.F) {
	for _, s := range []string{"C", "[CX4;!$(C(F)F)]", "c:c-[SX4](=O)(=O)-[#7,#6,OX2]", "[", "C(", "[!!C]"} {
		f.Add(s)
	}
	m, _, err := smiles.Parse("CC(=O)Nc1ccccc1")
	if err != nil {
		f.Fatal(err)
	}
	f.Fuzz(func(t *testing.T, text string) {
		p, err := Parse(text)
		if err != nil {
			return
		}
		if p.ChainLength() < 1 {
			t.Errorf("%q: a pattern without atoms", text)
		}
		p.StartsAt(m, 0) // ends, without a panic
	})
}
