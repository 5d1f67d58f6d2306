package molecule_test

import (
	"bufio"
	"os"
	"strings"
	"testing"

	"torsieve/molecule"
)

// The facts of testdata/demo/README.md: formulas, rotatable bonds, charges,
// stated centres and double bonds, and the largest ring.
func TestDemoLigands(t *testing.T) {
	want := map[string]struct {
		formula                                    string
		rotatable, charge, centres, bonds, largest int
	}{
		"QLW-001": {"C14H15N3O", 4, 0, 0, 0, 6},
		"QLW-002": {"C19H25N3O2", 6, 0, 0, 0, 6},
		"QLW-003": {"C18H20FN3O2", 5, 0, 0, 0, 6},
		"QLW-004": {"C20H26N4O4S", 7, 0, 0, 0, 6},
		"QLW-005": {"C19H22FN3O2", 5, 0, 1, 0, 6},
		"QLW-006": {"C19H22FN3O2", 5, 0, 1, 0, 6},
		"QLW-007": {"C19H20N4O2", 4, 0, 0, 0, 6},
		"QLW-008": {"C18H25NO4", 6, 0, 1, 0, 6},
		"QLW-009": {"C17H19N3O2", 0, 0, 0, 0, 15},
		"QLW-010": {"C18H19FN4O", 4, 0, 1, 1, 6},
		"QLW-011": {"C19H22N2O5", 6, 0, 0, 0, 6},
		"QLW-012": {"C22H26F2N4O4", 9, 0, 2, 0, 6},
	}
	for id, m := range demo(t) {
		w, ok := want[id]
		if !ok {
			t.Errorf("%s is not in the table", id)
			continue
		}
		centres, bonds, largest := 0, 0, 0
		for _, c := range m.Centres() {
			if c.Parity != 0 {
				centres++
			}
		}
		for _, b := range m.StereoBonds() {
			if b.Known {
				bonds++
			}
		}
		for _, ring := range m.Rings() {
			largest = max(largest, len(ring))
		}
		if m.Formula() != w.formula || m.RotatableBonds() != w.rotatable || m.Charge() != w.charge ||
			centres != w.centres || bonds != w.bonds || largest != w.largest {
			t.Errorf("%s: %s, %d rotatable, charge %d, %d centres, %d double bonds, ring of %d; want %+v",
				id, m.Formula(), m.RotatableBonds(), m.Charge(), centres, bonds, largest, w)
		}
		unstated := 0
		if id == "QLW-007" {
			unstated = 1
		}
		if m.UnspecifiedStereo() != unstated {
			t.Errorf("%s: %d elements not stated, want %d", id, m.UnspecifiedStereo(), unstated)
		}
	}
}

// QLW-005 and QLW-006 are enantiomers.
func TestDemoEnantiomers(t *testing.T) {
	ligands := demo(t)
	a, b := ligands["QLW-005"], ligands["QLW-006"]
	if a.SMILES() == b.SMILES() || !a.Chiral() {
		t.Errorf("%s and %s", a.SMILES(), b.SMILES())
	}
	mirrored := a.WithStereo([]molecule.Parity{-a.Centres()[0].Parity}, nil)
	if mirrored.SMILES() != b.SMILES() {
		t.Errorf("the mirror image is %s, want %s", mirrored.SMILES(), b.SMILES())
	}
}

func demo(t *testing.T) map[string]*molecule.Molecule {
	t.Helper()
	f, err := os.Open("../testdata/demo/quillwort.smi")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	list := map[string]*molecule.Molecule{}
	lines := bufio.NewScanner(f)
	for lines.Scan() {
		s, id, ok := strings.Cut(lines.Text(), "\t")
		if !ok {
			t.Fatalf("line %q", lines.Text())
		}
		list[id] = parse(t, s)
	}
	if len(list) != 12 {
		t.Fatalf("%d ligands, want 12", len(list))
	}
	return list
}
