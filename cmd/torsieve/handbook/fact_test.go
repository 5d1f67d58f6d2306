// Package handbook holds the three tiers to what textbooks and high-level
// theory say about conformers: energies of shapes, barriers, angles, numbers of
// minima. It has tests only.
//
// A question (questions_*_test.go) says how a fact is measured: which shapes of
// which molecule, found by the search, relaxed by GFN2-xTB, with an HF-3c single
// point on top. A tier may miss a fact by its uncertainty and by the tier's own
// known error (known_test.go). Rows that miss by more are named in
// misses_test.go; nothing else may miss.
package handbook

import (
	"bytes"
	"encoding/json"
	"os"
	"path/filepath"
	"slices"
	"testing"
)

// A fact is a number from outside, with its source.
type fact struct {
	ID          string
	Molecule    string
	Quantity    string
	Value       float64
	Uncertainty float64 // as far as the source or its scatter tells
	Unit        string
	Phase       string
	Kind        string
	Source      string
	Check       string // how the number was seen; "from memory": it was not looked up
	Note        string
}

func reference(name string) string {
	return filepath.Join("..", "..", "..", "testdata", "reference", name)
}

// facts reads testdata/reference/handbook/facts.json.
func facts(t testing.TB) []fact {
	t.Helper()
	data, err := os.ReadFile(reference("handbook/facts.json"))
	if err != nil {
		t.Fatal(err)
	}
	var file struct {
		About string
		Facts []fact
	}
	d := json.NewDecoder(bytes.NewReader(data))
	d.DisallowUnknownFields()
	if err := d.Decode(&file); err != nil {
		t.Fatal(err)
	}
	return file.Facts
}

// factNamed fails where there is none.
func factNamed(t testing.TB, all []fact, id string) fact {
	t.Helper()
	i := slices.IndexFunc(all, func(f fact) bool { return f.ID == id })
	if i < 0 {
		t.Fatalf("no fact is named %q", id)
	}
	return all[i]
}
