package report

import (
	"encoding/csv"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"torsieve/internal/units"
	"torsieve/molecule/load"
	"torsieve/molecule/smiles"
	"torsieve/screen"
	"torsieve/screen/ensemble"
)

// water makes a result of two kept conformers and a dropped one; shapes differ
// in the angle alone.
func water(t *testing.T, id string, order int) *screen.Result {
	t.Helper()
	m, _, err := smiles.Parse("O")
	if err != nil {
		t.Fatal(err)
	}
	const gap = 0.5 * units.KcalPerMol
	conformers := []screen.Conformer{
		{Number: 1, X: bentWater(104), Energies: []float64{0.2, -5, -76 + gap}, Last: 2, Rank: 2, Copies: 1, Why: "kept"},
		{Number: 2, X: bentWater(106), Energies: []float64{0.1, -5.1, -76}, Last: 2, Rank: 1, Copies: 2, Why: "kept", Doubts: []string{"hf: small gap"}},
		{Number: 3, X: bentWater(150), Energies: []float64{0.3, math.NaN(), math.NaN()}, Last: 0, Why: "beyond the cap of 2 conformers"},
	}
	states := []ensemble.State{{Energy: -76, Copies: 2}, {Energy: -76 + gap, Copies: 1}}
	r := &screen.Result{
		Ligand: &screen.Ligand{ID: id, Stem: "stem-of-" + id, Order: order, Mol: m, SMILES: "O", Place: "w.smi:1: record 1"},
		Mol:    m, Status: screen.Done, Tiers: []string{"forcefield", "semiempirical", "hf"},
		Conformers: conformers, Kept: []int{1, 0}, Entered: []int{3, 2, 2},
		Took: []time.Duration{time.Second, 2 * time.Second, 0}, Warnings: []string{"one, with a comma", "two"},
	}
	for _, temperature := range []float64{298.15, 350} {
		r.Ensembles = append(r.Ensembles, screen.Weights{
			Distribution: ensemble.Weigh(states, temperature), Bars: []ensemble.Bar{{Low: 0.5, High: 0.9}, {Low: 0.1, High: 0.5}},
		})
	}
	return r
}

func bentWater(degrees float64) []float64 {
	const r = 0.96 * units.Angstrom
	sin, cos := math.Sincos(degrees / 2 * math.Pi / 180)
	return []float64{0, 0, 0, r * sin, r * cos, 0, -r * sin, r * cos, 0}
}

// The columns that others rely on, by name and place.
func TestTables(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "run")
	f := fill(t, dir, water(t, "second", 1), water(t, "first", 0))
	if err := f.Close(&Run{}, true); err != nil {
		t.Fatal(err)
	}
	ligands := table(t, filepath.Join(dir, "ligands.csv"))
	want := "ligand,smiles,status,reason,conformers_generated,conformers_semiempirical,conformers_hf,conformers_kept," +
		"best_conformer,best_population,missed_weight,missed_weight_p95,entropy_cal_mol_k,warnings"
	if got := strings.Join(ligands[0][:14], ","); got != want {
		t.Errorf("columns %s", got)
	}
	if got := ligands[1][:9]; !slices.Equal(got, []string{"first", "O", "done", "", "3", "2", "2", "2", "2"}) {
		t.Errorf("the first row is %q: ligands stand in the order of the run", got)
	}
	conformers := table(t, filepath.Join(dir, "conformers.csv"))
	want = "ligand,conformer,rank,population,population_p05,population_p95,degeneracy,relative_kcal_mol,e_forcefield_hartree," +
		"e_semiempirical_hartree,e_hf_hartree,e_final_hartree,solvation_kcal_mol,thermal_kcal_mol,family,last_tier,why"
	if got := strings.Join(conformers[0][:17], ","); got != want {
		t.Errorf("columns %s", got)
	}
	// By rank, a row a temperature; then what was dropped.
	for i, start := range []string{"first,2,1,0.", "first,2,1,0.", "first,1,2,0.", "first,1,2,0.", "first,3,,,,,,,0.300000000,,,,,,0,forcefield,beyond"} {
		if got := strings.Join(conformers[i+1], ","); !strings.HasPrefix(got, start) {
			t.Errorf("row %d is %s, want %s...", i+1, got, start)
		}
	}
	if got := conformers[1][18]; got != "hf: small gap" {
		t.Errorf("doubts %q", got)
	}
	if got := conformers[3]; got[7] != "0.5000" || got[17] != "298.15" {
		t.Errorf("relative energy %s at %s K", got[7], got[17])
	}
}

// An ensemble can be read again: shapes in order, data items as the columns.
func TestEnsembleReadsBack(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "run")
	r := water(t, "w", 0)
	fill(t, dir, r)
	recs := readAll(t, filepath.Join(dir, "ensembles", "stem-of-w.sdf"))
	if len(recs) != 2 {
		t.Fatalf("%d records, want 2", len(recs))
	}
	for k, rec := range recs {
		if rec.Title != "w" {
			t.Errorf("title %q", rec.Title)
		}
		for i, v := range r.Conformers[r.Kept[k]].X {
			if math.Abs(v-rec.X[i]) > 1e-4*units.Angstrom {
				t.Errorf("record %d, coordinate %d: %g, wrote %g bohr", k+1, i, rec.X[i], v)
			}
		}
		items := map[string]string{}
		for _, f := range rec.Fields {
			items[f.Name] = f.Value
		}
		if items["rank"] != []string{"1", "2"}[k] || items["temperature_k"] != "298.15" || items["e_final_hartree"] == "" {
			t.Errorf("record %d has the items %v", k+1, items)
		}
		if _, there := items["solvation_kcal_mol"]; there {
			t.Error("an item without a value was written")
		}
	}
}

func TestFolderIsOnlyTakenFromARun(t *testing.T) {
	other := t.TempDir()
	if err := os.WriteFile(filepath.Join(other, "thesis.txt"), nil, 0o644); err != nil {
		t.Fatal(err)
	}
	if _, err := Create(other, &Run{}); !errors.Is(err, ErrNotEmpty) {
		t.Errorf("have %v, want ErrNotEmpty", err)
	}
}

// A run that goes on keeps the files of before until it writes them anew; one
// that ended has no file of a ligand that is in it no more.
func TestEarlierEnsembles(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "deep", "run")
	f := fill(t, dir, water(t, "old", 0))
	if err := f.Close(&Run{}, true); err != nil {
		t.Fatal(err)
	}
	old := filepath.Join(dir, "ensembles", "stem-of-old.sdf")
	for _, whole := range []bool{false, true} {
		f := fill(t, dir, water(t, "new", 0))
		if err := f.Close(&Run{}, whole); err != nil {
			t.Fatal(err)
		}
		if _, err := os.Stat(old); errors.Is(err, os.ErrNotExist) != whole {
			t.Errorf("ended %t: %v", whole, err)
		}
	}
}

func TestSetAside(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "run")
	for n := 1; n < 3; n++ {
		f := fill(t, dir, water(t, "old", 0))
		if err := f.Close(&Run{}, true); err != nil {
			t.Fatal(err)
		}
		aside, err := SetAside(dir)
		if want := filepath.Join(dir, fmt.Sprintf("earlier-%d", n)); err != nil || aside != want {
			t.Fatalf("%s, %v; want %s", aside, err, want)
		}
		for _, name := range []string{"run.json", "ligands.csv", "ensembles/stem-of-old.sdf"} {
			if _, err := os.Stat(filepath.Join(aside, name)); err != nil {
				t.Error(err)
			}
			if _, err := os.Stat(filepath.Join(dir, name)); !errors.Is(err, os.ErrNotExist) {
				t.Errorf("%s is still there", name)
			}
		}
	}
}

func TestRunFile(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "run")
	run := &Run{Program: "torsieve", Begun: "2026-01-02T03:04:05Z", Settings: map[string]any{"seed": 7}}
	f, err := Create(dir, run)
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range []*screen.Result{water(t, "a", 0), water(t, "b", 1)} {
		run.Counts.Add(r.Status)
		if err := f.Keep(r); err != nil {
			t.Fatal(err)
		}
	}
	run.End(time.Date(2026, 1, 2, 3, 5, 5, 0, time.UTC))
	if err := f.Close(run, true); err != nil {
		t.Fatal(err)
	}
	text, err := os.ReadFile(filepath.Join(dir, RunFile))
	if err != nil {
		t.Fatal(err)
	}
	var back Run
	if err := json.Unmarshal(text, &back); err != nil {
		t.Fatal(err)
	}
	if back.Seconds != 60 || back.SecondsByTier["semiempirical"] != 4 || back.Counts.Done != 2 || len(back.Ligands) != 2 {
		t.Errorf("read back: %+v", back)
	}
}

// Ligands without an ensemble have a row and no file.
func TestRowsWithoutEnsemble(t *testing.T) {
	l := &screen.Ligand{ID: "x", Stem: "x", Place: "a.smi:3: record 3"}
	r := &screen.Result{Ligand: l, Status: screen.Unreadable, Reason: "ring bond 1 is never closed"}
	row := ligandRow(r)
	if len(row) != len(ligandColumns) {
		t.Fatalf("%d values in %d columns", len(row), len(ligandColumns))
	}
	for i, want := range map[int]string{0: "x", 1: "", 2: "unreadable", 3: "ring bond 1 is never closed", 4: "", 16: "a.smi:3: record 3"} {
		if row[i] != want {
			t.Errorf("%s is %q, want %q", ligandColumns[i], row[i], want)
		}
	}
}

func fill(t *testing.T, dir string, results ...*screen.Result) *Folder {
	t.Helper()
	f, err := Create(dir, &Run{})
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range results {
		if err := f.Keep(r); err != nil {
			t.Fatal(err)
		}
	}
	return f
}

func table(t *testing.T, path string) [][]string {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return rows
}

func readAll(t *testing.T, path string) []load.Record {
	t.Helper()
	r, err := load.Open(path, load.Options{})
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	var recs []load.Record
	for {
		rec, err := r.Next()
		if errors.Is(err, io.EOF) {
			return recs
		}
		if err != nil {
			t.Fatal(err)
		}
		if rec.Err != nil {
			t.Fatal(rec.Err)
		}
		recs = append(recs, rec)
	}
}
