package forcefield

import "torsieve/internal/units"

// A charged is the screened Coulomb term of two atoms with a dielectric that
// grows with the distance: qq / (e r^2 + delta).
//
// The force field was fitted without charges, and with a dielectric of 1 those
// in a vacuum would fold every ligand onto its own hydrogen bonds; the old
// distance-dependent dielectric of 4 r (r in angstrom) stands for what screens
// them. Own choices: the offset delta, and half strength between atoms three
// bonds apart.
type charged struct {
	i, j int32
	qq   float64 // product of the charges, scaled; hartree
}

type charges []charged

func (charges) name() string { return "electrostatic" }

const (
	// coulombEnergy is 332.0637 kcal/mol: two unit charges 1 angstrom apart.
	coulombEnergy   = 332.0637 * units.KcalPerMol
	screening       = 4 / (units.Angstrom * units.Angstrom) // per bohr^2
	screeningOffset = 0.01
	oneFourShare    = 0.5
)

func (cs charges) addTo(grad, x []float64) float64 {
	var energy float64
	for n := range cs {
		c := &cs[n]
		a, b := x[3*c.i:3*c.i+3:3*c.i+3], x[3*c.j:3*c.j+3:3*c.j+3]
		d0, d1, d2 := a[0]-b[0], a[1]-b[1], a[2]-b[2]
		inv := 1 / (screening*(d0*d0+d1*d1+d2*d2) + screeningOffset)
		e := c.qq * inv
		energy += e
		if grad == nil {
			continue
		}
		f := -2 * screening * e * inv
		ga, gb := grad[3*c.i:3*c.i+3:3*c.i+3], grad[3*c.j:3*c.j+3:3*c.j+3]
		ga[0] += f * d0
		ga[1] += f * d1
		ga[2] += f * d2
		gb[0] -= f * d0
		gb[1] -= f * d1
		gb[2] -= f * d2
	}
	return energy
}
