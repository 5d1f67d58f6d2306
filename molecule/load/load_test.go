package load

import (
	"bytes"
	"compress/gzip"
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"torsieve/internal/units"
)

// summary is what a text is read as: ids, or errors.
func summary(records []Record) string {
	var parts []string
	for _, r := range records {
		switch {
		case r.Err != nil:
			parts = append(parts, "! "+r.Err.Error())
		default:
			parts = append(parts, r.ID+" "+r.Mol.Formula())
		}
	}
	return strings.Join(parts, " | ")
}

func allWarnings(records []Record) string {
	var list []string
	for _, r := range records {
		list = append(list, r.Warnings...)
	}
	return strings.Join(list, " | ")
}

func TestText(t *testing.T) {
	for _, tc := range []struct{ name, format, text, want, warning string }{
		{"names", "smi", "CCO ethanol\nCCN\tethyl amine \nC\n", "ethanol C2H6O | ethyl amine C2H7N | line-3 CH4", ""},
		{"comments and blank lines", "smi", "# CCO no\n\nC methane\n  # neither\nCC ethane", "methane CH4 | ethane C2H6", ""},
		{"header", "smi", "# made by hand\nCanonical_SMILES\tname\nC\tmethane\n", "methane CH4", `line 2 is taken for a header: "Canonical_SMILES\tname"`},
		{"header only in the first line", "smi", "C methane\nsmiles name\n", `methane CH4 | ! -:2: record 2 (name): SMILES "smiles": position 2: "m" is no atom symbol outside brackets`, ""},
		{"header alone", "smi", "SMILES id\n", "! -: no molecule in the file", ""},
		{"bars", "smi", "CCO |$;;$,r| ethanol\n", "ethanol C2H6O", "what stands between bars"},
		{"carriage returns", "smi", "C methane\r\nCC ethane\rCCC propane", "methane CH4 | ethane C2H6 | propane C3H8", ""},
		{"strange names", "smi", "C \x1b[31mred\xe9\n", "\uFFFD[31mredé CH4", ""},
		{"csv", "csv", "id,smiles\nm,C\n\"a, \"\"b\"\"\",CC\n", `m CH4 | a, "b" C2H6`, ""},
		{"csv with other columns", "csv", "Remark,Compound,My Smiles,pIC50\nx,m,C,7\n", "m CH4", ""},
		{"csv over two lines", "csv", "smiles,note,name\nC,\"two\nlines\",m\nCC,,e\n", "m CH4 | e C2H6", ""},
		{"csv with semicolons", "csv", "smiles;id\nC;m\n", "m CH4", "semicolons"},
		{"csv without ids", "csv", "smiles\nC\n\nCC\n", "line-2 CH4 | line-4 C2H6", "named by their line"},
		{"csv bad row", "csv", "smiles,id\nC1C,broken\n,empty\nC\nCC,e,more\n",
			`! -:2: record 1 (broken): SMILES "C1C": position 2: ring bond 1 is never closed | ! -:3: record 2 (empty): the column "smiles" is empty | line-4 CH4 | e C2H6`, "the row has 3 cells, the header 2"},
		{"csv open quote", "csv", "smiles,id\nC,\"m\nCC,e\n", "! -:2: record 1: a quotation mark is never closed: lines 2 to 3 are lost", ""},
		{"csv without smiles", "csv", "a,b\n1,2\n", `! -:1: no column of the header is called SMILES; name one of "a", "b"`, ""},
		{"csv header alone", "csv", "smiles,id\n", "! -: no molecule in the file", ""},
		{"csv empty", "csv", "", "! -: the file is empty", ""},
		{"tsv", "tsv", "smiles\tname\nC\tm, n\n", "m, n CH4", ""},
		{"byte-order mark", "tsv", "\xef\xbb\xbfsmiles\tname\nC\tm\n", "m CH4", ""},
	} {
		t.Run(tc.name, func(t *testing.T) {
			records := readText(t, tc.text, Options{Format: tc.format})
			if got := summary(records); got != tc.want {
				t.Errorf("got  %s\nwant %s", got, tc.want)
			}
			if w := allWarnings(records); !strings.Contains(w, tc.warning) || tc.warning == "" && w != "" {
				t.Errorf("warnings %q, want %q", w, tc.warning)
			}
		})
	}
}

func TestColumnsByName(t *testing.T) {
	text := "smiles,product,id,key\nC,CC,a,b\n"
	o := Options{Format: "csv", SmilesColumn: "PRODUCT", IDColumn: "key"}
	if got := summary(readText(t, text, o)); got != "b C2H6" {
		t.Errorf("got %s, want b C2H6", got)
	}
	o.IDColumn = "nowhere"
	want := `! -:1: no column is called "nowhere"; there are "smiles", "product", "id", "key"`
	if got := summary(readText(t, text, o)); got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
}

func TestCompressed(t *testing.T) {
	plain, err := os.ReadFile(formats + "files/three_records.sdf")
	if err != nil {
		t.Fatal(err)
	}
	var packed bytes.Buffer
	z := gzip.NewWriter(&packed)
	z.Write(plain)
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	const want = "ligand A CH4O | record-2 C2H3O2 | ethylammonium C2H8N"
	for name, data := range map[string][]byte{
		"a.sdf.gz": packed.Bytes(), "b.SDF": packed.Bytes(), "c.sdf": plain, "d.mol": plain,
	} {
		path := filepath.Join(dir, name)
		if err := os.WriteFile(path, data, 0o600); err != nil {
			t.Fatal(err)
		}
		if got := summary(readFile(t, path, Options{})); got != want {
			t.Errorf("%s: got %s, want %s", name, got, want)
		}
	}
	// Cut in the middle: what is there is read, then the reason is given.
	cut := string(packed.Bytes()[:packed.Len()-12])
	got := summary(readText(t, cut, Options{Format: "sdf"}))
	if !strings.HasPrefix(got, "ligand A CH4O") || !strings.Contains(got, "reading stopped: unexpected EOF") {
		t.Errorf("a cut file: %s", got)
	}
}

func TestOpenRefuses(t *testing.T) {
	dir := t.TempDir()
	pdf := filepath.Join(dir, "a.pdf")
	if err := os.WriteFile(pdf, nil, 0o600); err != nil {
		t.Fatal(err)
	}
	for _, tc := range []struct {
		path, want string
		o          Options
	}{
		{pdf, `unknown format "pdf": want one of smi, csv, tsv, sdf, mol, xyz`, Options{}},
		{"-", "standard input needs a format", Options{}},
		{filepath.Join(dir, "missing.smi"), "missing.smi", Options{}},
		{dir, "this is a folder", Options{Format: "smi"}},
		{"-", "the text is UTF-16", Options{Format: "smi", Stdin: strings.NewReader("\xff\xfeC\x00")}},
		{"-", "cannot be unpacked", Options{Format: "smi", Stdin: strings.NewReader("\x1f\x8bhello")}},
	} {
		if _, err := Open(tc.path, tc.o); err == nil || !strings.Contains(err.Error(), tc.want) {
			t.Errorf("%s: error %v, want %q", tc.path, err, tc.want)
		}
	}
}

func TestIDField(t *testing.T) {
	records := readFile(t, formats+"files/three_records.sdf", Options{IDField: "id"})
	if got, want := summary(records), "A-1 CH4O | B-2 C2H3O2 | ethylammonium C2H8N"; got != want {
		t.Errorf("got %s, want %s", got, want)
	}
	if w := allWarnings(records[2:]); !strings.Contains(w, `no data item "id"`) {
		t.Errorf("warnings %q do not say that record 3 has no such item", w)
	}
}

// A 3D record says one thing and its SMILES or its wedges another.
func TestContradictions(t *testing.T) {
	data, err := os.ReadFile(formats + "files/chiral3d_1.mol")
	if err != nil {
		t.Fatal(err)
	}
	text := string(data)
	wedge := strings.Replace(text, "  1  2  1  0", "  1  2  1  1", 1)
	hash := strings.Replace(text, "  1  2  1  0", "  1  2  1  6", 1)
	for _, tc := range []struct{ name, text, want string }{
		{"the same", text + ">  <SMILES>\nF[C@](Cl)(Br)[H]\n\n$$$$\n", ""},
		{"not stated", text + ">  <SMILES>\nFC(Cl)Br\n\n$$$$\n", ""},
		{"another molecule", text + ">  <SMILES>\nFC(Cl)(Br)C\n\n$$$$\n", ""},
		{"mirror image", text + ">  <Isomeric SMILES>\nF[C@@](Cl)(Br)[H]\n\n$$$$\n", `the SMILES in "Isomeric SMILES" contradicts`},
		{"no SMILES", text + ">  <SMILES>\nF[C\n\n$$$$\n", "holds no SMILES"},
		// F is drawn up right and Cl, Br, H down right, up left, down left;
		// with F nearest to the viewer that is the true configuration.
		{"wedge", wedge, ""},
		{"hash", hash, "the wedges contradict the 3D coordinates at atom 1"},
	} {
		t.Run(tc.name, func(t *testing.T) {
			records := readText(t, tc.text, Options{Format: "sdf"})
			if len(records) != 1 || records[0].Err != nil {
				t.Fatalf("got %s", summary(records))
			}
			if w := allWarnings(records); !strings.Contains(w, tc.want) || tc.want == "" && w != "" {
				t.Errorf("warnings %q, want %q", w, tc.want)
			}
			if got, want := records[0].Mol.SMILES(), canonical(t, "F[C@](Cl)(Br)[H]"); got != want {
				t.Errorf("got %s, want %s", got, want)
			}
		})
	}
}

func TestHydrogensMissingIn3D(t *testing.T) {
	records := readFile(t, formats+"files/methanol_noH.mol", Options{})
	if len(records) != 1 || records[0].Err != nil || records[0].X != nil {
		t.Fatalf("got %s with coordinates %v", summary(records), records[0].X)
	}
	if w := allWarnings(records); !strings.Contains(w, "lacks 4 hydrogens") {
		t.Errorf("warnings %q", w)
	}
}

// Only what an XYZ file leaves open is taken from the options.
func TestChargeOfXYZ(t *testing.T) {
	minus, three := -1, 3
	hydroxide := "2\nid=oh\nO 0 0 0\nH 0 0 0.97\n"
	oxygen := "2\n\nO 0 0 0\nO 0 0 1.21\n"
	for _, tc := range []struct {
		name, text           string
		o                    Options
		charge, multiplicity int
	}{
		{"neutral radical", hydroxide, Options{}, 0, 2},
		{"by option", hydroxide, Options{Charge: &minus}, -1, 1},
		{"by key", strings.Replace(hydroxide, "id=oh", "charge=1 multiplicity=3", 1), Options{Charge: &minus}, 1, 3},
		{"singlet", oxygen, Options{}, 0, 1},
		{"triplet by option", oxygen, Options{Multiplicity: &three}, 0, 3},
	} {
		tc.o.Format = "xyz"
		records := readText(t, tc.text, tc.o)
		if len(records) != 1 || records[0].Err != nil {
			t.Errorf("%s: got %s", tc.name, summary(records))
			continue
		}
		if m := records[0].Mol; m.Charge() != tc.charge || m.Multiplicity() != tc.multiplicity {
			t.Errorf("%s: charge %d, multiplicity %d; want %d, %d", tc.name, m.Charge(), m.Multiplicity(), tc.charge, tc.multiplicity)
		}
	}
	records := readText(t, hydroxide, Options{Format: "xyz", Multiplicity: &three})
	if got, want := summary(records), "! -:1: record 1 (oh): no bonds can be found: 9 electrons (charge +0) cannot have multiplicity 3"; got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
}

func TestCheckGeometry(t *testing.T) {
	at := func(z int, d float64) error {
		return CheckGeometry([]int{6, z}, []float64{0, 0, 0, d * units.Angstrom, 0, 0})
	}
	for _, tc := range []struct {
		z    int
		d    float64
		good bool
	}{{6, 0.49, false}, {6, 0.51, true}, {1, 0.39, false}, {1, 0.41, true}, {8, 0, false}} {
		if err := at(tc.z, tc.d); (err == nil) != tc.good {
			t.Errorf("carbon and element %d at %g: %v", tc.z, tc.d, err)
		}
	}
}

// The fields are those of the interface, and no others.
func TestInspectionJSON(t *testing.T) {
	records := readText(t, "C/C=C/[C@H](O)F x<y>\nC1 bad\n", Options{Format: "smi"})
	for i, want := range []string{
		`{"id":"x<y>","record":1,"formula":"C4H7FO","charge":0,"natoms":13,"heavy_atoms":6,"bonds":12,"rings":0,"aromatic_atoms":0,` +
			`"stereo_centres":[{"atom":4,"neighbours":[3,5,6,12],"parity":"@"}],"stereo_bonds":[{"atoms":[2,3],"substituents":[1,4],"cis":false}],` +
			`"unspecified_stereo":0,"rotatable_bonds":1,"smiles":` + jsonString(records[0].Mol.SMILES()) + `,"warnings":[]}`,
		`{"id":"bad","record":2,"line":2,"error":"-:2: record 2 (bad): SMILES \"C1\": position 2: ring bond 1 is never closed"}`,
	} {
		var b bytes.Buffer
		enc := json.NewEncoder(&b)
		enc.SetEscapeHTML(false)
		if err := enc.Encode(Inspect(records[i])); err != nil {
			t.Fatal(err)
		}
		if got := strings.TrimSpace(b.String()); got != want {
			t.Errorf("got  %s\nwant %s", got, want)
		}
	}
}

func jsonString(s string) string {
	text, _ := compact(s)
	return string(text)
}

func TestWriteSMILES(t *testing.T) {
	for _, rec := range readFile(t, formats+"conformers.sdf.gz", Options{})[:40] {
		var b strings.Builder
		if err := WriteSMILES(&b, rec.Mol, "a\n b\t"+rec.ID); err != nil {
			t.Fatal(err)
		}
		again := readText(t, b.String(), Options{Format: "smi"})
		if len(again) != 1 || again[0].Err != nil || again[0].ID != "a\uFFFD b "+rec.ID || again[0].Mol.SMILES() != rec.Mol.SMILES() {
			t.Errorf("%q is read as %s", b.String(), summary(again))
		}
	}
}

// A record whose coordinates belong to something else is used with a warning;
// one that calls itself 3D and is a drawing is no geometry.
func TestDoubtfulGeometry(t *testing.T) {
	data, err := os.ReadFile(formats + "files/methanol.mol")
	if err != nil {
		t.Fatal(err)
	}
	long := strings.Replace(string(data), "    1.4250    0.0000", "    3.4250    0.0000", 1)
	records := readText(t, long, Options{Format: "mol"})
	if w := allWarnings(records); !strings.Contains(w, "the bond of atoms 1 (C) and 2 (O) is 3.42 angstrom long") {
		t.Errorf("warnings %q", w)
	}
	flat := strings.NewReplacer("0.8900 H", "0.0000 H", "-0.8900 H", " 0.0000 H").Replace(string(data))
	if records = readText(t, flat, Options{Format: "mol"}); len(records) != 1 || records[0].Err != nil || records[0].X != nil {
		t.Errorf("a flat CH3 is taken for a geometry: %s", summary(records))
	}
}

// Reading never panics, ends, and gives records or errors that can be shown.
func FuzzText(f *testing.F) {
	for _, pattern := range []string{"files/*", "hostile/*"} {
		names, err := filepath.Glob(formats + pattern)
		if err != nil || len(names) == 0 {
			f.Fatalf("no files for %s: %v", pattern, err)
		}
		for _, name := range names {
			data, err := os.ReadFile(name)
			if err != nil {
				f.Fatal(err)
			}
			if len(data) < 2000 {
				f.Add(string(data), byte(0))
			}
		}
	}
	for _, csv := range []string{"id,smiles\nm,C\n\"a, \"\"b\"\"\",CC\n", "smiles;id\nC1;m\n", "smiles\tname\nC\tm\n"} {
		f.Add(csv, byte(1))
		f.Add(csv, byte(2))
	}
	f.Fuzz(func(t *testing.T, text string, format byte) {
		r, err := Open("-", Options{Format: Formats[int(format)%len(Formats)], MaxAtoms: 40, Stdin: strings.NewReader(text)})
		if err != nil {
			return
		}
		records := readAll(t, r)
		if len(records) == 0 || len(records) > len(text)+1 {
			t.Errorf("%d records from %d bytes", len(records), len(text))
		}
		for _, rec := range records {
			checkSpeakable(t, rec)
			if line, err := json.Marshal(Inspect(rec)); err != nil || !json.Valid(line) {
				t.Errorf("inspection %s: %v", line, err)
			}
		}
	})
}
