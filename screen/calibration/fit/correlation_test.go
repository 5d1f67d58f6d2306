package main

import (
	"math"
	"strconv"
	"testing"

	"torsieve/internal/units"
	"torsieve/screen/ensemble"
)

// The errors of GFN2-xTB and PBEh-3c share with the distance between shapes what
// ensemble.Shared says: half the mean squared difference of two errors, in units
// of the molecule's variance, over that of shapes more than 2 A apart, is one
// less the correlation. Bins have 180 to 1600 pairs; 0.12 is allowed, which is two
// to three standard errors of the smaller ones.
func TestErrorsShareWithDistance(t *testing.T) {
	for _, method := range []string{"gfn2_kcal_mol", "pbeh3c_kcal_mol"} {
		errors := standardErrors(t, method)
		edges := []float64{0.02, 0.05, 0.1, 0.2, 0.3, 0.6, 1.2, 1.6, 2, 99} // angstrom
		half, model, count := make([]float64, len(edges)), make([]float64, len(edges)), make([]float64, len(edges))
		records, err := readAll(data + "/fh2020-rmsd.csv.gz")
		if err != nil {
			t.Fatal(err)
		}
		for _, r := range records[1:] {
			a, known := errors[r[0]+" "+r[1]]
			b, alsoKnown := errors[r[0]+" "+r[2]]
			if !known || !alsoKnown {
				continue
			}
			rmsd, err := strconv.ParseFloat(r[3], 64)
			if err != nil {
				t.Fatal(err)
			}
			k := 0
			for rmsd >= edges[k] {
				k++
			}
			half[k] += (a - b) * (a - b) / 2
			model[k] += ensemble.Shared(rmsd * units.Angstrom)
			count[k]++
		}
		last := len(edges) - 1
		for k := range last {
			got, want := 1-half[k]/count[k]/(half[last]/count[last]), model[k]/count[k]
			t.Logf("%s, under %.2f A: %4g pairs, correlation %.2f, model %.2f", method, edges[k], count[k], got, want)
			if count[k] > 150 && math.Abs(got-want) > 0.12 {
				t.Errorf("%s, under %.2f A: correlation %.2f, the model says %.2f", method, edges[k], got, want)
			}
		}
	}
}

// standardErrors returns a method's errors by "id conformer", each molecule's
// with mean 0 and deviation 1.
func standardErrors(t *testing.T, method string) map[string]float64 {
	t.Helper()
	records, err := readAll(data + "/fh2020.csv.gz")
	if err != nil {
		t.Fatal(err)
	}
	column, truth := 0, 0
	for k, name := range records[0] {
		switch name {
		case method:
			column = k
		case reference:
			truth = k
		}
	}
	names, values := map[string][]string{}, map[string][]float64{}
	for _, r := range records[1:] {
		e, err := strconv.ParseFloat(r[column], 64)
		if err != nil {
			continue // the publication has no number
		}
		y, err := strconv.ParseFloat(r[truth], 64)
		if err != nil {
			t.Fatal(err)
		}
		names[r[0]], values[r[0]] = append(names[r[0]], r[0]+" "+r[1]), append(values[r[0]], y-e)
	}
	out := map[string]float64{}
	for id, x := range values {
		if len(x) < 6 {
			continue
		}
		centre(x)
		deviation := math.Sqrt(inner(x, x) / float64(len(x)-1))
		for i, v := range x {
			out[names[id][i]] = v / deviation
		}
	}
	return out
}
