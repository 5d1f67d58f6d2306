package semiempirical

import "torsieve/internal/gauss"

// Formulas of this file: on atom b the operators of a link's block have their
// origin. With t the vector from a to b, those with the origin on a are
//
//	D' = D + t S,   Q' = Q + (3/2)(t D + D t + t t S), traceless,
//
// so that one block serves both atoms. C below is gauss.QuadrupoleTensor.

// A multipoleWeights says how much each operator of a link's block counts in
// -2 F: of all functions of the block alike.
type multipoleWeights [gauss.Operators]float64

// atomWeights is a potential in the components of the blocks.
type atomWeights struct {
	charge float64 // of the atom, beside that of the shells
	dipole [3]float64
	quad   [5]float64
}

// weightsOf turns each atom's potential into the components of the blocks.
func weightsOf(dst []atomWeights, v *potential) {
	for a := range dst {
		w := &dst[a]
		w.charge = v.atom[a]
		copy(w.dipole[:], v.dipole[3*a:])
		w.quad = harmonics(v.quadrupole[6*a : 6*a+6])
	}
}

// harmonics returns C_m : T of a packed tensor.
func harmonics(t []float64) [5]float64 {
	const sqrt3 = 1.7320508075688772935
	return [5]float64{sqrt3 * t[1], sqrt3 * t[4], t[5] - (t[0]+t[2])/2, sqrt3 * t[3], sqrt3 / 2 * (t[0] - t[2])}
}

// timesVector returns C_m t for all m.
func timesVector(t *[3]float64) [5][3]float64 {
	const h = 1.7320508075688772935 / 2
	return [5][3]float64{
		{h * t[1], h * t[0], 0},
		{0, h * t[2], h * t[1]},
		{-t[0] / 2, -t[1] / 2, t[2]},
		{h * t[2], 0, h * t[0]},
		{h * t[0], -h * t[1], 0},
	}
}

// set joins the weights of a link's two atoms; v is the vector from b to a.
func (w *multipoleWeights) set(a, b *atomWeights, v *[3]float64) {
	t := [3]float64{-v[0], -v[1], -v[2]}
	ct := timesVector(&t)
	w[0] = a.charge + b.charge + dot3(&a.dipole, &t)
	for k := range 3 {
		w[1+k] = a.dipole[k] + b.dipole[k]
	}
	for m := range 5 {
		w[0] += a.quad[m] * dot3(&ct[m], &t)
		for k := range 3 {
			w[1+k] += 2 * a.quad[m] * ct[m][k]
		}
		w[4+m] = a.quad[m] + b.quad[m]
	}
}

// setOnsite is set for a link of an atom with itself.
func (w *multipoleWeights) setOnsite(a *atomWeights) {
	w[0] = 2 * a.charge
	for k := range 3 {
		w[1+k] = 2 * a.dipole[k]
	}
	for m := range 5 {
		w[4+m] = 2 * a.quad[m]
	}
}

// fock writes H0 minus half of potential times integrals (J. Chem. Theory
// Comput. 2019, 15, 1652, eq. 34).
func (h *hamiltonian) fock(f []float64, v *potential, atoms []atomWeights, g *geometry) {
	n := h.basis.functions()
	copy(f, h.h)
	weightsOf(atoms, v)
	var w multipoleWeights
	for k := range h.links {
		l := &h.links[k]
		if l.a == l.b {
			w.setOnsite(&atoms[l.a])
		} else {
			w.set(&atoms[l.a], &atoms[l.b], &g.v[l.pair])
		}
		h.addLink(f, n, l, &w, v.shell)
	}
}

func (h *hamiltonian) addLink(f []float64, n int, l *link, w *multipoleWeights, shell []float64) {
	b := h.basis
	fromB, toB := b.atomStart[l.b], b.atomStart[l.b+1]
	x := l.block
	for mu := b.atomStart[l.a]; mu < b.atomStart[l.a+1]; mu++ {
		ofMu := w[0] + shell[b.funcShell[mu]]
		for nu := fromB; nu < toB; nu++ {
			y := (*[gauss.Operators]float64)(x)
			x = x[gauss.Operators:]
			e := y[0]*(ofMu+shell[b.funcShell[nu]]) +
				(y[1]*w[1] + y[2]*w[2] + y[3]*w[3]) +
				(y[4]*w[4] + y[5]*w[5] + y[6]*w[6] + y[7]*w[7] + y[8]*w[8])
			f[mu*n+nu] -= e / 2
			if l.a != l.b { // an atom's own block is whole as it is
				f[nu*n+mu] = f[mu*n+nu]
			}
		}
	}
}
