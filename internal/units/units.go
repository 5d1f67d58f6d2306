// Package units holds the factors between what files and people use and the
// atomic units that everything inside is computed in.
//
// A factor is the size of the named unit in atomic units, so that
// x*units.Angstrom comes in and x/units.Angstrom goes out.
//
// Source: CODATA 2018 (Tiesinga et al., Rev. Mod. Phys. 2021, 93, 025010,
// doi:10.1103/RevModPhys.93.025010). The calorie is 4.184 J by definition.
package units

const (
	bohrMetre     = 5.29177210903e-11   // m
	hartreeJoule  = 4.3597447222071e-18 // J
	avogadro      = 6.02214076e23       // 1/mol, exact
	boltzmann     = 1.380649e-23        // J/K, exact
	electronvolt  = 1.602176634e-19     // J, exact
	atomicMass    = 1.66053906660e-27   // kg
	electronMass  = 9.1093837015e-31    // kg
	elementary    = 1.602176634e-19     // C, exact
	speedOfLight  = 299792458.0         // m/s, exact
	planck        = 6.62607015e-34      // J s, exact
	debyeCoulombM = 1e-21 / speedOfLight
)

// Lengths, energies, masses and moments in atomic units.
const (
	Angstrom     = 1e-10 / bohrMetre                          // bohr
	KcalPerMol   = 4184 / avogadro / hartreeJoule             // hartree
	ElectronVolt = electronvolt / hartreeJoule                // hartree
	Kelvin       = boltzmann / hartreeJoule                   // hartree: k_B times one kelvin
	Dalton       = atomicMass / electronMass                  // electron masses
	Debye        = debyeCoulombM / (elementary * bohrMetre)   // e bohr
	Wavenumber   = 100 * planck * speedOfLight / hartreeJoule // hartree: h c times one cm^-1
)

// Amounts per volume, pressures and moments of inertia in atomic units, for
// thermodynamics.
const (
	Bar            = 1e5 * bohrMetre * bohrMetre * bohrMetre / hartreeJoule // hartree/bohr^3
	MolPerLitre    = 1e3 * avogadro * bohrMetre * bohrMetre * bohrMetre     // particles/bohr^3
	KilogramMetre2 = 1 / (electronMass * bohrMetre * bohrMetre)             // electron masses bohr^2
	JoulePerMol    = 1 / avogadro / hartreeJoule                            // hartree
)
