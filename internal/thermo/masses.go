package thermo

import (
	"fmt"

	"torsieve/internal/element"
	"torsieve/internal/units"
)

// Masses returns the masses of atoms in electron masses, by atomic number and
// mass number; a mass number of 0, or isotopes being nil, stands for the mixture
// of nature.
//
// The mixture counts with its standard atomic weight, as is common practice for
// comparison with what was measured on natural material; taking the commonest
// isotope instead changes no difference of conformers that could be seen. A
// stated isotope has its own mass where it stands in the table below, and else
// its mass number, which is within 0.1 u of it, and within 0.03 u up to calcium.
//
// Panics where the two lists differ in length.
func Masses(numbers, isotopes []int) []float64 {
	if isotopes != nil && len(isotopes) != len(numbers) {
		panic(fmt.Sprintf("thermo: %d atoms, %d isotopes", len(numbers), len(isotopes)))
	}
	masses := make([]float64, len(numbers))
	for i, z := range numbers {
		masses[i] = element.Mass(z) * units.Dalton
		if isotopes != nil && isotopes[i] > 0 {
			masses[i] = isotope(z, isotopes[i]) * units.Dalton
		}
	}
	return masses
}

// isotope returns the mass of an isotope in dalton.
func isotope(z, a int) float64 {
	if m, ok := labels[[2]int{z, a}]; ok {
		return m
	}
	return float64(a)
}

// labels are masses of the isotopes that compounds are labelled with, in dalton,
// by atomic and mass number: AME2020 (M. Wang et al., Chinese Phys. C 2021, 45,
// 030003). Written down from memory.
var labels = map[[2]int]float64{
	{1, 1}: 1.00782503, {1, 2}: 2.01410178, {1, 3}: 3.01604928,
	{6, 11}: 11.0114336, {6, 12}: 12, {6, 13}: 13.00335484, {6, 14}: 14.00324199,
	{7, 14}: 14.00307400, {7, 15}: 15.00010890,
	{8, 16}: 15.99491462, {8, 17}: 16.99913176, {8, 18}: 17.99915961,
	{9, 18}: 18.0009373, {9, 19}: 18.99840316,
}
