package hf

import (
	"compress/gzip"
	"encoding/json"
	"io"
	"math"
	"os"
	"strings"
	"testing"

	"torsieve/internal/element"
	"torsieve/internal/gradcheck"
	"torsieve/internal/units"
)

// correctionCase is one molecule of testdata/reference/gcp/reference.json with
// its geometry from testdata/reference/dispersion/reference.json.gz.
type correctionCase struct {
	Name, Source     string
	GCPMinix         float64   `json:"gcp_hf_minix_energy"`
	GCPMinixGradient []float64 `json:"gcp_hf_minix_gradient"`
	SRB              float64   `json:"srb_energy"`
	SRBGradient      []float64 `json:"srb_gradient"`
	GCPSVP           float64   `json:"gcp_hf_svp_energy"`
	GCP631Gd         float64   `json:"gcp_hf_631gd_energy"`

	numbers []int
	x       []float64
}

// correctionCases reads check values of s-dftd3 1.4 and mctc-gcp 2.3.2.
func correctionCases(t *testing.T) []correctionCase {
	t.Helper()
	var values struct{ Molecules []correctionCase }
	decodeFile(t, "../testdata/reference/gcp/reference.json", &values)
	var shapes struct {
		Molecules []struct {
			Name     string
			Elements []string
			XYZ      [][3]float64 `json:"xyz_angstrom"`
		}
	}
	decodeFile(t, "../testdata/reference/dispersion/reference.json.gz", &shapes)
	for i := range values.Molecules {
		c := &values.Molecules[i]
		for _, s := range shapes.Molecules {
			if s.Name != c.Name {
				continue
			}
			for j, symbol := range s.Elements {
				z, _ := element.Number(symbol)
				c.numbers = append(c.numbers, z)
				for _, v := range s.XYZ[j] {
					c.x = append(c.x, v*units.Angstrom)
				}
			}
		}
		if len(c.numbers) == 0 {
			t.Fatalf("no geometry of %s", c.Name)
		}
	}
	if len(values.Molecules) != 26 {
		t.Fatalf("%d molecules, want 26", len(values.Molecules))
	}
	return values.Molecules
}

// decodeFile reads a JSON file, which may be compressed.
func decodeFile(t testing.TB, path string, into any) {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	var r io.Reader = f
	if strings.HasSuffix(path, ".gz") {
		if r, err = gzip.NewReader(f); err != nil {
			t.Fatal(err)
		}
	}
	if err := json.NewDecoder(r).Decode(into); err != nil {
		t.Fatal(path, err)
	}
}

// largestDifference also fails where there is nothing to compare.
func largestDifference(t *testing.T, got, want []float64) float64 {
	t.Helper()
	if len(got) != len(want) || len(want) == 0 {
		t.Fatalf("%d values, want %d", len(got), len(want))
	}
	largest := 0.0
	for i := range got {
		largest = math.Max(largest, math.Abs(got[i]-want[i]))
	}
	return largest
}

// Both programs that made the check values keep constants in single precision,
// which leaves the last digits open.
func TestGCP(t *testing.T) {
	const tol = 1e-8
	for _, c := range correctionCases(t) {
		for _, set := range []struct {
			basis string
			want  float64
		}{{"MINIX", c.GCPMinix}, {"def2-SVP", c.GCPSVP}, {"6-31G*", c.GCP631Gd}} {
			g, err := newGCP(c.numbers, set.basis)
			if err != nil {
				t.Errorf("%s: %v", c.Name, err)
				continue
			}
			if got := g.energy(c.x, nil); !(math.Abs(got-set.want) <= tol) {
				t.Errorf("%s, %s: %.12f, want %.12f hartree", c.Name, set.basis, got, set.want)
			}
		}
		g, _ := newGCP(c.numbers, "minix")
		grad := make([]float64, len(c.x))
		g.energy(c.x, grad)
		if d := largestDifference(t, grad, c.GCPMinixGradient); !(d <= tol) {
			t.Errorf("%s: gradient off by %.1e hartree/bohr", c.Name, d)
		}
	}
}

// The references have gradients for MINIX only.
func TestGCPGradient(t *testing.T) {
	for _, c := range correctionCases(t) {
		if c.Name != "cysteine_dipeptide" && c.Name != "bromobenzene" {
			continue
		}
		g, err := newGCP(c.numbers, "def2-SVP")
		if err != nil {
			t.Fatal(err)
		}
		gradcheck.Run(t, c.x, 1e-3, 1e-9, g.energy)
	}
}

func TestGCPRefuses(t *testing.T) {
	for _, tc := range []struct {
		numbers []int
		basis   string
		want    string
	}{
		{[]int{1}, "STO-3G", "no counterpoise correction for the basis STO-3G"},
		{[]int{6, 26}, "6-31G*", "no parameters for Fe"},
		{[]int{92}, "MINIX", "no parameters for U"},
	} {
		if _, err := newGCP(tc.numbers, tc.basis); err == nil || !strings.Contains(err.Error(), tc.want) {
			t.Errorf("%v in %s: error %v, want one with %q", tc.numbers, tc.basis, err, tc.want)
		}
	}
}

// Far apart there is nothing to borrow.
func TestCorrectionsFarApart(t *testing.T) {
	g, err := newGCP([]int{6, 8}, "minix")
	if err != nil {
		t.Fatal(err)
	}
	s, err := newSRB([]int{6, 8})
	if err != nil {
		t.Fatal(err)
	}
	x, grad := []float64{0, 0, 0, 0, 0, 300}, make([]float64, 6)
	if e := g.energy(x, grad) + s.energy(x, grad); math.Abs(e) > 1e-200 || math.Abs(grad[5]) > 1e-200 {
		t.Errorf("energy %g, gradient %v at 300 bohr", e, grad)
	}
}

// hf-d3 carries the correction where it was published for the basis, and refuses
// by name an element that it has no parameters for there.
func TestCounterpoiseOfD3(t *testing.T) {
	c := correctionCases(t)[0]
	for basis, want := range map[string]float64{"def2-SVP": c.GCPSVP, "6-31G*": c.GCP631Gd, "6-31G**": 0} {
		list, err := terms(c.numbers, "hf-d3", basis)
		if err != nil {
			t.Fatal(err)
		}
		sum := 0.0
		for _, term := range list {
			if term.name != "dispersion" {
				sum += term.energy(c.x)
			}
		}
		if math.Abs(sum-want) > 5e-9 {
			t.Errorf("%s: %.10f hartree, want %.10f", basis, sum, want)
		}
	}
	if _, err := New([]int{34, 1, 1}, 0, 1, Options{Method: "hf-d3", Basis: "6-31G*"}); err == nil || !strings.Contains(err.Error(), "no parameters for Se") {
		t.Errorf("selenium in 6-31G*: %v", err)
	}
	if _, err := New([]int{6, 1, 1, 1, 53}, 0, 1, Options{Method: "hf-d3"}); err == nil || !strings.Contains(err.Error(), "I needs an effective core potential") {
		t.Errorf("iodine: %v", err)
	}
}
