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
		d := arrow(x, c.i, c.j)
		inv := 1 / (screening*dot(d, d) + screeningOffset)
		e := c.qq * inv
		energy += e
		if grad == nil {
			continue
		}
		f := -2 * screening * e * inv
		push(grad, c.i, f, d)
		push(grad, c.j, -f, d)
	}
	return energy
}
