package solvent

import "math"

// A bonding is the energy of hydrogen bonds to the solvent: of each atom that
// can have them, strength times the free part of its sphere times its charge
// squared.
//
// Source: S. Ehlert, M. Stahn, S. Spicher, S. Grimme, J. Chem. Theory Comput.
// 2021, 17, 4250.
type bonding struct {
	strength []float64 // of the whole sphere, over its area: hartree/(e^2 bohr^2)
}

// newBonding prepares for atoms whose spheres, with the probe, have the radii
// given.
func newBonding(numbers []int, f *fit, sphere []float64) bonding {
	b := bonding{column(numbers, f.HydrogenBond)}
	for a, r := range sphere {
		b.strength[a] /= 4 * math.Pi * r * r
	}
	return b
}

// energy returns the energy at the charges q and adds its derivative to v.
func (b bonding) energy(area, q, v []float64) float64 {
	var sum float64
	for a, h := range b.strength {
		field := h * area[a] * q[a]
		v[a] += 2 * field
		sum += field * q[a]
	}
	return sum
}
