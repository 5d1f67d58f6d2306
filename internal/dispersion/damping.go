package dispersion

import "math"

// D3Params are the parameters of the rational damping function, with which a
// pair of atoms has the energy
//
//	-C6 [ S6/(R^6 + R0^6) + S8 q/(R^8 + R0^8) ],  R0 = A1 sqrt(q) + A2,
//
// q being C8/C6. Source of the form: A. D. Becke, E. R. Johnson, J. Chem. Phys.
// 2005, 123, 154101; S. Grimme, S. Ehrlich, L. Goerigk, J. Comput. Chem. 2011,
// 32, 1456.
type D3Params struct {
	S6, S8 float64
	A1     float64
	A2     float64 // bohr
}

// Parameter sets for NewD3.
var (
	// HF3c belongs to HF-3c (R. Sure, S. Grimme, J. Comput. Chem. 2013, 34,
	// 1672, doi:10.1002/jcc.23317).
	HF3c = D3Params{S6: 1, S8: 0.8777, A1: 0.4171, A2: 2.9149}
	// HF belongs to Hartree-Fock in a large basis (S. Grimme, S. Ehrlich,
	// L. Goerigk, J. Comput. Chem. 2011, 32, 1456).
	HF = D3Params{S6: 1, S8: 0.9171, A1: 0.3385, A2: 2.8830}
)

// damping is what D3Params make of each pair of atoms of a molecule.
type damping struct {
	params D3Params
	ratio  []float64 // C8/C6, bohr^2, one a pair
	r0     []float64 // bohr
	cutoff float64   // bohr; pairs beyond it have no energy
	width  float64   // bohr; the energy is switched off over this length, 0: at once
}

func newDamping(numbers []int, p D3Params, cutoff, width float64) *damping {
	d := &damping{params: p, cutoff: cutoff, width: width}
	q := &atomicTable().multipole
	for a, za := range numbers {
		for _, zb := range numbers[:a] {
			ratio := 3 * q[za] * q[zb]
			d.ratio = append(d.ratio, ratio)
			d.r0 = append(d.r0, p.A1*math.Sqrt(ratio)+p.A2)
		}
	}
	return d
}

// at returns the factor f of the energy -C6 f of pair k at distance r, and its
// derivative.
func (d *damping) at(k int, r float64) (f, slope float64) {
	s, ds := switchOff(r, d.cutoff, d.width)
	if s == 0 {
		return 0, 0
	}
	r2, r02 := r*r, d.r0[k]*d.r0[k]
	r6, r06 := r2*r2*r2, r02*r02*r02
	t6, t8 := 1/(r6+r06), 1/(r6*r2+r06*r02)
	e6, e8 := d.params.S6*t6, d.params.S8*d.ratio[k]*t8
	f = e6 + e8
	slope = -(6*e6*t6 + 8*e8*t8*r2) * r2 * r2 * r
	return f * s, slope*s + f*ds
}

// switchOff falls from 1 to 0 over the last width before the cut-off, with two
// continuous derivatives. Width 0 is a plain step.
func switchOff(r, cutoff, width float64) (s, slope float64) {
	if r <= cutoff-width {
		return 1, 0
	}
	if r >= cutoff {
		return 0, 0
	}
	t := (cutoff - r) / width
	return t * t * t * (10 - 15*t + 6*t*t), -30 * t * t * (1 - t) * (1 - t) / width
}
