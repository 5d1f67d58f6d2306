package semiempirical

import (
	"compress/gzip"
	"encoding/json"
	"os"
	"path/filepath"
	"sync"
	"testing"

	periodic "torsieve/internal/element"
	"torsieve/internal/units"
)

// referenceMolecule is an entry of testdata/reference/gfn2/molecules.json.gz;
// the file says where the numbers come from. Atomic units but for the
// coordinates.
type referenceMolecule struct {
	Name                string
	Charge, Unpaired    int
	Elements            []string
	X                   []float64 `json:"x_angstrom"`
	Temperature         float64
	Energy              float64
	Parts               map[string]float64
	Charges             []float64
	ShellCharges        []float64 `json:"shell_charges"`
	Dipole              []float64
	AtomicDipoles       []float64 `json:"atomic_dipoles"`
	AtomicQuadrupoles   []float64 `json:"atomic_quadrupoles"`
	Gradient            []float64
	CoordinationNumbers []float64 `json:"coordination_numbers"`
	OrbitalEnergies     []float64 `json:"orbital_energies"`
	Occupations, Levels []float64
	CyclesTight         int `json:"cycles_tight"`
	CyclesDefault       int `json:"cycles_default"`
}

func (m *referenceMolecule) coordinates() []float64 {
	x := make([]float64, len(m.X))
	for i, c := range m.X {
		x[i] = c * units.Angstrom
	}
	return x
}

func (m *referenceMolecule) numbers() []int {
	z := make([]int, len(m.Elements))
	for i, s := range m.Elements {
		z[i], _ = periodic.Number(s)
	}
	return z
}

// surface prepares a reference molecule.
func (m *referenceMolecule) surface(t testing.TB, accuracy float64) *Surface {
	t.Helper()
	s, err := New(m.numbers(), m.Charge, m.Unpaired+1, Options{Accuracy: accuracy, Temperature: m.Temperature})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// readReference decodes a file of testdata/reference/gfn2.
func readReference(t testing.TB, name string, into any) {
	t.Helper()
	f, err := os.Open(filepath.Join("..", "testdata", "reference", "gfn2", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	z, err := gzip.NewReader(f)
	if err != nil {
		t.Fatal(err)
	}
	if err := json.NewDecoder(z).Decode(into); err != nil {
		t.Fatal(err)
	}
}

var readOnce sync.Mutex
var moleculesRead []referenceMolecule

// molecules returns the 60 reference molecules.
func molecules(t testing.TB) []referenceMolecule {
	t.Helper()
	readOnce.Lock()
	defer readOnce.Unlock()
	if moleculesRead == nil {
		var file struct{ Molecules []referenceMolecule }
		readReference(t, "molecules.json.gz", &file)
		if len(file.Molecules) != 60 {
			t.Fatalf("%d reference molecules, want 60", len(file.Molecules))
		}
		moleculesRead = file.Molecules
	}
	return moleculesRead
}

// named returns one reference molecule.
func named(t testing.TB, name string) *referenceMolecule {
	t.Helper()
	all := molecules(t)
	for i := range all {
		if all[i].Name == name {
			return &all[i]
		}
	}
	t.Fatalf("no reference molecule %q", name)
	return nil
}
