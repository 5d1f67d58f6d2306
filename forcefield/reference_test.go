package forcefield

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"torsieve/internal/units"
)

// The reference files and their sources are described in
// testdata/reference/uff/README.md. Their units are angstrom and kcal/mol.

const (
	kcal   = units.KcalPerMol
	ang    = units.Angstrom
	degree = math.Pi / 180
)

func load(t testing.TB, name string, into any) {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("..", "testdata", "reference", "uff", name))
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(data, into); err != nil {
		t.Fatalf("%s: %v", name, err)
	}
}

func typeNamed(t testing.TB, name string) *atomType {
	t.Helper()
	a := typeTable().byName[name]
	if a == nil {
		t.Fatalf("no atom type %q", name)
	}
	return a
}

// near fails where got differs from want by more than tol.
func near(t testing.TB, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s: got %.9g, want %.9g", what, got, want)
	}
}

func number(t testing.TB, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}
