package dispersion

import (
	"compress/gzip"
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"testing"

	"torsieve/internal/element"
	"torsieve/internal/units"
)

// molecule is one entry of testdata/reference/dispersion/reference.json.gz.
type molecule struct {
	Name    string
	Charge  float64
	Symbols []string     `json:"elements"`
	XYZ     [][3]float64 `json:"xyz_angstrom"`

	D3CN            []float64 `json:"d3_cn"`
	D3C6Row1        []float64 `json:"d3_c6_row1"`
	D3HF3cEnergy    float64   `json:"d3bj_hf3c_energy"`
	D3HF3cGradient  []float64 `json:"d3bj_hf3c_gradient"`
	D3HFEnergy      float64   `json:"d3bj_hf_energy"`
	D3HFGradient    []float64 `json:"d3bj_hf_gradient"`
	D4CN            []float64 `json:"d4_cn"`
	EEQCharges      []float64 `json:"eeq_charges"`
	D4Alpha0        []float64 `json:"d4_alpha0"`
	D4C6Row1        []float64 `json:"d4_c6_row1"`
	D4Energy        float64   `json:"d4_hf_energy"`
	D4PairEnergy    float64   `json:"d4_hf_energy_twobody"`
	D4Gradient      []float64 `json:"d4_hf_gradient"`
	Mulliken        []float64 `json:"gfn2_gas_charges"`
	GFN2Energy      float64   `json:"d4_gfn2_twobody_energy"`
	GFN2Gradient    []float64 `json:"d4_gfn2_twobody_gradient_fixed_q"`
	GFN2Potential   []float64 `json:"d4_gfn2_potential"`
	GFN2ATMEnergy   float64   `json:"d4_gfn2_atm_energy"`
	GFN2ATMGradient []float64 `json:"d4_gfn2_atm_gradient"`
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

const referenceFolder = "../../testdata/reference/dispersion"

// references reads the check values: 26 molecules, energies and gradients from
// s-dftd3 1.4, dftd4 4.2, multicharge 0.5 and tblite 0.7.0 (see the file).
func references(t testing.TB) []molecule {
	t.Helper()
	f, err := os.Open(filepath.Join(referenceFolder, "reference.json.gz"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r, err := gzip.NewReader(f)
	if err != nil {
		t.Fatal(err)
	}
	var file struct{ Molecules []molecule }
	if err := json.NewDecoder(r).Decode(&file); err != nil {
		t.Fatal(err)
	}
	if len(file.Molecules) != 26 {
		t.Fatalf("%d molecules, want 26", len(file.Molecules))
	}
	return file.Molecules
}

// find returns the reference molecule of that name.
func find(t testing.TB, name string) *molecule {
	t.Helper()
	for _, m := range references(t) {
		if m.Name == name {
			return &m
		}
	}
	t.Fatalf("no reference molecule %s", name)
	return nil
}

// near fails where got is off want by more than tol. It fails, too, where
// nothing is compared.
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
