package load

import (
	"encoding/json"
	"errors"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
	"unicode"

	"torsieve/internal/element"
	"torsieve/molecule"
	"torsieve/molecule/smiles"
)

const formats = "../../testdata/reference/formats/"

func readFile(t testing.TB, path string, o Options) []Record {
	t.Helper()
	r, err := Open(path, o)
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	return readAll(t, r)
}

func readAll(t testing.TB, r *Reader) (records []Record) {
	t.Helper()
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

func readText(t testing.TB, text string, o Options) []Record {
	t.Helper()
	o.Stdin = strings.NewReader(text)
	return readFile(t, "-", o)
}

// An expected record of files.json (sources there).
type expected struct {
	Expect, Title, Formula, SMILES string
	Charge                         *int
	Has3D                          *bool `json:"has_3d"`
	TetrahedralStereo              *int  `json:"tetrahedral_stereo"`
	UnstatedTetrahedral            *int  `json:"unstated_tetrahedral"`
	DoubleBondStereo               *int  `json:"double_bond_stereo"`
	AromaticAtoms                  *int  `json:"aromatic_atoms"`
	Isotopes                       []string
	Data                           map[string]string
	MessageMustName                string `json:"message_must_name"`
	Note                           string
}

// mustName holds the words of our messages that carry what files.json demands
// of a refusal.
var mustName = map[string]string{
	"record 2 has no atoms": "record 2 (empty): the record has no atoms",
	"line 4: the counts line cannot hold more than 999 atoms or is malformed": ":4: record 1 (too many): the counts line cannot hold more than 999 atoms or is malformed",
	"line 1 promises 9 atoms, 6 follow":                                       "line 1 promises 9 atoms, 6 follow",
}

func TestFiles(t *testing.T) {
	data, err := os.ReadFile(formats + "files.json")
	if err != nil {
		t.Fatal(err)
	}
	var files []struct {
		File, Note, Source string
		Records            []expected
	}
	dec := json.NewDecoder(strings.NewReader(string(data)))
	dec.DisallowUnknownFields()
	if err := dec.Decode(&files); err != nil {
		t.Fatal(err)
	}
	if len(files) != 33 {
		t.Fatalf("%d files, want 33", len(files))
	}
	for _, file := range files {
		t.Run(file.File, func(t *testing.T) {
			records := readFile(t, formats+"files/"+file.File, Options{})
			if len(records) != len(file.Records) {
				t.Fatalf("%d records, want %d", len(records), len(file.Records))
			}
			for i, want := range file.Records {
				checkExpected(t, records[i], want)
			}
		})
	}
}

func checkExpected(t *testing.T, r Record, want expected) {
	t.Helper()
	if want.Expect == "refuse" || want.Expect == "report-and-continue" {
		words, ok := mustName[want.MessageMustName]
		if !ok || r.Err == nil || !strings.Contains(r.Err.Error(), words) {
			t.Errorf("error %v, want %q", r.Err, words)
		}
		return
	}
	if r.Err != nil {
		t.Fatalf("error %v, want a molecule", r.Err)
	}
	if want.Expect == "ok-with-warning" && len(r.Warnings) == 0 {
		t.Error("no warning")
	}
	if r.Title != want.Title || r.ID == "" {
		t.Errorf("title %q and id %q, want title %q", r.Title, r.ID, want.Title)
	}
	v := Inspect(r)
	if want.Formula != "" && v.Formula != want.Formula {
		t.Errorf("formula %s, want %s", v.Formula, want.Formula)
	}
	if want.SMILES != "" {
		if canonical := canonical(t, want.SMILES); v.SMILES != canonical {
			t.Errorf("got %s, want %s (%s)", v.SMILES, canonical, want.SMILES)
		}
	}
	for _, n := range []struct {
		what string
		got  int
		want *int
	}{
		{"charge", v.Charge, want.Charge},
		{"tetrahedral centres", len(v.StereoCentres), want.TetrahedralStereo},
		{"stereo double bonds", len(v.StereoBonds), want.DoubleBondStereo},
		{"unspecified elements", v.UnspecifiedStereo, want.UnstatedTetrahedral},
		{"aromatic atoms", v.AromaticAtoms, want.AromaticAtoms},
	} {
		if n.want != nil && n.got != *n.want {
			t.Errorf("%s: %d, want %d", n.what, n.got, *n.want)
		}
	}
	if want.UnstatedTetrahedral != nil && !strings.Contains(strings.Join(v.Warnings, ";"), "not stated at atom 2 (C)") {
		t.Errorf("warnings %q do not name the open centre", v.Warnings)
	}
	if want.Has3D != nil && (r.X != nil) != *want.Has3D {
		t.Errorf("3D coordinates: %v, want %v", r.X != nil, *want.Has3D)
	}
	checkDetails(t, r, want)
}

func checkDetails(t *testing.T, r Record, want expected) {
	t.Helper()
	var isotopes []string
	for _, a := range r.Mol.Atoms() {
		if a.Isotope != 0 {
			isotopes = append(isotopes, strconv.Itoa(a.Isotope)+element.Symbol(a.Number))
		}
	}
	if !slices.Equal(isotopes, want.Isotopes) {
		t.Errorf("isotopes %v, want %v", isotopes, want.Isotopes)
	}
	if len(r.Fields) != len(want.Data) {
		t.Errorf("data %q, want %q", r.Fields, want.Data)
	}
	for _, f := range r.Fields {
		if want.Data[f.Name] != f.Value {
			t.Errorf("data %s: %q, want %q", f.Name, f.Value, want.Data[f.Name])
		}
	}
}

func canonical(t testing.TB, s string) string {
	t.Helper()
	m, _, err := smiles.Parse(s)
	if err != nil {
		t.Fatalf("%s: %v", s, err)
	}
	return m.SMILES()
}

// inspected says, for each hostile input that inspect settles, what the records
// must be: a part of the error, or "ok ID".
var inspected = map[string][]string{
	"empty.sdf":             {"empty.sdf: the file is empty"},
	"empty.smi":             {"empty.smi: the file is empty"},
	"blank_lines.smi":       {"blank_lines.smi: no molecule in the file"},
	"junk.sdf":              {"record 1: not an SDF: line 4 is no counts line"},
	"truncated_atoms.sdf":   {"record 1 (good1): cut off: 6 atoms promised, 3 lines found before the end of the file"},
	"truncated_second.sdf":  {"ok good1", "record 2 (good2): cut off: 4 atoms promised, 2 lines found before the end of the file"},
	"bad_middle.smi":        {"ok ethanol", `smi:2: record 2 (broken): SMILES "C1CC": position 2: ring bond 1 is never closed`, "ok ethylamine"},
	"unbalanced.smi":        {`smi:1: record 1 (lig): SMILES "CC(C(C)C": position 3: the branch opened here is never closed`},
	"unclosed_bracket.smi":  {`smi:1: record 1 (lig): SMILES "CC[NH3+": position 3: the bracket opened here is never closed`},
	"unknown_element.smi":   {`smi:1: record 1 (lig): SMILES "C[Zz]C": position 3: unknown element Zz`},
	"valence5.smi":          {"atom 2 (carbon) has five bonds"},
	"valence5.sdf":          {"record 1 (penta): atom 1 (carbon) has five bonds (valence 5)"},
	"nan.sdf":               {"record 1 (good1): atom 2: coordinate is not a number"},
	"charge99.sdf":          {"record 1 (charged): charge +99 on atom 1 is not possible"},
	"bond_out_of_range.sdf": {"record 1 (range): bond 5 names atom 17, there are 6"},
	"self_bond.sdf":         {"record 1 (self): bond 5 joins atom 6 to itself"},
	"tabs_spaces.smi":       {"ok ethanol", "ok ethyl amine", "ok line-3"},
	"bom.smi":               {"ok ethanol"},
	"xyz_fused.xyz":         {"record 1 (fused): no bonds can be found: atoms 1 (C) and 2 (C) are 0.300 angstrom apart, closer than any bond"},

	// Settled by screen; reading gives the facts.
	"coincident.sdf": {"ok coincident"},
	"salt.smi":       {"ok sodium acetate"},
	"ferrocene.smi":  {"ok ferrocene"},
	"helium.smi":     {"ok helium"},
	"proton.smi":     {"ok proton"},
	"h2.smi":         {"ok dihydrogen"},
	"methane.smi":    {"ok methane"},
	"radical.smi":    {"ok propyl"},
	"dup_names.smi":  {"ok lig", "ok lig"},
	"path_name.smi":  {"ok ../../escape", "ok a/b:c*?"},
	"long_chain.smi": {"smi:1: record 1 (long): SMILES with 100000 atoms besides hydrogen is over the limit of 1200"},
}

// hinted are warnings due where a later stage will refuse, or where something
// odd was passed over.
var hinted = map[string]string{
	"coincident.sdf":  "atoms 2 (O) and 3 (H) are at the same place",
	"salt.smi":        "2 fragments",
	"ferrocene.smi":   "metal: Fe",
	"proton.smi":      "no electrons",
	"radical.smi":     "open shell",
	"tabs_spaces.smi": "begins with blanks",
}

func TestHostile(t *testing.T) {
	data, err := os.ReadFile(formats + "hostile/hostile.json")
	if err != nil {
		t.Fatal(err)
	}
	var inputs []struct{ File, Command, Verdict, Must, Why string }
	if err := json.Unmarshal(data, &inputs); err != nil {
		t.Fatal(err)
	}
	if len(inputs) != 30 {
		t.Fatalf("%d inputs, want 30", len(inputs))
	}
	for _, in := range inputs {
		t.Run(in.File, func(t *testing.T) {
			records := readFile(t, formats+"hostile/"+in.File, Options{})
			want, ok := inspected[in.File]
			if !ok || len(records) != len(want) {
				t.Fatalf("%d records, want %d", len(records), len(want))
			}
			var warnings []string
			for i, r := range records {
				id, good := strings.CutPrefix(want[i], "ok ")
				if good && (r.Err != nil || r.ID != id) {
					t.Errorf("record %d: id %q, error %v; want %q", i+1, r.ID, r.Err, id)
				}
				if !good && (r.Err == nil || !strings.Contains(r.Err.Error(), want[i])) {
					t.Errorf("record %d: error %v, want %q", i+1, r.Err, want[i])
				}
				checkSpeakable(t, r)
				warnings = append(warnings, Inspect(r).Warnings...)
			}
			if hint := hinted[in.File]; !strings.Contains(strings.Join(warnings, "; "), hint) {
				t.Errorf("warnings %q, want %q", warnings, hint)
			}
		})
	}
}

// checkSpeakable: whatever the file holds, messages can be shown.
func checkSpeakable(t *testing.T, r Record) {
	t.Helper()
	texts := append([]string{r.ID, r.Title}, r.Warnings...)
	if r.Err != nil {
		var p *molecule.ParseError
		if !errors.As(r.Err, &p) || r.Mol != nil || r.X != nil {
			t.Errorf("bad error %#v", r.Err)
		}
		texts = append(texts, r.Err.Error())
	} else if r.Mol == nil || r.ID == "" {
		t.Errorf("record %d has neither a molecule nor an error, or no id", r.Record)
	}
	for _, s := range texts {
		for _, c := range s {
			if !unicode.IsPrint(c) && c != '\uFFFD' {
				t.Errorf("%q cannot be shown", s)
				break
			}
		}
	}
}

func TestAllFilesAreListed(t *testing.T) {
	names, err := filepath.Glob(formats + "hostile/*")
	if err != nil {
		t.Fatal(err)
	}
	for _, name := range names {
		if base := filepath.Base(name); base != "hostile.json" && inspected[base] == nil {
			t.Errorf("%s is not listed", base)
		}
	}
}
