//go:build full

package generate

import (
	"context"
	"encoding/csv"
	"math"
	"os"
	"slices"
	"testing"

	"torsieve/dedupe"
	"torsieve/internal/units"
)

// The noise of a relaxed structure: twenty ligands, each brought to a minimum
// very tightly, then pushed out of it at random (0.1 angstrom a coordinate) ten
// times and relaxed as conformers are. Those that come back, and they must be
// most, are off by the noise; the thresholds for duplicates must hold nearly
// all of it.
func TestDuplicateThresholds(t *testing.T) {
	f, err := os.Open("../../testdata/reference/recovery/ligands.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rmsds, energies []float64
	pushed := 0
	for k := 1; k < len(rows); k += 6 {
		m, err := stated(rows[k][1])
		if err != nil {
			t.Fatal(err)
		}
		ctx := context.Background()
		s, err := newSearch(ctx, m, rows[k][0], Defaults())
		if err != nil {
			t.Fatal(err)
		}
		x, err := s.embedder.next(ctx, stream(1, rows[k][0], streamWhole, 0))
		if err != nil {
			t.Fatal(err)
		}
		if err := s.charge(ctx, x); err != nil {
			t.Fatal(err)
		}
		set := tightly
		set.RMSGradient, set.MaxGradient, set.MaxGradients = 1e-6, 0, 5000
		bottom, err := s.relaxed(ctx, x, set)
		if err != nil {
			continue // the embedding relaxed to another isomer
		}
		c := dedupe.NewComparer(m, dedupe.Options{PolarHydrogens: true})
		for start := range 10 {
			y := slices.Clone(x)
			r := stream(2, rows[k][0], streamKick, start)
			for i := range y {
				y[i] += 0.1 * units.Angstrom * r.NormFloat64()
			}
			energy, err := s.relaxed(ctx, y, tightly)
			if err != nil {
				continue
			}
			pushed++
			rmsd, _ := c.RMSD(x, y)
			if rmsd > 0.5*units.Angstrom || math.Abs(energy-bottom) > 0.5*units.KcalPerMol {
				continue // over a barrier into another minimum
			}
			rmsds = append(rmsds, rmsd/units.Angstrom)
			energies = append(energies, math.Abs(energy-bottom)/units.KcalPerMol)
		}
	}
	slices.Sort(rmsds)
	slices.Sort(energies)
	at := func(v []float64, share float64) float64 { return v[int(share*float64(len(v)-1))] }
	t.Logf("%d of %d came back; RMSD in angstrom: half %.4f, 90 %% %.4f, 98 %% %.4f; energy in kcal/mol: half %.5f, 90 %% %.5f, 98 %% %.5f",
		len(rmsds), pushed, at(rmsds, 0.5), at(rmsds, 0.9), at(rmsds, 0.98), at(energies, 0.5), at(energies, 0.9), at(energies, 0.98))
	limits := dedupe.DefaultThresholds()
	if at(rmsds, 0.95) > limits.RMSD/units.Angstrom || at(energies, 0.98) > limits.Energy/units.KcalPerMol {
		t.Errorf("the thresholds %+v are below the noise", limits)
	}
}
