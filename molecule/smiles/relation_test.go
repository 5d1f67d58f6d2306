package smiles

import (
	"testing"

	"torsieve/molecule"
)

func TestSame(t *testing.T) {
	for _, row := range readVectors(t).Relations.Same {
		want := mustParse(t, row[0]).SMILES()
		for _, s := range row[1:] {
			if got := mustParse(t, s).SMILES(); got != want {
				t.Errorf("%s gives %s, %s gives %s", row[0], want, s, got)
			}
		}
	}
}

// mirror inverts all centres.
func mirror(m *molecule.Molecule) *molecule.Molecule {
	var parities []molecule.Parity
	for _, c := range m.Centres() {
		parities = append(parities, -c.Parity)
	}
	return m.WithStereo(parities, cisOf(m))
}

func cisOf(m *molecule.Molecule) []bool {
	var cis []bool
	for _, b := range m.StereoBonds() {
		cis = append(cis, b.Cis)
	}
	return cis
}

func TestEnantiomers(t *testing.T) {
	for _, row := range readVectors(t).Relations.Enantiomers {
		a, b := mustParse(t, row[0]), mustParse(t, row[1])
		if a.SMILES() == b.SMILES() {
			t.Errorf("%s and %s are both %s", row[0], row[1], a.SMILES())
		}
		if got := mirror(a).SMILES(); got != b.SMILES() {
			t.Errorf("mirror image of %s is %s, want %s", row[0], got, b.SMILES())
		}
		if !a.Chiral() || !b.Chiral() {
			t.Errorf("%s: chiral %v, %s: chiral %v", row[0], a.Chiral(), row[1], b.Chiral())
		}
	}
}

// plain is the molecule without its stereo: a diastereomer has the same.
func TestDiastereomers(t *testing.T) {
	for _, row := range readVectors(t).Relations.Diastereomers {
		a, b := mustParse(t, row[0]), mustParse(t, row[1])
		if a.SMILES() == b.SMILES() || mirror(a).SMILES() == b.SMILES() {
			t.Errorf("%s and %s: %s, %s, mirror image %s", row[0], row[1], a.SMILES(), b.SMILES(), mirror(a).SMILES())
		}
	}
}

func TestDifferent(t *testing.T) {
	for _, row := range readVectors(t).Relations.Different {
		if a, b := mustParse(t, row[0]).SMILES(), mustParse(t, row[1]).SMILES(); a == b {
			t.Errorf("%s and %s are both %s, though: %s", row[0], row[1], a, row[2])
		}
	}
}

func TestRoundTrip(t *testing.T) {
	for _, v := range readVectors(t).Molecules {
		if v.Expect == "refuse" {
			continue
		}
		text := mustParse(t, v.SMILES).SMILES()
		t.Log(v.SMILES, text)
		if again := mustParse(t, text).SMILES(); again != text {
			t.Errorf("%s gives %s, which gives %s", v.SMILES, text, again)
		}
	}
}
