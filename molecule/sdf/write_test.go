package sdf

import (
	"compress/gzip"
	"io"
	"math"
	"os"
	"slices"
	"strings"
	"testing"

	"torsieve/internal/units"
	"torsieve/molecule"
)

// published holds structures with their published bonds (sources in
// testdata/reference/formats/README.md).
func published(t *testing.T) []Record {
	t.Helper()
	f, err := os.Open("../../testdata/reference/formats/conformers.sdf.gz")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	z, err := gzip.NewReader(f)
	if err != nil {
		t.Fatal(err)
	}
	text, err := io.ReadAll(z)
	if err != nil {
		t.Fatal(err)
	}
	return readAll(t, string(text))
}

// What is written is read again: the same graph, positions within half of the
// last decimal, the same data; and written once more it is the same bytes.
func TestWriteThenRead(t *testing.T) {
	for _, rec := range published(t) {
		if rec.Err != nil {
			t.Fatal(rec.Err)
		}
		out := Out{Mol: rec.Mol, X: rec.X, Title: rec.Title, Comment: "c", Fields: rec.Fields}
		first := written(t, out)
		again := readAll(t, first)
		if len(again) != 1 || again[0].Err != nil {
			t.Fatalf("%s: %+v", rec.Title, again)
		}
		compare(t, rec, again[0], 0.5e-4)
		out.Mol, out.X = again[0].Mol, again[0].X
		if second := written(t, out); second != first {
			t.Errorf("%s: written twice, two texts", rec.Title)
		}
	}
}

func written(t *testing.T, o Out) string {
	t.Helper()
	var b strings.Builder
	if err := Write(&b, o); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// compare holds two records to be the same; tolerance in angstrom.
func compare(t *testing.T, a, b Record, tolerance float64) {
	t.Helper()
	if a.Title != b.Title || !slices.Equal(a.Fields, b.Fields) {
		t.Errorf("%s: title or data changed: %q, %q", a.Title, b.Title, b.Fields)
	}
	if !slices.Equal(a.Mol.Atoms(), b.Mol.Atoms()) || !slices.Equal(a.Mol.Bonds(), b.Mol.Bonds()) {
		t.Errorf("%s: the graph changed", a.Title)
	}
	if len(a.X) != len(b.X) {
		t.Fatalf("%s: %d coordinates became %d", a.Title, len(a.X), len(b.X))
	}
	for i := range a.X {
		if d := math.Abs(a.X[i]-b.X[i]) / units.Angstrom; d > tolerance*1.0001 {
			t.Errorf("%s: coordinate %d moved by %g angstrom", a.Title, i, d)
			return
		}
	}
}

// chain is an alkane of n carbons with positions that serve this test only.
func chain(t *testing.T, n int) (*molecule.Molecule, []float64) {
	t.Helper()
	b := molecule.NewBuilder()
	for i := range n {
		b.AddAtom(molecule.BuilderAtom{Number: 6, Hydrogens: molecule.FillHydrogens})
		if i > 0 {
			if _, err := b.AddBond(i-1, i, 1); err != nil {
				t.Fatal(err)
			}
		}
	}
	m, _, err := b.Build()
	if err != nil {
		t.Fatal(err)
	}
	x := make([]float64, 3*m.NumAtoms())
	for i := range x {
		x[i] = float64(i%97) * 0.713
	}
	return m, x
}

// Three columns hold 999: what is larger is V3000 (CTfile formats).
func TestLargeMoleculesAreV3000(t *testing.T) {
	for _, tc := range []struct {
		carbons int
		version string
	}{{332, "V2000"}, {333, "V3000"}} { // 998 and 1001 atoms
		m, x := chain(t, tc.carbons)
		text := written(t, Out{Mol: m, X: x, Title: "chain"})
		if line := strings.Split(text, "\n")[3]; !strings.HasSuffix(line, tc.version) {
			t.Errorf("%d atoms: counts line %q, want %s", m.NumAtoms(), line, tc.version)
		}
		again := readAll(t, text)
		if len(again) != 1 || again[0].Err != nil {
			t.Fatalf("%d atoms: %+v", m.NumAtoms(), again[0].Err)
		}
		compare(t, Record{Mol: m, X: x, Title: "chain"}, again[0], 0.5e-4)
	}
}

// Charges, isotopes, radicals and valences that a reader would fill up.
func TestWriteProperties(t *testing.T) {
	b := molecule.NewBuilder()
	b.AddAtom(molecule.BuilderAtom{Number: 7, Charge: 1, Hydrogens: 4})
	b.AddAtom(molecule.BuilderAtom{Number: 6, Isotope: 13, Hydrogens: 3})
	b.AddAtom(molecule.BuilderAtom{Number: 17, Charge: -1})
	m, _, err := b.Build()
	if err != nil {
		t.Fatal(err)
	}
	x := make([]float64, 3*m.NumAtoms())
	for i := range x {
		x[i] = float64(i * i % 31)
	}
	rec := Record{Mol: m, X: x, Title: " >odd", Fields: []Field{{"lines", "a\n $$$$ b"}}}
	text := written(t, Out{Mol: m, X: x, Title: ">odd", Fields: []Field{{"lines", "a\n\n$$$$ b"}}})
	for _, line := range []string{"M  CHG  2   1   1   3  -1", "M  ISO  1   2  13", "M  RAD  1   2   2", " >odd"} {
		if !strings.Contains(text, line+"\n") {
			t.Errorf("line %q is missing in\n%s", line, text)
		}
	}
	again := readAll(t, text)
	if len(again) != 1 || again[0].Err != nil {
		t.Fatalf("%+v", again)
	}
	rec.Title = ">odd" // blanks in front are no part of a title
	compare(t, rec, again[0], 0.5e-4)
}

func TestWriteRefusesWhatIsNoPosition(t *testing.T) {
	m, x := chain(t, 1)
	for _, bad := range []float64{math.NaN(), math.Inf(1), 1e6} {
		x[4] = bad
		if err := Write(io.Discard, Out{Mol: m, X: x}); err == nil || !strings.Contains(err.Error(), "atom 2") {
			t.Errorf("position %g: error %v, want one that names atom 2", bad, err)
		}
	}
}
