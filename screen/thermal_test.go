package screen

import (
	"errors"
	"math"
	"strings"
	"testing"

	"torsieve/internal/thermo"
	"torsieve/internal/units"
)

// The free energy of the nuclei stands in the final energy of each temperature,
// and in the weights: it falls with the temperature by the entropy, which no
// molecule lacks.
func TestThermalTermsWeigh(t *testing.T) {
	o := quick()
	o.Thermal = true
	tiers := []Tier{fieldTier{name: "first"}, fieldTier{name: "second"}, fieldTier{name: "third", flat: true}}
	res, err := results(t.Context(), t, ligandsOf(t, NewIntake(), "CCCO"), tiers, o)
	if err != nil || len(res[0].Kept) < 2 {
		t.Fatalf("%v, %d kept (%s)", err, len(res[0].Kept), res[0].Reason)
	}
	r := res[0]
	for _, i := range r.Kept {
		c := r.Conformers[i]
		if len(c.Thermal) != 2 || !(c.Thermal[1] < c.Thermal[0]) {
			t.Errorf("conformer %d: thermal terms %v hartree at 298 and 400 K", c.Number, c.Thermal)
		}
		if d := c.FinalAt(1) - c.Energies[2] - c.Thermal[1]; math.Abs(d) > 1e-12 {
			t.Errorf("conformer %d: the final energy at 400 K has %.1e hartree more", c.Number, d)
		}
	}
	for k, e := range r.Ensembles {
		a, b := r.Conformers[r.Kept[0]], r.Conformers[r.Kept[1]]
		want := math.Log(float64(a.Copies)/float64(b.Copies)) - (a.FinalAt(k)-b.FinalAt(k))/(units.Kelvin*e.Temperature)
		if got := math.Log(e.Populations[0] / e.Populations[1]); math.Abs(got-want) > 1e-9 {
			t.Errorf("%g K: log ratio of the first two %.9f, want %.9f", e.Temperature, got, want)
		}
	}
}

func TestNoVibrationsOfTheForceFieldAlone(t *testing.T) {
	o := quick()
	o.Thermal = true
	res, err := results(t.Context(), t, ligandsOf(t, NewIntake(), "CCO"), []Tier{fieldTier{name: "first"}}, o)
	if err != nil || res[0].Status != Failed || !strings.Contains(res[0].Reason, ErrNoVibrations.Error()) {
		t.Errorf("%v, %s: %s", err, res[0].Status, res[0].Reason)
	}
}

// A saddle is left out and told, a failure makes the result partial, and both
// together, with nothing left, end the ligand.
func TestTellThermal(t *testing.T) {
	saddle := &thermo.SaddleError{Modes: []int{0}, Quanta: []float64{-200 * units.Wavenumber}}
	for _, c := range []struct {
		failed, saddles int
		warned          string
		status          Status
		err             string
	}{
		{0, 0, "", Done, ""},
		{0, 1, "1 of 3 conformers are no minima", Done, ""},
		{2, 0, "", Partial, ""},
		{1, 2, "", Done, "none of 3 conformers came through"},
	} {
		r := &ligandRun{result: &Result{Status: Done}}
		failed, saddles := make([]error, c.failed), make([]error, c.saddles)
		for i := range failed {
			failed[i] = errors.New("lost")
		}
		for i := range saddles {
			saddles[i] = saddle
		}
		err := r.tellThermal(3, failed, saddles)
		if (err == nil) != (c.err == "") || err != nil && !strings.Contains(err.Error(), c.err) {
			t.Errorf("%+v: error %v", c, err)
		}
		if got := strings.Join(r.result.Warnings, ";"); r.result.Status != c.status || !strings.Contains(got, c.warned) || c.warned == "" && got != "" {
			t.Errorf("%+v: status %s, warnings %q", c, r.result.Status, got)
		}
	}
}
