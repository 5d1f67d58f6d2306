package sdf

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode"
	"unicode/utf8"

	"torsieve/molecule"
)

const limit = 5000

func readAll(t testing.TB, text string) (records []Record) {
	t.Helper()
	r := NewReader(strings.NewReader(text), "f.sdf", limit)
	for {
		rec, err := r.Next()
		if errors.Is(err, io.EOF) {
			return records
		}
		if err != nil {
			t.Fatal(err)
		}
		records = append(records, rec)
	}
}

// molfile makes a V2000 record of atom lines (x y z symbol and further columns),
// bond lines and properties.
func molfile(counts string, lines ...string) string {
	return "name\n\n\n" + counts + "\n" + strings.Join(lines, "\n") + "\n$$$$\n"
}

const (
	counts21 = "  2  1  0  0  0  0  0  0  0  0999 V2000"
	carbon   = "    0.0000    0.0000    0.0000 C   0  0"
	oxygen   = "    1.4000    0.0000    0.0000 O   0  0"
	bond12   = "  1  2  1  0"
)

// Each message names the place and the cause.
func TestRefusals(t *testing.T) {
	v3 := func(lines ...string) string {
		return "name\n\n\n  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\nM  V30 " +
			strings.Join(lines, "\nM  V30 ") + "\nM  V30 END CTAB\nM  END\n"
	}
	for _, tc := range []struct{ name, text, want string }{
		{"header only", "name\n\n", "f.sdf:2: record 1 (name): cut off: the record ends in its header"},
		{"bond block cut", molfile(counts21, carbon, oxygen), "f.sdf:7: record 1 (name): 1 bonds promised, 0 lines found before the end of the record"},
		{"query atom", molfile(counts21, carbon, "    1.4000    0.0000    0.0000 R#  0  0", bond12), `f.sdf:6: record 1 (name): atom 2: "R#" is no element; query and placeholder atoms cannot be used`},
		{"bad coordinate", molfile(counts21, carbon, "    1.4.00    0.0000    0.0000 O   0  0", bond12), `f.sdf:6: record 1 (name): atom 2: "1.4.00" is no coordinate; three columns of ten are wanted`},
		{"infinite", molfile(counts21, carbon, "       Inf    0.0000    0.0000 O   0  0", bond12), "f.sdf:6: record 1 (name): atom 2: coordinate is not a number"},
		{"charge code", molfile(counts21, carbon, "    1.4000    0.0000    0.0000 O   0  9", bond12), "f.sdf:6: record 1 (name): atom 2: charge code 9, want 0 to 7"},
		{"query bond", molfile(counts21, carbon, oxygen, "  1  2  8  0"), "f.sdf:7: record 1 (name): bond 1 has query type 8; a molecule needs 1, 2, 3 or 4"},
		{"bond twice", molfile("  2  2  0  0  0  0  0  0  0  0999 V2000", carbon, oxygen, bond12, "  2  1  1  0"), "f.sdf: record 1 (name): bond 2 joins atoms 2 and 1 a second time"},
		{"stereo code", molfile(counts21, carbon, oxygen, "  1  2  1  2"), "f.sdf:7: record 1 (name): bond 1: stereo code 2, want 0, 1, 3, 4 or 6"},
		{"charge of nobody", molfile(counts21, carbon, oxygen, bond12, "M  CHG  1   3  -1", "M  END"), "f.sdf:8: record 1 (name): M  CHG names atom 3, there are 2"},
		{"charge pairs", molfile(counts21, carbon, oxygen, bond12, "M  CHG  2   2  -1", "M  END"), "f.sdf:8: record 1 (name): the M  CHG line does not hold the number of pairs that it states"},
		{"isotope", molfile(counts21, carbon, oxygen, bond12, "M  ISO  1   1  99", "M  END"), "f.sdf:8: record 1 (name): atom 1: no isotope of C has mass number 99"},
		{"too large", molfile("  0  0  0     0  0            999 V3000", "M  V30 COUNTS 5001 0 0 0 0"), "f.sdf:5: record 1 (name): 5001 atoms are over the limit of 5000"},
		{"stated valence", molfile(counts21, "    0.0000    0.0000    0.0000 C   0  0  0  0  0 15", oxygen, bond12, "M  END"), "f.sdf: record 1 (name): atom 1 states valence 0 and has bonds for 1"},
		{"v3000 no counts", v3("BEGIN ATOM", "1 C 0 0 0 0", "END ATOM"), "f.sdf:6: record 1 (name): a block of the V3000 table stands before its COUNTS line"},
		{"v3000 few atoms", v3("COUNTS 2 0 0 0 0", "BEGIN ATOM", "1 C 0 0 0 0", "END ATOM"), "f.sdf:11: record 1 (name): 2 atoms promised, 1 lines found before the end of the record"},
		{"v3000 twice", v3("COUNTS 2 0 0 0 0", "BEGIN ATOM", "1 C 0 0 0 0", "1 C 1 0 0 0", "END ATOM"), "f.sdf:9: record 1 (name): atom number 1 stands twice in the table"},
		{"v3000 unknown atom", v3("COUNTS 1 1 0 0 0", "BEGIN ATOM", "7 C 0 0 0 0", "END ATOM", "BEGIN BOND", "1 1 7 8", "END BOND"), "f.sdf:11: record 1 (name): bond 1 names atom 8, which is not among the 1 atoms"},
		{"v3000 charge", v3("COUNTS 1 0 0 0 0", "BEGIN ATOM", "1 C 0 0 0 0 CHG=99", "END ATOM"), "f.sdf:8: record 1 (name): charge +99 on atom 1 is not possible"},
		{"v3000 foreign line", "name\n\n\n  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\nhello\n", `f.sdf:6: record 1 (name): "hello" begins no line of a V3000 table; "M  V30" is wanted`},
	} {
		t.Run(tc.name, func(t *testing.T) {
			records := readAll(t, tc.text)
			if len(records) != 1 || records[0].Err == nil {
				t.Fatalf("got %+v, want one record with an error", records)
			}
			if got := records[0].Err.Error(); got != tc.want {
				t.Errorf("got  %s\nwant %s", got, tc.want)
			}
		})
	}
}

// What is odd but understood.
func TestOddities(t *testing.T) {
	ok := molfile(counts21, carbon, oxygen, bond12, "M  END")
	for _, tc := range []struct {
		name, text, formula string
		charge              int
	}{
		{"short lines", molfile(counts21, carbon[:34], oxygen[:34], bond12[:9], "M  END"), "CH4O", 0},
		{"alias lines are no properties", molfile(counts21, carbon, oxygen, bond12, "A    1", "M  END of an alias", "M  END"), "CH4O", 0},
		{"symbol in capitals", molfile(counts21, carbon, "    1.4000    0.0000    0.0000 CL  0  0", bond12, "M  END"), "CH3Cl", 0},
		{"deuterium", molfile(counts21, carbon, "    1.4000    0.0000    0.0000 D   0  0", bond12, "M  END"), "CH4", 0},
		{"doublet radical by code 4", molfile(counts21, carbon[:36]+"  4", oxygen, bond12, "M  END"), "CH3O", 0},
		{"singlet carbene", molfile("  1  0  0  0  0  0  0  0  0  0999 V2000", carbon, "M  RAD  1   1   1", "M  END"), "CH2", 0},
		{"triplet carbene", molfile("  1  0  0  0  0  0  0  0  0  0999 V2000", carbon, "M  RAD  1   1   3", "M  END"), "CH2", 0},
		{"no hydrogens stated", molfile("  1  0  0  0  0  0  0  0  0  0999 V2000", carbon+"  0  0  0 15", "M  END"), "C", 0},
		{"radical voids charge codes", molfile(counts21, carbon, oxygen[:36]+"  5", bond12, "M  RAD  1   2   2", "M  END"), "CH3O", 0},
	} {
		t.Run(tc.name, func(t *testing.T) {
			records := readAll(t, tc.text+ok)
			if len(records) != 2 || records[0].Err != nil || records[1].Err != nil {
				t.Fatalf("got %+v, want two molecules", records)
			}
			if m := records[0].Mol; m.Formula() != tc.formula || m.Charge() != tc.charge {
				t.Errorf("got %s with charge %d, want %s with %d", m.Formula(), m.Charge(), tc.formula, tc.charge)
			}
		})
	}
}

// Aromatic bonds without hydrogens: pyrrole and imidazole have one form each,
// 4-methylimidazole two tautomers.
func TestAromaticNitrogens(t *testing.T) {
	ring := func(symbols ...string) string {
		var lines []string
		for n, s := range symbols {
			lines = append(lines, fmt.Sprintf("%10.4f    0.0000    0.0000 %s   0  0", float64(n), s))
		}
		for n := range 5 {
			lines = append(lines, fmt.Sprintf("%3d%3d  4  0", n+1, (n+1)%5+1))
		}
		if len(symbols) > 5 {
			lines = append(lines, "  2  6  1  0")
		}
		return molfile(fmt.Sprintf("%3d%3d  0  0  0  0  0  0  0  0999 V2000", len(symbols), len(symbols)), append(lines, "M  END")...)
	}
	for _, tc := range []struct{ text, want string }{
		{ring("N", "C", "C", "C", "C"), "C4H5N"},
		{ring("N", "C", "N", "C", "C"), "C3H4N2"},
		{ring("O", "C", "N", "C", "C"), "C3H3NO"},
		{ring("C", "C", "N", "C", "N", "C"), "the aromatic rings leave open which of the nitrogens 3, 5 holds a hydrogen: 2 tautomers fit"},
		{ring("C", "C", "C", "C", "C"), "no Kekule form"},
	} {
		records := readAll(t, tc.text)
		if len(records) != 1 {
			t.Fatalf("%d records", len(records))
		}
		got := ""
		if r := records[0]; r.Err != nil {
			got = r.Err.Error()
		} else {
			got = r.Mol.Formula()
		}
		if !strings.Contains(got, tc.want) {
			t.Errorf("got %s, want %s", got, tc.want)
		}
	}
}

func TestDataItems(t *testing.T) {
	text := strings.TrimSuffix(molfile(counts21, carbon, oxygen, bond12, "M  END"), "$$$$\n") +
		"> 25 <MELTING.POINT> (42)\n179.0\n\n>  DT12\nx\n\n>  <empty>\n\nstray\n>  <last>\nno blank line\n$$$$\n"
	records := readAll(t, text)
	if len(records) != 1 || records[0].Err != nil {
		t.Fatalf("got %+v", records)
	}
	want := []Field{{"MELTING.POINT", "179.0"}, {"item 2", "x"}, {"empty", ""}, {"last", "no blank line"}}
	got := records[0].Fields
	if len(got) != len(want) {
		t.Fatalf("got %q, want %q", got, want)
	}
	for i := range want {
		if got[i] != want[i] {
			t.Errorf("item %d: got %q, want %q", i+1, got[i], want[i])
		}
	}
	if w := strings.Join(records[0].Warnings, "; "); !strings.Contains(w, "line 17") {
		t.Errorf("the stray line 17 is not mentioned in %q", w)
	}
}

// Reading never panics; a record is a molecule or an error that a terminal can
// show; a geometry that was read can be written and read again.
func FuzzRead(f *testing.F) {
	for _, pattern := range []string{"files/*.mol", "files/*.sdf", "hostile/*.sdf"} {
		names, err := filepath.Glob("../../testdata/reference/formats/" + pattern)
		if err != nil || len(names) == 0 {
			f.Fatalf("no files for %s: %v", pattern, err)
		}
		for _, name := range names {
			data, err := os.ReadFile(name)
			if err != nil {
				f.Fatal(err)
			}
			if len(data) < 5000 {
				f.Add(string(data))
			}
		}
	}
	f.Fuzz(func(t *testing.T, text string) {
		const fewer = 60
		r := NewReader(strings.NewReader(text), "f.sdf", fewer)
		records := 0
		for {
			rec, err := r.Next()
			if errors.Is(err, io.EOF) {
				break
			}
			if records++; records > len(text)+1 {
				t.Fatal("more records than bytes")
			}
			checkRecord(t, rec)
		}
		if records == 0 {
			t.Error("neither a record nor an error")
		}
	})
}

func checkRecord(t *testing.T, rec Record) {
	t.Helper()
	if rec.Err != nil {
		var p *molecule.ParseError
		msg := rec.Err.Error()
		if !errors.As(rec.Err, &p) || rec.Mol != nil || !printable(msg) || len(msg) > 1000 {
			t.Errorf("bad error %q", msg)
		}
		return
	}
	if rec.Mol == nil || rec.Mol.NumAtoms() == 0 || !printable(rec.Title) {
		t.Fatalf("record %d without error has no molecule", rec.Record)
	}
	if rec.X == nil {
		return
	}
	var b strings.Builder
	if err := Write(&b, Out{Mol: rec.Mol, X: rec.X, Title: rec.Title, Fields: rec.Fields}); err != nil {
		return // a position that no column holds
	}
	again := readAll(t, b.String())
	if len(again) != 1 || again[0].Err != nil {
		t.Fatalf("written and read again: %+v\n%s", again, b.String())
	}
	if a, m := again[0].Mol, rec.Mol; a.Formula() != m.Formula() || a.Charge() != m.Charge() || len(a.Bonds()) != len(m.Bonds()) {
		t.Errorf("%s charge %d became %s charge %d\n%s", m.Formula(), m.Charge(), a.Formula(), a.Charge(), b.String())
	}
}

func printable(s string) bool {
	for _, r := range s {
		if !unicode.IsPrint(r) && r != utf8.RuneError {
			return false
		}
	}
	return utf8.ValidString(s)
}
