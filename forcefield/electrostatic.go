package forcefield

import "torsieve/internal/units"

// The electrostatic term is the screened Coulomb energy of frozen charges with
// a dielectric that grows with the distance: qq / (e r^2 + offset).
//
// The force field was fitted without charges, and with a dielectric of 1 those
// in a vacuum would fold every ligand onto its own hydrogen bonds; the old
// distance-dependent dielectric of 4 r (r in angstrom) stands for what screens
// them. Own choices: the offset, and half strength between atoms three bonds
// apart.
const (
	// coulombEnergy is 332.0637 kcal/mol: two unit charges 1 angstrom apart.
	coulombEnergy   = 332.0637 * units.KcalPerMol
	screening       = 4 / (units.Angstrom * units.Angstrom) // per bohr^2
	screeningOffset = 0.01
	oneFourShare    = 0.5
)

// withCharges returns a copy of the uncharged pairs of the tables with the
// products of the charges q.
func (t *tables) withCharges(q []float64) *nonbonded {
	out := &nonbonded{rows: t.uncharged.rows, pairs: append([]pair(nil), t.uncharged.pairs...)}
	for _, r := range out.rows {
		for k := r.from; k < r.to; k++ {
			p := &out.pairs[k]
			p.qq = coulombEnergy * q[r.i] * q[p.j]
			if t.apart[int(r.i)*len(q)+int(p.j)] == 3 {
				p.qq *= oneFourShare
			}
		}
	}
	return out
}
