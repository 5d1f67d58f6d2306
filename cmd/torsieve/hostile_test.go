package main

import (
	"bytes"
	"encoding/json"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"unicode"
)

// hostileFolder holds inputs that are broken on purpose, and what is to become
// of each; see its README.md.
const hostileFolder = "../../testdata/reference/formats/hostile"

// A verdict is an entry of hostile.json.
type verdict struct {
	File, Command, Verdict, Must, Why string
}

// said is what the message about each file must name, in our words for the
// "must" of its verdict; every part must be there.
var said = map[string][]string{
	"empty.sdf":            {"empty.sdf: the file is empty"},
	"empty.smi":            {"empty.smi: the file is empty"},
	"blank_lines.smi":      {"no molecule in the file"},
	"junk.sdf":             {"not an SDF", "line 4 is no counts line"},
	"truncated_atoms.sdf":  {"record 1", "6 atoms promised, 3 lines found"},
	"truncated_second.sdf": {"record 2", "cut off"},
	"bad_middle.smi":       {":2:", "broken", "ring bond 1 is never closed"},
	"unbalanced.smi":       {":1:", "position 3", "never closed"},
	"unclosed_bracket.smi": {":1:", "bracket", "never closed"},
	"unknown_element.smi":  {":1:", "unknown element Zz"},
	"valence5.smi":         {":1:", "atom 2 (carbon) has five bonds"},
	"valence5.sdf":         {"record 1", "atom 1 (carbon)", "valence 5"},
	"nan.sdf":              {"record 1", "atom 2", "not a number"},
	"coincident.sdf":       {"record 1", "atoms 2 (O) and 3 (H) are at the same place"},
	"charge99.sdf":         {"record 1", "charge +99 on atom 1"},
	"bond_out_of_range.sdf": {
		"record 1", "bond 5 names atom 17, there are 6",
	},
	"self_bond.sdf":   {"record 1", "bond 5 joins atom 6 to itself"},
	"salt.smi":        {"2 fragments", "Na+", "--salts strip"},
	"ferrocene.smi":   {":1:", "Fe"},
	"helium.smi":      {"helium: 1 conformer"},
	"proton.smi":      {":1:", "no electrons"},
	"h2.smi":          {"dihydrogen: 1 conformer"},
	"methane.smi":     {"methane: 1 conformer", "100 %"},
	"radical.smi":     {":1:", "odd number of electrons"},
	"tabs_spaces.smi": {"begins with blanks"},
	"dup_names.smi":   {"dup_names.smi:1", "dup_names.smi:2", `"lig-2"`},
	"path_name.smi":   {"../../escape"},
	"bom.smi":         nil,
	"long_chain.smi":  {":1:", "100000", "over the limit"},
	"xyz_fused.xyz":   {"atoms 1 (C) and 2 (C)", "closer than any bond"},
}

// statuses are the exit statuses that fit a verdict.
func (v verdict) statuses() []int {
	switch v.Verdict {
	case "refuse":
		return []int{exitNothing}
	case "report-and-continue":
		return []int{exitDone, exitPartly}
	}
	if strings.Contains(v.Must, "refus") { // a refusal is right too
		return []int{exitDone, exitNothing}
	}
	return []int{exitDone}
}

// Every hostile input gets its verdict, with a message that names the place and
// the cause, and without a stack, a panic or a raw byte on the terminal.
func TestHostileInputs(t *testing.T) {
	text, err := os.ReadFile(filepath.Join(hostileFolder, "hostile.json"))
	if err != nil {
		t.Fatal(err)
	}
	var verdicts []verdict
	if err := json.Unmarshal(text, &verdicts); err != nil {
		t.Fatal(err)
	}
	if len(verdicts) != 30 {
		t.Errorf("%d verdicts, want 30", len(verdicts))
	}
	for _, v := range verdicts {
		t.Run(v.File, func(t *testing.T) { v.check(t) })
	}
}

func (v verdict) check(t *testing.T) {
	expected, known := said[v.File]
	if !known {
		t.Fatal("no message is expected for this file")
	}
	dir := t.TempDir()
	args := []string{"inspect", filepath.Join(hostileFolder, v.File)}
	if v.Command == "screen" {
		args = []string{"screen", args[1], "--out", filepath.Join(dir, "run", "out"), "--through", "forcefield"}
	}
	var stdout, stderr bytes.Buffer
	code := run(t.Context(), args, strings.NewReader(""), &stdout, &stderr)
	if !slices.Contains(v.statuses(), code) {
		t.Errorf("exit status %d, want one of %v (%s: %s)", code, v.statuses(), v.Verdict, v.Must)
	}
	for _, part := range expected {
		if !strings.Contains(stderr.String(), part) {
			t.Errorf("nothing about %q in:\n%s", part, stderr.String())
		}
	}
	for _, stream := range []*bytes.Buffer{&stdout, &stderr} {
		if i := strings.IndexFunc(stream.String(), func(r rune) bool { return unicode.IsControl(r) && r != '\n' }); i >= 0 {
			t.Errorf("a control character: %q", stream.String())
		}
		for _, word := range []string{"goroutine", "panic:", ".go:"} {
			if strings.Contains(stream.String(), word) {
				t.Errorf("%q on the terminal:\n%s", word, stream.String())
			}
		}
	}
	onlyInside(t, dir, filepath.Join(dir, "run"))
}

// onlyInside fails for a file under dir that is not in the run's folder.
func onlyInside(t *testing.T, dir, inside string) {
	t.Helper()
	err := filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err == nil && !d.IsDir() && !strings.HasPrefix(path, inside+string(filepath.Separator)) {
			t.Errorf("a file outside the output folder: %s", path)
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
}

// Names that are paths stay as given in the results; both ligands have a file.
func TestPathNames(t *testing.T) {
	out := filepath.Join(t.TempDir(), "out")
	var stdout, stderr bytes.Buffer
	args := []string{"screen", filepath.Join(hostileFolder, "path_name.smi"), "--out", out, "--through", "forcefield"}
	if code := run(t.Context(), args, strings.NewReader(""), &stdout, &stderr); code != exitDone {
		t.Fatalf("exit status %d: %s", code, stderr.String())
	}
	table, err := os.ReadFile(filepath.Join(out, "ligands.csv"))
	if err != nil {
		t.Fatal(err)
	}
	for _, id := range []string{"../../escape,", "a/b:c*?,"} {
		if !strings.Contains(string(table), "\n"+id) {
			t.Errorf("%q is not in the table:\n%s", id, table)
		}
	}
	files, err := os.ReadDir(filepath.Join(out, "ensembles"))
	if err != nil || len(files) != 2 {
		t.Errorf("%d ensembles, %v", len(files), err)
	}
}
