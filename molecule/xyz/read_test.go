package xyz

import (
	"errors"
	"io"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode"
	"unicode/utf8"

	"torsieve/internal/units"
	"torsieve/molecule"
)

func readAll(t testing.TB, text string, limit int) (frames []Frame) {
	t.Helper()
	r := NewReader(strings.NewReader(text), "f.xyz", limit)
	for {
		f, err := r.Next()
		if errors.Is(err, io.EOF) {
			return frames
		}
		if err != nil {
			t.Fatal(err)
		}
		frames = append(frames, f)
	}
}

const water = "3\nwater\nO 0 0 0.12\nH 0 0.76 -0.47\nH 0 -0.76 -0.47\n"

func TestFrames(t *testing.T) {
	minus, two := -1, 2
	for _, tc := range []struct {
		name, text, id       string
		charge, multiplicity *int
		atoms                int
	}{
		{"plain", water, "water", nil, nil, 3},
		{"keys", "1\nid=\"a b\" charge=-1 multiplicity=2 energy=3\nF 0 0 0\n", "a b", &minus, &two, 1},
		{"keys without id", "1\ncharge=-1\nF 0 0 0\n", "", &minus, nil, 1},
		{"escaped quote", `1` + "\n" + `id="say \"x\\y\"" charge="-1"` + "\nF 0 0 0\n", `say "x\y"`, &minus, nil, 1},
		{"empty comment", "1\n\nHe 0 0 0\n", "", nil, nil, 1},
		{"columns described", "2\nProperties=pos:R:3:forces:R:3:species:S:1 id=hf\n0 0 0 9 9 9 H\n0 0 0.92 9 9 9 F\n", "hf", nil, nil, 2},
		{"numbers for symbols in Z", "1\nProperties=Z:I:1:pos:R:3 id=he\n2 0 0 0\n", "he", nil, nil, 1},
		{"further columns", "1\nhe\nHe 0 0 0 0.1 0.2\n", "he", nil, nil, 1},
	} {
		t.Run(tc.name, func(t *testing.T) {
			frames := readAll(t, tc.text, 10)
			if len(frames) != 1 || frames[0].Err != nil {
				t.Fatalf("got %+v", frames)
			}
			f := frames[0]
			if f.ID() != tc.id || len(f.Atoms) != tc.atoms || !same(f.Charge, tc.charge) || !same(f.Multiplicity, tc.multiplicity) {
				t.Errorf("got id %q, %d atoms, charge %v, multiplicity %v", f.ID(), len(f.Atoms), f.Charge, f.Multiplicity)
			}
		})
	}
}

func same(a, b *int) bool { return a == nil && b == nil || a != nil && b != nil && *a == *b }

// A bad frame is named, the frames behind it are read.
func TestRefusals(t *testing.T) {
	for _, tc := range []struct{ name, text, want string }{
		{"too few", "3\nw\nO 0 0 0\nH 0 0 1\n", "f.xyz:1: record 1 (w): line 1 promises 3 atoms, 2 follow"},
		{"too many", "2\nw\nO 0 0 0\nH 0 0 1\nH 0 1 0\n", "f.xyz:1: record 1 (w): line 1 promises 2 atoms, more lines follow"},
		{"unknown element", "1\nw\nQq 0 0 0\n", `f.xyz:3: record 1 (w): atom 1: unknown element "Qq"`},
		{"number of no element", "1\nw\n119 0 0 0\n", "f.xyz:3: record 1 (w): atom 1: 119 is no atomic number"},
		{"not a number", "1\nw\nO 0 nan 0\n", `f.xyz:3: record 1 (w): atom 1: coordinate is not a number: "nan"`},
		{"overflow", "1\nw\nO 0 1e999 0\n", `f.xyz:3: record 1 (w): atom 1: coordinate is not a number: "1e999"`},
		{"far away", "1\nw\nO 0 1e9 0\n", "f.xyz:3: record 1 (w): atom 1: coordinate 1e+09 is out of range"},
		{"columns", "1\nw\nO 0 0\n", "f.xyz:3: record 1 (w): atom 1: 4 columns wanted, 3 found"},
		{"charge", "1\nid=w charge=x\nO 0 0 0\n", `f.xyz:2: record 1 (w): charge="x" is no whole number`},
		{"multiplicity", "1\nid=w multiplicity=0\nO 0 0 0\n", "f.xyz:2: record 1 (w): multiplicity 0: want 1 or more"},
		{"properties", "1\nid=w Properties=pos:R:3\nO 0 0 0\n", `f.xyz:2: record 1 (w): Properties="pos:R:3": species (one column) and pos (three) are wanted`},
		{"no atoms", "0\nw\n", "f.xyz:1: record 1: the frame has no atoms"},
		{"too large", "11\nw\n", "f.xyz:1: record 1: 11 atoms are over the limit of 10"},
	} {
		t.Run(tc.name, func(t *testing.T) {
			frames := readAll(t, tc.text+water, 10)
			if len(frames) != 2 || frames[0].Err == nil || frames[1].Err != nil {
				t.Fatalf("got %+v, want an error and a frame", frames)
			}
			if got := frames[0].Err.Error(); got != tc.want {
				t.Errorf("got  %s\nwant %s", got, tc.want)
			}
		})
	}
}

func TestNoXYZAtAll(t *testing.T) {
	for text, want := range map[string]string{
		"":              "f.xyz: the file is empty",
		"\n \n":         "f.xyz: no molecule in the file",
		"hello\nworld":  "f.xyz:1: record 1: not an XYZ file: line 1 does not hold the number of atoms",
		"\x00\x1b[31m1": "f.xyz:1: record 1: not an XYZ file: line 1 does not hold the number of atoms",
	} {
		frames := readAll(t, text, 10)
		if len(frames) != 1 || frames[0].Err == nil || frames[0].Err.Error() != want {
			t.Errorf("%q: got %+v, want %s", text, frames, want)
		}
	}
}

func TestWriteThenRead(t *testing.T) {
	out := Out{
		Numbers: []int{8, 1, 17}, X: []float64{0, 0, 0, 1.8, -0.25, 1e-9, -1.3, 2.22222222, 50},
		Charge: -1, Multiplicity: 3, ID: `a "b"\ c=d`, Energy: -75.5, Keys: []Key{{"ligand", ""}, {"why", "two words"}},
	}
	var b strings.Builder
	if err := Write(&b, out); err != nil {
		t.Fatal(err)
	}
	frames := readAll(t, b.String()+b.String(), 10)
	if len(frames) != 2 {
		t.Fatalf("%d frames from\n%s", len(frames), b.String())
	}
	for _, f := range frames {
		if f.Err != nil || f.ID() != out.ID || *f.Charge != -1 || *f.Multiplicity != 3 {
			t.Fatalf("got %+v from\n%s", f, b.String())
		}
		for key, want := range map[string]string{"energy_hartree": "-75.5000000000", "ligand": "", "why": "two words", "pbc": "F F F"} {
			if f.Keys[key] != want {
				t.Errorf("%s = %q, want %q", key, f.Keys[key], want)
			}
		}
		for i, want := range out.X {
			if math.Abs(f.X[i]-want) > 0.5001e-8*units.Angstrom { // eight decimals
				t.Errorf("coordinate %d: %.10f, want %.10f", i, f.X[i], want)
			}
		}
	}
	out.X[3] = math.NaN()
	if err := Write(io.Discard, out); err == nil || !strings.Contains(err.Error(), "atom 2") {
		t.Errorf("a position that is no number: error %v", err)
	}
}

// Reading never panics; a frame is atoms with finite positions or an error that
// a terminal can show; what was read can be written and read again.
func FuzzRead(f *testing.F) {
	for _, pattern := range []string{"files/*.xyz", "hostile/*.xyz"} {
		names, err := filepath.Glob("../../testdata/reference/formats/" + pattern)
		if err != nil || len(names) == 0 {
			f.Fatalf("no files for %s: %v", pattern, err)
		}
		for _, name := range names {
			data, err := os.ReadFile(name)
			if err != nil {
				f.Fatal(err)
			}
			f.Add(string(data))
		}
	}
	f.Add("1\nid=\"a b\" charge=-1 Properties=pos:R:3:species:S:1\n0 0 0 F\n")
	f.Fuzz(func(t *testing.T, text string) {
		for _, frame := range readAll(t, text, 100) {
			checkFrame(t, frame)
		}
	})
}

func checkFrame(t *testing.T, f Frame) {
	t.Helper()
	if f.Err != nil {
		var p *molecule.ParseError
		if msg := f.Err.Error(); !errors.As(f.Err, &p) || f.Atoms != nil || !printable(msg) || len(msg) > 1000 {
			t.Errorf("bad error %q", msg)
		}
		return
	}
	if len(f.Atoms) == 0 || len(f.X) != 3*len(f.Atoms) || !printable(f.ID()) {
		t.Fatalf("bad frame %+v", f)
	}
	out := Out{X: f.X, ID: f.ID(), Energy: math.NaN()}
	for _, a := range f.Atoms {
		out.Numbers = append(out.Numbers, a.Number)
	}
	var b strings.Builder
	if err := Write(&b, out); err != nil {
		t.Fatal(err)
	}
	again := readAll(t, b.String(), 100)
	if len(again) != 1 || again[0].Err != nil || again[0].ID() != f.ID() || len(again[0].Atoms) != len(f.Atoms) {
		t.Errorf("written and read again: %+v\n%s", again, b.String())
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
