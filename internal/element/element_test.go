package element

import (
	"math"
	"testing"

	"torsieve/internal/units"
)

func TestSymbolsAndNumbers(t *testing.T) {
	for z := 1; z <= MaxZ; z++ {
		if got, ok := Number(Symbol(z)); !ok || got != z {
			t.Errorf("Number(%q) = %d, %v, want %d", Symbol(z), got, ok, z)
		}
	}
	// Places known by heart from any periodic table.
	for symbol, want := range map[string]int{
		"H": 1, "C": 6, "Cl": 17, "Fe": 26, "Br": 35, "I": 53, "Xe": 54, "Gd": 64,
		"Lu": 71, "Pt": 78, "Rn": 86, "U": 92, "Lr": 103, "Og": 118,
	} {
		if got, _ := Number(symbol); got != want {
			t.Errorf("Number(%q) = %d, want %d", symbol, got, want)
		}
	}
	for _, no := range []string{"", "h", "D", "CL", "Zz"} {
		if z, ok := Number(no); ok {
			t.Errorf("Number(%q) = %d, want none", no, z)
		}
	}
}

// Groups and periods: the IUPAC periodic table, group 3 being Sc, Y, Lu, Lr.
func TestPlaces(t *testing.T) {
	for _, tc := range []struct {
		symbol        string
		period, group int
		metal         bool
	}{
		{"H", 1, 1, false}, {"He", 1, 18, false}, {"Li", 2, 1, true}, {"Be", 2, 2, true},
		{"B", 2, 13, false}, {"C", 2, 14, false}, {"Ne", 2, 18, false},
		{"Na", 3, 1, true}, {"Mg", 3, 2, true}, {"Al", 3, 13, true}, {"Si", 3, 14, false}, {"Cl", 3, 17, false},
		{"K", 4, 1, true}, {"Sc", 4, 3, true}, {"Fe", 4, 8, true}, {"Zn", 4, 12, true},
		{"Ga", 4, 13, true}, {"Ge", 4, 14, false}, {"As", 4, 15, false}, {"Se", 4, 16, false}, {"Br", 4, 17, false},
		{"Y", 5, 3, true}, {"Pd", 5, 10, true}, {"In", 5, 13, true}, {"Sn", 5, 14, true},
		{"Sb", 5, 15, false}, {"Te", 5, 16, false}, {"I", 5, 17, false}, {"Xe", 5, 18, false},
		{"Cs", 6, 1, true}, {"La", 6, 0, true}, {"Yb", 6, 0, true}, {"Lu", 6, 3, true}, {"Hf", 6, 4, true},
		{"Hg", 6, 12, true}, {"Tl", 6, 13, true}, {"Pb", 6, 14, true}, {"Bi", 6, 15, true}, {"Po", 6, 16, true},
		{"At", 6, 17, false}, {"Rn", 6, 18, false}, {"U", 7, 0, true}, {"Lr", 7, 3, true}, {"Rf", 7, 4, true}, {"Og", 7, 18, false},
	} {
		z, _ := Number(tc.symbol)
		if p, g, m := Period(z), Group(z), IsMetal(z); p != tc.period || g != tc.group || m != tc.metal {
			t.Errorf("%s: period %d, group %d, metal %v; want %d, %d, %v", tc.symbol, p, g, m, tc.period, tc.group, tc.metal)
		}
	}
}

// Masses rise with z but for the known inversions of the periodic table
// (Ar/K, Co/Ni, Te/I, and radioactive elements); hydrogen to iodine as printed
// in the IUPAC 2021 abridged table.
func TestMasses(t *testing.T) {
	inverted := map[string]bool{"K": true, "Ni": true, "I": true, "Pa": true, "Np": true, "Am": true, "Sg": true}
	for z := 2; z <= MaxZ; z++ {
		if Mass(z) < Mass(z-1) && !inverted[Symbol(z)] {
			t.Errorf("mass of %s, %g, is below that of %s, %g", Symbol(z), Mass(z), Symbol(z-1), Mass(z-1))
		}
	}
	for symbol, want := range map[string]float64{
		"H": 1.008, "C": 12.011, "N": 14.007, "O": 15.999, "F": 18.998, "P": 30.974, "S": 32.06,
		"Cl": 35.45, "Br": 79.904, "I": 126.90, "Pt": 195.08, "Pb": 207.2, "U": 238.03,
	} {
		if z, _ := Number(symbol); Mass(z) != want {
			t.Errorf("mass of %s = %g, want %g", symbol, Mass(z), want)
		}
	}
}

// Values in angstrom as printed in Cordero et al. 2008, Table 2; Bondi 1964;
// Mantina et al. 2009, Table 12; Alvarez 2013.
func TestRadii(t *testing.T) {
	for _, tc := range []struct {
		symbol        string
		covalent, vdw float64
	}{
		{"H", 0.31, 1.10}, {"C", 0.76, 1.70}, {"N", 0.71, 1.55}, {"O", 0.66, 1.52}, {"F", 0.57, 1.47},
		{"P", 1.07, 1.80}, {"S", 1.05, 1.80}, {"Cl", 1.02, 1.75}, {"Br", 1.20, 1.83}, {"I", 1.39, 1.98},
		{"Fe", 1.52, 2.44}, {"Cm", 1.69, 3.05}, {"Pm", 1.99, 0}, {"Og", 0, 0},
	} {
		z, _ := Number(tc.symbol)
		if got := CovalentRadius(z) / units.Angstrom; math.Abs(got-tc.covalent) > 1e-12 {
			t.Errorf("covalent radius of %s = %g, want %g", tc.symbol, got, tc.covalent)
		}
		if got := VdwRadius(z) / units.Angstrom; math.Abs(got-tc.vdw) > 1e-12 {
			t.Errorf("van der Waals radius of %s = %g, want %g", tc.symbol, got, tc.vdw)
		}
	}
}
