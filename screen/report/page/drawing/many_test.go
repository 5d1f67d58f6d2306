package drawing

import (
	"encoding/csv"
	"encoding/json"
	"os"
	"path/filepath"
	"testing"

	"torsieve/molecule"
	"torsieve/molecule/smiles"
)

// Every ligand of the recovery set, and every molecule of the format vectors, is
// drawn and reads back.
func TestManyDrawingsReadBack(t *testing.T) {
	drawn, wrong := 0, 0
	for _, text := range many(t) {
		m, _, err := smiles.Parse(text)
		if err != nil || m.NumAtoms() > 500 || unusual(m) {
			continue // vectors of mistakes, and what a molfile of ours cannot say
		}
		drawn++
		if back := read(t, text, molfile(m, Of(m))); back.SMILES() != m.SMILES() {
			wrong++
			t.Logf("%s is drawn as %s", m.SMILES(), back.SMILES())
		}
	}
	t.Logf("%d drawn, %d read back as another molecule", drawn, wrong)
	if drawn < 200 || wrong > 0 {
		t.Errorf("%d drawn, %d wrong", drawn, wrong)
	}
}

// unusual says whether a molecule has what the test's molfile leaves out:
// radicals, classes of atoms, unstated stereo.
func unusual(m *molecule.Molecule) bool {
	if m.UnspecifiedStereo() > 0 {
		return true
	}
	for _, a := range m.Atoms() {
		if a.Radical > 0 || a.Class > 0 {
			return true
		}
	}
	return false
}

func many(t *testing.T) []string {
	t.Helper()
	data := filepath.Join("..", "..", "..", "..", "testdata", "reference")
	f, err := os.Open(filepath.Join(data, "recovery", "ligands.csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var list []string
	for _, row := range rows {
		list = append(list, row...)
	}
	text, err := os.ReadFile(filepath.Join(data, "formats", "smiles.json"))
	if err != nil {
		t.Fatal(err)
	}
	var tree any
	if err := json.Unmarshal(text, &tree); err != nil {
		t.Fatal(err)
	}
	return append(list, smilesIn(tree)...)
}

// smilesIn lists the texts under the key "smiles".
func smilesIn(tree any) []string {
	var list []string
	switch v := tree.(type) {
	case []any:
		for _, item := range v {
			list = append(list, smilesIn(item)...)
		}
	case map[string]any:
		for key, item := range v {
			if s, ok := item.(string); ok && key == "smiles" {
				list = append(list, s)
				continue
			}
			list = append(list, smilesIn(item)...)
		}
	}
	return list
}
