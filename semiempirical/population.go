package semiempirical

import "torsieve/internal/gauss"

// populate computes the moments that belong to a density matrix, and the
// energy of the core Hamiltonian (J. Chem. Theory Comput. 2019, 15, 1652, eqs.
// 17-19 in Mulliken's partition; the origin of an atom's moments is the atom).
func (h *hamiltonian) populate(m *moments, p []float64, g *geometry) (core float64) {
	for i, s := range h.basis.shells {
		m.shell[i] = s.Occupation
	}
	clear(m.dipole)
	clear(m.quadrupole)
	for k := range h.links {
		core += h.populateLink(m, p, &h.links[k], g)
	}
	m.sumShells()
	return core
}

// populateLink takes one link's electrons off the moments and returns the
// link's part of the core energy.
func (h *hamiltonian) populateLink(m *moments, p []float64, l *link, g *geometry) (core float64) {
	b, n := h.basis, h.basis.functions()
	fromB, toB := b.atomStart[l.b], b.atomStart[l.b+1]
	var sum [gauss.Operators]float64
	x := l.block
	for mu := b.atomStart[l.a]; mu < b.atomStart[l.a+1]; mu++ {
		var ofMu float64
		row, core0 := p[mu*n:(mu+1)*n], h.h[mu*n:(mu+1)*n]
		for nu := fromB; nu < toB; nu++ {
			y := (*[gauss.Operators]float64)(x)
			x = x[gauss.Operators:]
			d := row[nu]
			core += d * core0[nu]
			ps := d * y[0]
			ofMu += ps
			if l.a != l.b {
				m.shell[b.funcShell[nu]] -= ps
			}
			for op := 1; op < gauss.Operators; op++ {
				sum[op] += d * y[op]
			}
		}
		m.shell[b.funcShell[mu]] -= ofMu
		sum[0] += ofMu
	}
	takeOff(m, l.b, &sum)
	if l.a == l.b {
		return core
	}
	toFirst(&sum, &g.v[l.pair])
	takeOff(m, l.a, &sum)
	return 2 * core
}

// toFirst moves the origin of sums over a block from atom b to atom a.
func toFirst(sum *[gauss.Operators]float64, v *[3]float64) {
	t := [3]float64{-v[0], -v[1], -v[2]}
	ct := timesVector(&t)
	d := [3]float64{sum[1], sum[2], sum[3]}
	for m := range 5 {
		sum[4+m] += 2*dot3(&ct[m], &d) + dot3(&ct[m], &t)*sum[0]
	}
	for k := range 3 {
		sum[1+k] += t[k] * sum[0]
	}
}

// takeOff subtracts dipole and quadrupole of electrons from an atom's.
func takeOff(m *moments, a int, sum *[gauss.Operators]float64) {
	for k := range 3 {
		m.dipole[3*a+k] -= sum[1+k]
	}
	q := (*[6]float64)(m.quadrupole[6*a:])
	for c := range 5 {
		t := &gauss.QuadrupoleTensor[c]
		s := sum[4+c]
		q[0] -= s * t[0][0]
		q[1] -= s * t[0][1]
		q[2] -= s * t[1][1]
		q[3] -= s * t[0][2]
		q[4] -= s * t[1][2]
		q[5] -= s * t[2][2]
	}
}
