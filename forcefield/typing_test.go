package forcefield

import (
	"testing"

	"torsieve/molecule"
	"torsieve/molecule/smiles"
)

func parse(t testing.TB, s string) *molecule.Molecule {
	t.Helper()
	m, _, err := smiles.Parse(s)
	if err != nil {
		t.Fatalf("%s: %v", s, err)
	}
	return m
}

func TestTyping(t *testing.T) {
	var file struct {
		Molecules []struct {
			SMILES, Name string
			Types        []string
		}
	}
	load(t, "typing.json", &file)
	if len(file.Molecules) != 49 {
		t.Fatalf("%d molecules, want 49", len(file.Molecules))
	}
	for _, want := range file.Molecules {
		m := parse(t, want.SMILES)
		s, err := New(m, Reference())
		if err != nil {
			t.Errorf("%s: %v", want.Name, err)
			continue
		}
		for i, got := range s.Types() {
			expected := "H_"
			if i < len(want.Types) {
				expected = want.Types[i]
			}
			if got != expected {
				t.Errorf("%s (%s): atom %d is %s, want %s", want.Name, want.SMILES, i, got, expected)
			}
		}
	}
}
