package thermo

import (
	"fmt"
	"math"

	"torsieve/internal/units"
)

// A Species is what statistical mechanics needs to know of a molecule.
type Species struct {
	Body
	Symmetry int       // rotational symmetry number; 1 where copies are counted elsewhere (package comment)
	Quanta   []float64 // of the vibrations, hartree, all greater than 0
}

// A Part is one kind of motion's share in the thermodynamic functions.
type Part struct {
	Enthalpy float64 // above that at 0 K, hartree
	Entropy  float64 // hartree/kelvin
}

// Functions are thermodynamic functions of one species at one temperature,
// without the energy of the nuclei at rest.
type Functions struct {
	Temperature float64 // kelvin
	ZeroPoint   float64 // half the sum of the quanta, hartree
	Translation Part    // with the kT of pV
	Rotation    Part
	Vibration   Part // entropy between oscillator and free rotor
	Harmonic    Part // vibration with the plain oscillator's entropy, for comparison; counts in no sum
}

// Enthalpy is what is to be added to the energy of the minimum, hartree: with
// zero-point energy and pV.
func (f Functions) Enthalpy() float64 {
	return f.ZeroPoint + f.Translation.Enthalpy + f.Rotation.Enthalpy + f.Vibration.Enthalpy
}

// Entropy is that of all motions, hartree/kelvin.
func (f Functions) Entropy() float64 {
	return f.Translation.Entropy + f.Rotation.Entropy + f.Vibration.Entropy
}

// FreeEnergy is what is to be added to the energy of the minimum for its free
// enthalpy G, hartree.
func (f Functions) FreeEnergy() float64 { return f.Enthalpy() - f.Temperature*f.Entropy() }

// HarmonicFreeEnergy is FreeEnergy with all vibrations as plain oscillators.
func (f Functions) HarmonicFreeEnergy() float64 {
	return f.FreeEnergy() + f.Temperature*(f.Vibration.Entropy-f.Harmonic.Entropy)
}

// A StandardState is what the entropy of translation refers to.
type StandardState int

// The standard states. From OneBar to OneMolar G rises by kT ln(24.79) at
// 298.15 K, 1.90 kcal/mol, the same for all conformers. Enthalpies do not change:
// kT of pV is kept for the solute, as is common practice.
const (
	OneBar   StandardState = iota // ideal gas at 1 bar
	OneMolar                      // 1 mol/l, as ideal gas or ideal solution
)

// volume is the volume for one particle, bohr^3.
func (s StandardState) volume(kT float64) float64 {
	switch s {
	case OneBar:
		return kT / units.Bar
	case OneMolar:
		return 1 / units.MolPerLitre
	}
	panic(fmt.Sprintf("thermo: unknown standard state %d", int(s)))
}

// At returns the functions at a temperature in kelvin. Panics for a temperature,
// a symmetry number or a quantum that is not greater than 0.
func (s Species) At(temperature float64, state StandardState) Functions {
	if !(temperature > 0) || math.IsInf(temperature, 0) || s.Symmetry < 1 {
		panic(fmt.Sprintf("thermo: temperature %g K, symmetry number %d", temperature, s.Symmetry))
	}
	kT := temperature * units.Kelvin
	f := Functions{
		Temperature: temperature,
		Translation: translation(s.Mass, kT, state.volume(kT)),
		Rotation:    rotation(s.Body, s.Symmetry, kT),
	}
	for _, quantum := range s.Quanta {
		if !(quantum > 0) {
			panic(fmt.Sprintf("thermo: quantum %g hartree", quantum))
		}
		f.ZeroPoint += quantum / 2
		h := oscillator(quantum, kT)
		f.Harmonic.Enthalpy += h.Enthalpy
		f.Harmonic.Entropy += h.Entropy
		f.Vibration.Enthalpy += h.Enthalpy
		f.Vibration.Entropy += interpolated(quantum, kT)
	}
	return f
}
