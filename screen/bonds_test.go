package screen

import (
	"strings"
	"testing"

	"torsieve/internal/units"
)

// Measured bond lengths are bonds: H2 0.741, F2 1.41, I2 2.67, Cl2 1.99 angstrom
// (CRC Handbook of Chemistry and Physics, lengths in gas-phase molecules).
func TestSameBonds(t *testing.T) {
	for _, tc := range []struct {
		smiles string
		length float64 // angstrom, of the first two atoms
		want   string
	}{
		{"[H][H]", 0.741, ""},
		{"[H][H]", 1.2, "H1-H2 is broken (1.20 angstrom)"},
		{"FF", 1.41, ""},
		{"II", 2.67, ""},
		{"ClCl", 1.99, ""},
		{"ClCl", 2.9, "Cl1-Cl2 is broken"},
	} {
		m := parsed(t, tc.smiles)
		x := []float64{0, 0, 0, 0, 0, tc.length * units.Angstrom}
		err := sameBonds(m, x)
		if tc.want == "" && err != nil || tc.want != "" && (err == nil || !strings.Contains(err.Error(), tc.want)) {
			t.Errorf("%s at %g angstrom: %v, want %q", tc.smiles, tc.length, err, tc.want)
		}
	}
}

// Two hydrogen molecules: near each other they have made a bond that the graph
// does not have.
func TestSameBondsFindsNewOnes(t *testing.T) {
	m := parsed(t, "[H][H].[H][H]")
	at := func(d float64) []float64 {
		return []float64{0, 0, 0, 0, 0, 1.4, d * units.Angstrom, 0, 0, d * units.Angstrom, 0, 1.4}
	}
	if err := sameBonds(m, at(2.0)); err != nil {
		t.Errorf("2.0 angstrom apart: %v", err)
	}
	if err := sameBonds(m, at(0.7)); err == nil || !strings.Contains(err.Error(), "come together") {
		t.Errorf("0.7 angstrom apart: %v", err)
	}
}
