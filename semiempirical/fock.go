package semiempirical

import "torsieve/internal/gauss"

// Formulas of this file: on atom b the operators of a link's block have their
// origin. With t the vector from a to b, those with the origin on a are
//
//	D' = D + t S,   Q' = Q + (3/2)(t D + D t + t t S), traceless,
//
// so that one block serves both atoms. C below is gauss.QuadrupoleTensor.

const sqrt3 = 1.7320508075688772935

// A multipoleWeights says how much each operator of a link's block counts in
// -2 F; the overlap counts by the potentials of the two functions beside.
type multipoleWeights [gauss.Operators]float64

// atomWeights is a potential in the components of the blocks.
type atomWeights struct {
	dipole [3]float64
	quad   [5]float64
}

// weightsOf turns each atom's potential into the components of the blocks.
func weightsOf(dst []atomWeights, v *potential) {
	for a := range dst {
		w := &dst[a]
		copy(w.dipole[:], v.dipole[3*a:])
		w.quad = harmonics(v.quadrupole[6*a : 6*a+6])
	}
}

// harmonics returns C_m : T of a packed tensor.
func harmonics(t []float64) [5]float64 {
	return [5]float64{sqrt3 * t[1], sqrt3 * t[4], t[5] - (t[0]+t[2])/2, sqrt3 * t[3], sqrt3 / 2 * (t[0] - t[2])}
}

// timesVector returns C_m t for all m.
func timesVector(t *[3]float64) [5][3]float64 {
	const h = sqrt3 / 2
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
	w[0] = dot3(&a.dipole, &t)
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
	w[0] = 0
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
	weightsOf(atoms, v)
	for mu, i := range h.basis.funcShell {
		h.onFunction[mu] = v.shell[i] + v.atom[h.basis.shellAtom[i]]
	}
	copy(f, h.h)
	var w multipoleWeights
	for k := range h.links {
		l := &h.links[k]
		if l.a == l.b {
			w.setOnsite(&atoms[l.a])
		} else {
			w.set(&atoms[l.a], &atoms[l.b], &g.v[l.pair])
		}
		h.addLink(f, l, &w)
	}
	for mu := range n {
		for nu := range mu {
			f[nu*n+mu] = f[mu*n+nu]
		}
	}
}

// addLink enters a link into the Fock matrix, below the diagonal.
func (h *hamiltonian) addLink(f []float64, l *link, w *multipoleWeights) {
	b, n := h.basis, h.basis.functions()
	fromB, toB := b.atomStart[l.b], b.atomStart[l.b+1]
	w0, w1, w2, w3, w4, w5, w6, w7, w8 := w[0], w[1], w[2], w[3], w[4], w[5], w[6], w[7], w[8]
	x := l.block
	for mu := b.atomStart[l.a]; mu < b.atomStart[l.a+1]; mu++ {
		ofMu := w0 + h.onFunction[mu]
		ofNu := h.onFunction[fromB:toB]
		row := f[mu*n+fromB : mu*n+toB]
		row = row[:len(ofNu)]
		for nu, v := range ofNu {
			y := (*[gauss.Operators]float64)(x)
			x = x[gauss.Operators:]
			row[nu] -= 0.5 * ((y[0]*(ofMu+v) + y[1]*w1 + y[2]*w2 + y[3]*w3) +
				(y[4]*w4 + y[5]*w5 + y[6]*w6 + y[7]*w7 + y[8]*w8))
		}
	}
}
