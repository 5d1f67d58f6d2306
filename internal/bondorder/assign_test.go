package bondorder_test

import (
	"compress/gzip"
	"errors"
	"os"
	"slices"
	"testing"

	"torsieve/internal/bondorder"
	"torsieve/internal/units"
	"torsieve/molecule/sdf"
)

// published reads structures with their published bonds (sources in
// testdata/reference/formats/README.md).
func published(t *testing.T) (records []sdf.Record) {
	t.Helper()
	f, err := os.Open("../../testdata/reference/formats/conformers.sdf.gz")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	z, err := gzip.NewReader(f)
	if err != nil {
		t.Fatal(err)
	}
	r := sdf.NewReader(z, f.Name(), 1000)
	for {
		rec, err := r.Next()
		if err != nil {
			break
		}
		if rec.Err != nil {
			t.Fatal(rec.Err)
		}
		records = append(records, rec)
	}
	if len(records) != 180 {
		t.Fatalf("%d records, want 180", len(records))
	}
	return records
}

// The bonds, the number of multiple bonds and the number of charged atoms are
// those published, given the total charge. Orders themselves may stand in
// another Kekule or resonance form.
func TestAssignFindsPublishedBonds(t *testing.T) {
	for _, rec := range published(t) {
		m := rec.Mol
		r, err := bondorder.Assign(m.Numbers(), rec.X, m.Charge(), -1)
		if err != nil {
			t.Errorf("%s: %v", rec.Title, err)
			continue
		}
		var want, got [][2]int
		wantPi, gotPi := 0, 0
		for _, b := range m.Bonds() {
			want = append(want, [2]int{b.A, b.B})
			wantPi += b.Order - 1
		}
		for _, b := range r.Bonds {
			got = append(got, [2]int{b.A, b.B})
			gotPi += b.Order - 1
		}
		slices.SortFunc(want, func(a, b [2]int) int { return slices.Compare(a[:], b[:]) })
		if !slices.Equal(got, want) {
			t.Errorf("%s: bonds %v, want %v", rec.Title, got, want)
		}
		wantCharged, gotCharged := 0, 0
		for i, q := range r.Charges {
			if q != 0 {
				gotCharged++
			}
			if m.Atom(i).Charge != 0 {
				wantCharged++
			}
			if r.Unpaired[i] != 0 {
				t.Errorf("%s: atom %d has an unpaired electron", rec.Title, i+1)
			}
		}
		if gotPi != wantPi || gotCharged != wantCharged {
			t.Errorf("%s: %d pi bonds and %d charged atoms, want %d and %d (cost %.2f)", rec.Title, gotPi, gotCharged, wantPi, wantCharged, r.Cost)
		}
	}
}

func TestTooClose(t *testing.T) {
	x := []float64{0, 0, 0, 0.3 * units.Angstrom, 0, 0}
	_, err := bondorder.Connect([]int{6, 6}, x)
	var e *bondorder.TooClose
	if !errors.As(err, &e) || e.A != 0 || e.B != 1 {
		t.Errorf("two carbons 0.3 angstrom apart: %v", err)
	}
}
