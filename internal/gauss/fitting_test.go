package gauss_test

import (
	"compress/gzip"
	"encoding/json"
	"math"
	"os"
	"testing"

	"torsieve/hf/basis"
	"torsieve/internal/gauss"
)

// fittingFile is testdata/reference/hf/fitting-h2o.json.gz; its source is in it.
type fittingFile struct {
	Geometry [][]float64 `json:"geometry_bohr"`
	Blocks   []struct {
		Basis     string
		Functions int         `json:"n_aux"`
		Three     [][]float64 `json:"three_index_A_i_j_value"`
		Two       [][]float64 `json:"two_index_A_B_value"`
		ThreeSum  float64     `json:"three_index_sum_of_squares"`
		TwoSum    float64     `json:"two_index_sum_of_squares"`
	}
}

func TestFittingIntegralsOfWater(t *testing.T) {
	file, err := os.Open("../../testdata/reference/hf/fitting-h2o.json.gz")
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	z, err := gzip.NewReader(file)
	if err != nil {
		t.Fatal(err)
	}
	var f fittingFile
	if err := json.NewDecoder(z).Decode(&f); err != nil {
		t.Fatal(err)
	}
	var x []float64
	for _, g := range f.Geometry {
		x = append(x, g...)
	}
	numbers := []int{8, 1, 1}
	for _, b := range f.Blocks {
		t.Run(b.Basis, func(t *testing.T) {
			orbital, err := basis.Load(b.Basis)
			if err != nil {
				t.Fatal(err)
			}
			auxiliary, err := basis.FieldFitting()
			if err != nil {
				t.Fatal(err)
			}
			shells, err := orbital.Shells(numbers)
			if err != nil {
				t.Fatal(err)
			}
			aux, err := auxiliary.Shells(numbers)
			if err != nil {
				t.Fatal(err)
			}
			three, two, n, m := fittingLists(shells, aux, x)
			if m != b.Functions {
				t.Fatalf("%d auxiliary functions, want %d", m, b.Functions)
			}
			for _, e := range b.Three {
				a, i, j, want := int(e[0]), int(e[1]), int(e[2]), e[3]
				if got := three[(i*n+j)*m+a]; math.Abs(got-want) > 2e-12 {
					t.Errorf("(%d|%d %d) = %.12f, want %.12f", a, i, j, got, want)
				}
			}
			for _, e := range b.Two {
				a, c, want := int(e[0]), int(e[1]), e[2]
				if got := two[a*m+c]; math.Abs(got-want) > 2e-12*max(1, math.Abs(want)) {
					t.Errorf("(%d|%d) = %.12f, want %.12f", a, c, got, want)
				}
			}
			compareSum(t, "three-index", three, b.ThreeSum)
			compareSum(t, "two-index", two, b.TwoSum)
		})
	}
}

func compareSum(t *testing.T, what string, v []float64, want float64) {
	t.Helper()
	sum := 0.0
	for _, x := range v {
		sum += x * x
	}
	if math.Abs(sum-want) > 1e-11*want {
		t.Errorf("%s sum of squares %.13g, want %.13g", what, sum, want)
	}
}

// fittingLists returns all three-index integrals, [i][j][A], and the metric, with
// auxiliary functions in the order of their shells.
func fittingLists(shells, aux []gauss.Shell, x []float64) (three, two []float64, n, m int) {
	off := gauss.Offsets(shells)
	f := gauss.NewFitting(shells, aux)
	f.Place(x, 1e-14)
	n, m = off[len(shells)], f.Functions()
	var order []int // place of each function
	for _, of := range f.Order() {
		order = append(order, of...)
	}
	three, two = make([]float64, n*n*m), make([]float64, m*m)
	metric := make([]float64, m*m)
	f.Metric(metric)
	for a, from := range order {
		for b, at := range order {
			two[a*m+b] = metric[from*m+at]
		}
	}
	for k := range f.Pairs() {
		i, j := f.Pair(k)
		block := make([]float64, f.Size(k)*m)
		f.Integrals(block, m, k)
		nj := off[j+1] - off[j]
		for row := range f.Size(k) {
			p, q := off[i]+row/nj, off[j]+row%nj
			for a, from := range order {
				v := block[row*m+from]
				three[(p*n+q)*m+a], three[(q*n+p)*m+a] = v, v
			}
		}
	}
	return three, two, n, m
}
