package solvent

import (
	"compress/gzip"
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"sync"
	"testing"

	"torsieve/internal/element"
	"torsieve/internal/units"
)

const referenceFolder = "../../testdata/reference"

// A molecule is a geometry of testdata/reference/dispersion/reference.json.gz
// with what testdata/reference/solvation/reference.json.gz has of it.
type molecule struct {
	Name     string
	Charge   float64
	Symbols  []string     `json:"elements"`
	XYZ      [][3]float64 `json:"xyz_angstrom"`
	solvated map[string]solvated
}

// A solvated holds a molecule's values in one solvent, in atomic units.
type solvated struct {
	Polar           float64 `json:"e_born"`
	Surface         float64 `json:"e_sasa"`
	HydrogenBonds   float64 `json:"e_hbond"`
	Shift           float64 `json:"e_shift"`
	Charges         []float64
	PolarGradient   []float64 `json:"born_gradient_fixed_q"`
	SurfaceGradient []float64 `json:"sasa_hbond_gradient_fixed_q"`
	BornRadii       []float64 `json:"born_radii"`
	Areas           []float64 `json:"sasa"`
}

func (m *molecule) numbers() []int {
	numbers := make([]int, len(m.Symbols))
	for i, s := range m.Symbols {
		numbers[i], _ = element.Number(s)
	}
	return numbers
}

func (m *molecule) coordinates() []float64 {
	var x []float64
	for _, r := range m.XYZ {
		x = append(x, r[0]*units.Angstrom, r[1]*units.Angstrom, r[2]*units.Angstrom)
	}
	return x
}

// model prepares the molecule in a solvent at its geometry.
func (m *molecule) model(t testing.TB, solvent string) *Model {
	t.Helper()
	model, err := New(m.numbers(), solvent)
	if err != nil {
		t.Fatal(err)
	}
	if err := model.Update(m.coordinates()); err != nil {
		t.Fatal(err)
	}
	return model
}

// decodeReference reads a file below testdata/reference, compressed or not.
func decodeReference(path string, into any) error {
	f, err := os.Open(filepath.Join(referenceFolder, path))
	if err != nil {
		return err
	}
	defer f.Close()
	if filepath.Ext(path) != ".gz" {
		return json.NewDecoder(f).Decode(into)
	}
	z, err := gzip.NewReader(f)
	if err != nil {
		return err
	}
	return json.NewDecoder(z).Decode(into)
}

var readReferences = sync.OnceValues(func() ([]molecule, error) {
	var geometries struct{ Molecules []molecule }
	if err := decodeReference("dispersion/reference.json.gz", &geometries); err != nil {
		return nil, err
	}
	var values struct{ Molecules []map[string]json.RawMessage }
	if err := decodeReference("solvation/reference.json.gz", &values); err != nil {
		return nil, err
	}
	solvated := map[string]map[string]solvated{}
	for _, entry := range values.Molecules {
		name, in, err := decodeEntry(entry)
		if err != nil {
			return nil, err
		}
		solvated[name] = in
	}
	for i := range geometries.Molecules {
		geometries.Molecules[i].solvated = solvated[geometries.Molecules[i].Name]
	}
	return geometries.Molecules, nil
})

func decodeEntry(entry map[string]json.RawMessage) (name string, in map[string]solvated, err error) {
	if err := json.Unmarshal(entry["name"], &name); err != nil {
		return "", nil, err
	}
	in = map[string]solvated{}
	for _, solvent := range Names() {
		if entry[solvent] == nil {
			continue
		}
		var s solvated
		if err := json.Unmarshal(entry[solvent], &s); err != nil {
			return "", nil, err
		}
		in[solvent] = s
	}
	return name, in, nil
}

// references are 26 molecules with values computed by tblite 0.7.0 (see the
// file).
func references(t testing.TB) []molecule {
	t.Helper()
	molecules, err := readReferences()
	if err != nil {
		t.Fatal(err)
	}
	if len(molecules) != 26 {
		t.Fatalf("%d molecules, want 26", len(molecules))
	}
	return molecules
}

func find(t testing.TB, name string) *molecule {
	t.Helper()
	all := references(t)
	for i := range all {
		if all[i].Name == name {
			return &all[i]
		}
	}
	t.Fatalf("no reference molecule %s", name)
	return nil
}

// near fails where got is off want by more than tol, and where nothing is
// compared.
func near(t testing.TB, what string, got, want []float64, tol float64) {
	t.Helper()
	if len(got) != len(want) || len(want) == 0 {
		t.Errorf("%s: %d values, want %d", what, len(got), len(want))
		return
	}
	for i := range want {
		if !(math.Abs(got[i]-want[i]) <= tol) {
			t.Errorf("%s %d: %.14g, want %.14g (off by %.1e)", what, i, got[i], want[i], got[i]-want[i])
		}
	}
}

func values(p Parts) []float64 {
	return []float64{p.Polar, p.HydrogenBonds, p.Surface, p.Shift}
}

// Every part of the energy of every molecule, in every solvent there are values
// for.
func TestEnergies(t *testing.T) {
	compared := map[string]int{}
	for _, m := range references(t) {
		for solvent, want := range m.solvated {
			got := m.model(t, solvent).Parts(want.Charges)
			near(t, m.Name+" in "+solvent, values(got), []float64{want.Polar, want.HydrogenBonds, want.Surface, want.Shift}, 2e-12)
			compared[solvent]++
		}
	}
	if len(compared) != 25 {
		t.Errorf("%d solvents were compared, want 25", len(compared))
	}
	for solvent, n := range compared {
		if n < 24 {
			t.Errorf("%s was compared for %d molecules, want 24", solvent, n)
		}
	}
}

// Born radii and areas, and the gradient at fixed charges, which the file has
// with twelve decimals.
func TestRadiiAreasGradients(t *testing.T) {
	compared := 0
	for _, m := range references(t) {
		for _, solvent := range []string{"water", "chloroform", "hexane"} {
			want := m.solvated[solvent]
			model := m.model(t, solvent)
			what := m.Name + " in " + solvent
			near(t, what+": Born radius", model.born.radius, want.BornRadii, 5e-11)
			near(t, what+": area", model.area.value, want.Areas, 4e-9)
			grad := make([]float64, 3*len(m.Symbols))
			model.addPolar(want.Charges, grad)
			near(t, what+": polar gradient", grad, want.PolarGradient, 1e-12)
			clear(grad)
			model.addSurface(want.Charges, grad)
			near(t, what+": surface gradient", grad, want.SurfaceGradient, 1e-12)
			compared++
		}
	}
	if compared != 78 {
		t.Errorf("%d cases were compared, want 78", compared)
	}
}
