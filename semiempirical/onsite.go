package semiempirical

// An onsite is the exchange-correlation of each atom's own dipole and
// quadrupole (J. Chem. Theory Comput. 2019, 15, 1652, eq. 30).
type onsite struct {
	elements []*element
}

var _ contribution = onsite{}

func (onsite) name() string { return "anisotropic exchange-correlation" }

func (onsite) update(*geometry) {}

func (o onsite) energy(m *moments, v *potential) float64 {
	var sum float64
	for a, e := range o.elements {
		for i := 3 * a; i < 3*a+3; i++ {
			sum += e.DipoleKernel * m.dipole[i] * m.dipole[i]
			v.dipole[i] += 2 * e.DipoleKernel * m.dipole[i]
		}
		for i := range 6 {
			t := m.quadrupole[6*a+i]
			sum += packedCount[i] * e.QuadrupoleKernel * t * t
			v.quadrupole[6*a+i] += 2 * e.QuadrupoleKernel * t
		}
	}
	return sum
}
