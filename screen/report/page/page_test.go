package page

import (
	"bytes"
	"encoding/json"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
	"time"

	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/molecule/smiles"
	"torsieve/screen"
	"torsieve/screen/ensemble"
)

// hostile is a title that would run, break out or load where a page took it for
// anything but text.
const hostile = `</noscript></script><script>window.broken=1</script><img src=x onerror="window.broken=1">'"&<!--{{.}}`

// butanol makes a result with n conformers, the last of them left behind.
// Shapes and energies are made up; what they look like is not asked.
func butanol(t testing.TB, id string, order, n int) *screen.Result {
	t.Helper()
	return madeUp(t, "CCC[C@H](O)C1CCCCC1", id, order, n)
}

func madeUp(t testing.TB, text, id string, order, n int) *screen.Result {
	t.Helper()
	m, _, err := smiles.Parse(text)
	if err != nil {
		t.Fatal(err)
	}
	r := &screen.Result{
		Ligand: &screen.Ligand{ID: id, Stem: fmt.Sprintf("ligand-%d", order), Order: order, Mol: m, SMILES: m.SMILES(), Place: "made up: record 1"},
		Mol:    m, Status: screen.Done, Tiers: []string{"forcefield", "semiempirical", "hf"},
		Entered: []int{n, n, n - 1}, Took: []time.Duration{time.Second, 75 * time.Second, 2 * time.Hour},
		Warnings: []string{"one warning"},
	}
	random := rand.New(rand.NewPCG(uint64(order), 7))
	var states []ensemble.State
	var bars []ensemble.Bar
	for i := range n {
		c := screen.Conformer{Number: i + 1, X: shapeOf(m, random), Family: i % 3, Last: 2, Copies: 1, Why: "kept"}
		e := float64(i) * 0.3 * units.KcalPerMol
		c.Energies = []float64{0.1 + e*3, -50 + e*1.2, -800 + e}
		c.Solvation, c.Solvated, c.Beside = -0.01, true, -0.01
		if i == n-1 {
			c.Last, c.Energies[2], c.Copies = 1, math.NaN(), 0
			c.Why = "9.10 kcal/mol above the lowest at this tier, the window is 5.0"
		} else {
			c.Rank = i + 1
			r.Kept = append(r.Kept, i)
			states = append(states, ensemble.State{Energy: c.Final(), Copies: 1})
			bars = append(bars, ensemble.Bar{Low: 0.01, High: 0.6})
		}
		r.Conformers = append(r.Conformers, c)
	}
	for _, temperature := range []float64{298.15, 350} {
		r.Ensembles = append(r.Ensembles, screen.Weights{Distribution: ensemble.Weigh(states, temperature), Bars: bars})
	}
	return r
}

// shapeOf puts atoms along a crooked line, 1.3 angstrom from one to the next.
func shapeOf(m *molecule.Molecule, random *rand.Rand) []float64 {
	x := make([]float64, 0, 3*m.NumAtoms())
	var at [3]float64
	for range m.NumAtoms() {
		d := [3]float64{random.NormFloat64(), random.NormFloat64(), random.NormFloat64()}
		r := math.Sqrt(d[0]*d[0] + d[1]*d[1] + d[2]*d[2])
		for k := range at {
			at[k] += d[k] / r * 1.3 * units.Angstrom
			x = append(x, at[k])
		}
	}
	return x
}

func testRun() Run {
	return Run{
		Version: "test", Command: []string{"screen", "made-up.smi"}, Solvent: "water", Begun: "2026-01-02T03:04:05Z", Seconds: 90,
		Tiers:    []Tier{{"forcefield", "UFF", 1}, {"semiempirical", "GFN2-xTB", 75}, {"hf", "HF-3c", 7200}},
		Settings: []Setting{{"seed", "0"}}, Inputs: []Input{{"made-up.smi", "", 2}}, Machine: "a machine",
	}
}

func written(t testing.TB, b *Book) string {
	t.Helper()
	var out bytes.Buffer
	if err := b.Write(&out, testRun()); err != nil {
		t.Fatal(err)
	}
	return out.String()
}

// Nothing that the page holds is fetched: no element names a place outside, and
// the policy forbids what a script might try.
func TestPageIsSelfContained(t *testing.T) {
	var b Book
	b.Add(butanol(t, "one", 0, 5))
	text := written(t, &b)
	ours := withoutScripts(text)
	if found := regexp.MustCompile(`(?i)(src|href|action|poster|data)\s*=\s*"?'?(https?:|//|ftp:|file:)[^\s>]*|@import|url\(`).FindString(ours); found != "" {
		t.Errorf("the page names a place outside: %s", found)
	}
	if strings.Contains(ours, "<link") || strings.Contains(ours, "<iframe") || strings.Contains(ours, "<base") {
		t.Error("the page has elements that load")
	}
	policy := regexp.MustCompile(`Content-Security-Policy" content="([^"]*)"`).FindStringSubmatch(text)
	if policy == nil || !strings.HasPrefix(policy[1], "default-src &#39;none&#39;; script-src &#39;sha256-") || strings.Contains(strings.ToLower(policy[1]), "http") {
		t.Errorf("policy %q", policy)
	}
	if scripts := regexp.MustCompile(`<script( src)?[^>]*>`).FindAllString(text, -1); len(scripts) != 4 {
		t.Errorf("%d scripts, want the library, the program and two of data: %q", len(scripts), scripts)
	}
}

// withoutScripts leaves the markup, the style and the data.
func withoutScripts(text string) string {
	return regexp.MustCompile(`(?s)<script>.*?</script>`).ReplaceAllString(text, "")
}

// The same ligands make the same page in whatever order they ended.
func TestPageKeepsTheOrderOfTheRun(t *testing.T) {
	var b, c Book
	for i := range 3 {
		b.Add(butanol(t, fmt.Sprint("ligand ", i), i, 4))
		c.Add(butanol(t, fmt.Sprint("ligand ", 2-i), 2-i, 4))
	}
	if written(t, &b) != written(t, &c) {
		t.Error("the page depends on the order in which ligands ended")
	}
}

// Titles, warnings and reasons are text wherever they stand.
func TestHostileTextIsText(t *testing.T) {
	r := butanol(t, hostile, 0, 4)
	r.Reason, r.Warnings, r.Status = hostile, []string{hostile}, screen.Partial
	r.Ligand.Place, r.Ligand.Parent = hostile, hostile
	r.Conformers[0].Doubts = []string{hostile}
	r.Conformers[1].Why = hostile
	var b Book
	b.Add(r)
	run := testRun()
	run.Command, run.Inputs = []string{hostile}, []Input{{hostile, hostile, 1}}
	run.Settings = []Setting{{hostile, hostile}}
	run.Machine, run.Version = hostile, hostile
	var out bytes.Buffer
	if err := b.Write(&out, run); err != nil {
		t.Fatal(err)
	}
	text := withoutScripts(out.String())
	for _, bad := range []string{"<script>", "<img", "</noscript></", "onerror=\""} {
		if strings.Contains(text, bad) {
			at := strings.Index(text, bad)
			t.Errorf("%s got through: ...%s", bad, text[max(0, at-200):at+50])
		}
	}
	if n := strings.Count(text, "window.broken=1"); n < 8 {
		t.Errorf("the hostile text stands %d times on the page: it should be told, as text", n)
	}
}

// wellFormed checks that elements close in the order in which they were opened.
func TestPageIsWellFormed(t *testing.T) {
	var b Book
	b.Add(butanol(t, hostile, 0, 5))
	b.Add(&screen.Result{Ligand: &screen.Ligand{ID: "bad", Order: 1}, Status: screen.Unreadable, Reason: "no SMILES"})
	text := regexp.MustCompile(`(?s)<style>.*?</style>|<!DOCTYPE html>`).ReplaceAllString(withoutScripts(written(t, &b)), "")
	void := map[string]bool{"meta": true, "input": true, "path": true, "circle": true}
	var open []string
	for _, tag := range regexp.MustCompile(`<(/?)([a-zA-Z0-9]+)([^<>"]|"[^"<]*")*?(/?)>`).FindAllStringSubmatch(text, -1) {
		name := tag[2]
		switch {
		case void[name] || strings.HasSuffix(tag[0], "/>"):
		case tag[1] == "":
			open = append(open, name)
		case len(open) == 0 || open[len(open)-1] != name:
			t.Fatalf("</%s> closes %v", name, open)
		default:
			open = open[:len(open)-1]
		}
	}
	if len(open) > 0 {
		t.Errorf("not closed: %v", open)
	}
	if left := regexp.MustCompile(`<[^/a-zA-Z]`).FindString(text); left != "" {
		t.Errorf("a bare %q", left)
	}
}

// A ligand that makes the page stumble does not take the others with it.
func TestFaultInOneLigand(t *testing.T) {
	var b Book
	bad := butanol(t, "bad", 0, 4)
	bad.Conformers[0].X = bad.Conformers[0].X[:3] // a fault of the caller: not of this molecule
	b.Add(bad)
	b.Add(butanol(t, "good", 1, 4))
	text := written(t, &b)
	if !strings.Contains(text, "not shown for a fault of the program") || !strings.Contains(text, `<a href="#ligand-2">good</a>`) {
		t.Error("want the fault told and the other ligand shown")
	}
}

// Five hundred ligands of the size of a drug, forty conformers each and with
// warnings, stay under the limit; so do many more, with less of each; and what
// is left out is said.
func TestPageStaysSmall(t *testing.T) {
	const drug = "CC(C)Oc1cccc(c1)-c1ccnc(NCC2CCOCC2)n1"
	for _, c := range []struct{ ligands, shown int }{{500, 20}, {1500, 1}} {
		var b Book
		first := madeUp(t, drug, "first", 0, 60)
		first.Warnings = []string{strings.Repeat("a long warning ", 20), strings.Repeat("<", 300)}
		for i := range c.ligands {
			r := *first
			l := *first.Ligand
			l.Order, l.ID = i, fmt.Sprintf("ligand <%d>", i)
			r.Ligand = &l
			b.Add(&r)
		}
		text := written(t, &b)
		t.Logf("%d ligands: %.1f MB, estimate %.1f MB, at most %d conformers each", c.ligands, float64(len(text))/1e6, float64(b.bytes)/1e6, allowances[b.level])
		if len(text) > MaxBytes {
			t.Errorf("%d ligands make %d bytes", c.ligands, len(text))
		}
		if len(text)-950_000 > b.bytes {
			t.Errorf("%d ligands fill more than was thought: %d bytes, estimate %d", c.ligands, len(text), b.bytes)
		}
		if allowances[b.level] < c.shown {
			t.Errorf("%d ligands: only %d conformers each, want %d", c.ligands, allowances[b.level], c.shown)
		}
		if b.level > 0 && !strings.Contains(text, "conformers.csv and the folder ensembles") {
			t.Error("the page does not say what it leaves out")
		}
	}
}

// The data of a ligand, as it stands in the page. The file says what the figures
// are drawn from; a change of it is a change of the page.
func TestGoldenData(t *testing.T) {
	var b Book
	b.Add(butanol(t, "one", 0, 4))
	text := written(t, &b)
	found := regexp.MustCompile(`(?s)<script type="application/json" id="data-1">(.*?)</script>`).FindStringSubmatch(text)
	if found == nil {
		t.Fatal("no data")
	}
	var data bytes.Buffer
	if err := json.Indent(&data, []byte(found[1]), "", " "); err != nil {
		t.Fatal(err)
	}
	path := filepath.Join("testdata", "butanol.json")
	if os.Getenv("UPDATE_GOLDEN") != "" {
		if err := os.WriteFile(path, data.Bytes(), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(data.Bytes(), want) {
		t.Errorf("the data differ from %s (UPDATE_GOLDEN=1 writes it anew): %s", path, data.String())
	}
}
