package units

import (
	"math"
	"testing"
)

// Factors against what CODATA 2018 (doi:10.1103/RevModPhys.93.025010) lists as
// quantities of their own; from memory, to the digits printed.
func TestListedQuantities(t *testing.T) {
	const hbar = 1.054571817e-34 // J s
	for name, v := range map[string]struct{ got, want, digits float64 }{
		"hartree in cm^-1":                        {1 / Wavenumber, 219474.63136320, 1e-11},
		"hartree in eV":                           {1 / ElectronVolt, 27.211386245988, 1e-12},
		"hartree in kelvin":                       {1 / Kelvin, 315775.02480407, 1e-11},
		"molar gas constant, J/(mol K)":           {Kelvin / JoulePerMol, 8.314462618, 1e-10},
		"dalton in electron masses":               {Dalton, 1822.888486209, 1e-11},
		"molar volume at 273.15 K and 1 bar, l":   {273.15 * Kelvin / Bar * MolPerLitre, 22.71095464, 1e-9},
		"kg m^2 against hbar^2/hartree":           {KilogramMetre2 * hbar * hbar / hartreeJoule, 1, 1e-8},
		"calorie in joule, by definition":         {KcalPerMol / JoulePerMol, 4184, 1e-14},
		"kelvin in cm^-1, k/hc":                   {Kelvin / Wavenumber, 0.695034800, 1e-8},
		"angstrom in bohr, from 0.529177210903 A": {Angstrom * 0.529177210903, 1, 1e-14},
	} {
		if math.Abs(v.got/v.want-1) > v.digits {
			t.Errorf("%s: %.14g, want %.14g", name, v.got, v.want)
		}
	}
}
