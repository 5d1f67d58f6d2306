package forcefield

import (
	"compress/gzip"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"testing"

	"torsieve/molecule"
	"torsieve/molecule/sdf"
)

// refLigand is an entry of ligands.json: drug-like ligands at their crystal
// geometry, typed and computed by an independent program.
type refLigand struct {
	ID       string
	Types    []string
	Orders   map[string]float64 `json:"uff_orders"` // those that are not 1
	Terms    map[string]float64
	Total    float64
	K6       float64      `json:"inversion_added_by_N_K6"`
	RMS      float64      `json:"gradient_rms"`
	Gradient [][3]float64 `json:"gradient_first_atoms"`
	Counts   map[string]int
}

// records reads a gzipped SD file below testdata/reference.
func records(t testing.TB, path ...string) []sdf.Record {
	t.Helper()
	f, err := os.Open(filepath.Join(append([]string{"..", "testdata", "reference"}, path...)...))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	z, err := gzip.NewReader(f)
	if err != nil {
		t.Fatal(err)
	}
	var out []sdf.Record
	for r := sdf.NewReader(z, f.Name(), 999); ; {
		rec, err := r.Next()
		if errors.Is(err, io.EOF) {
			return out
		}
		if err != nil || rec.Err != nil {
			t.Fatal(err, rec.Err)
		}
		out = append(out, rec)
	}
}

func TestLigands(t *testing.T) {
	var file struct{ Molecules []refLigand }
	load(t, "ligands.json", &file)
	recs := records(t, "uff", "ligands.sdf.gz")
	if len(file.Molecules) != 14 || len(recs) != 14 {
		t.Fatalf("%d ligands and %d structures, want 14", len(file.Molecules), len(recs))
	}
	for n, want := range file.Molecules {
		t.Run(want.ID, func(t *testing.T) {
			m, x := recs[n].Mol, recs[n].X
			s, err := New(m, Reference())
			if err != nil {
				t.Fatal(err)
			}
			for i, name := range s.Types() {
				if name != want.Types[i] {
					t.Errorf("atom %d is %s, want %s", i, name, want.Types[i])
				}
			}
			checkOrders(t, s, m, want)
			grad := make([]float64, len(x))
			p, err := s.Gradient(t.Context(), grad, x)
			if err != nil {
				t.Fatal(err)
			}
			for _, part := range p.Parts {
				near(t, part.Name, part.Energy/kcal, want.Terms[termKeys[part.Name]], 2e-6)
			}
			near(t, "total", p.Energy/kcal, want.Total, 5e-6)
			var sum float64
			for i, g := range grad {
				g *= ang / kcal
				sum += g * g
				if i < 3*len(want.Gradient) {
					near(t, "gradient", g, want.Gradient[i/3][i%3], 2e-5)
				}
			}
			near(t, "gradient rms", math.Sqrt(sum/float64(len(grad))), want.RMS, 2e-6)
			flat := s.tables.skeleton.inversions(6*kcal).addTo(nil, x) / kcal
			near(t, "inversion of nitrogen", flat-want.Terms["inversion"], want.K6, 2e-6)
		})
	}
}

func checkOrders(t *testing.T, s *Surface, m *molecule.Molecule, want refLigand) {
	t.Helper()
	for _, l := range s.tables.skeleton.links {
		order, ok := want.Orders[fmt.Sprintf("%d-%d", l.i, l.j)]
		if !ok {
			order = 1
		}
		if l.order != order {
			t.Errorf("bond %d-%d: order %g, want %g", l.i, l.j, l.order, order)
		}
	}
}
