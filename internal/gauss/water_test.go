package gauss_test

import (
	"encoding/json"
	"math"
	"os"
	"testing"

	"torsieve/hf/basis"
	"torsieve/internal/gauss"
)

// waterFile is testdata/reference/hf/integrals-h2o.json; its source is in it.
type waterFile struct {
	Geometry [][]float64 `json:"geometry_bohr"`
	Blocks   []waterBlock
}

type waterBlock struct {
	Basis    string
	N        int         `json:"n_basis"`
	Overlap  [][]float64 `json:"overlap_lower"`
	Kinetic  [][]float64 `json:"kinetic_lower"`
	Nuclear  [][]float64 `json:"nuclear_attraction_lower"`
	DipoleZ  [][]float64 `json:"dipole_z_lower"`
	ERI      [][]float64 `json:"eri_mulliken_ijkl_value"`
	SumOfSq  float64     `json:"eri_sum_of_squares"`
	Schwarz  float64     `json:"schwarz_max"`
	shells   []gauss.Shell
	position []float64
}

// water reads the check values and makes the shells of each block.
func water(t *testing.T) []waterBlock {
	t.Helper()
	text, err := os.ReadFile("../../testdata/reference/hf/integrals-h2o.json")
	if err != nil {
		t.Fatal(err)
	}
	var f waterFile
	if err := json.Unmarshal(text, &f); err != nil {
		t.Fatal(err)
	}
	var x []float64
	for _, g := range f.Geometry {
		x = append(x, g...)
	}
	for i := range f.Blocks {
		set, err := basis.Load(f.Blocks[i].Basis)
		if err != nil {
			t.Fatal(err)
		}
		if f.Blocks[i].shells, err = set.Shells([]int{8, 1, 1}); err != nil {
			t.Fatal(err)
		}
		f.Blocks[i].position = x
	}
	return f.Blocks
}

func TestOneElectronIntegralsOfWater(t *testing.T) {
	const tol = 2e-12 // the file prints twelve decimals
	for _, b := range water(t) {
		t.Run(b.Basis, func(t *testing.T) {
			o := gauss.NewOneElectron(b.shells, b.position)
			v := make([]float64, b.N*b.N)
			if err := gauss.Nuclear(t.Context(), v, b.shells, b.position, b.position, []float64{8, 1, 1}); err != nil {
				t.Fatal(err)
			}
			for _, m := range []struct {
				name string
				got  []float64
				want [][]float64
			}{
				{"overlap", o.Overlap, b.Overlap},
				{"kinetic", o.Kinetic, b.Kinetic},
				{"nuclear", v, b.Nuclear},
				{"dipole z", o.Dipole[2], b.DipoleZ},
			} {
				if len(m.want) != b.N {
					t.Fatalf("%s: %d rows in the file, want %d", m.name, len(m.want), b.N)
				}
				for i, row := range m.want {
					for j, want := range row {
						got, back := m.got[i*b.N+j], m.got[j*b.N+i]
						if math.Abs(got-want) > tol || got != back {
							t.Errorf("%s %d,%d: got %.12f and %.12f, want %.12f", m.name, i, j, got, back, want)
						}
					}
				}
			}
		})
	}
}
