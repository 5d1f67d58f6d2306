package semiempirical

import (
	"gonum.org/v1/gonum/blas/gonum"

	"torsieve/internal/gauss"
)

// populate computes the moments that belong to a density matrix, and the
// energy of the core Hamiltonian (J. Chem. Theory Comput. 2019, 15, 1652, eqs.
// 17-19 in Mulliken's partition; the origin of an atom's moments is the atom).
func (h *hamiltonian) populate(m *moments, p []float64, g *geometry) (core float64) {
	n := h.basis.functions()
	var lin gonum.Implementation
	for i, s := range h.basis.shells {
		m.shell[i] = s.Occupation
	}
	for mu, i := range h.basis.funcShell {
		m.shell[i] -= lin.Ddot(n, p[mu*n:], 1, h.s[mu*n:], 1)
	}
	clear(m.dipole)
	clear(m.quadrupole)
	for k := range h.links {
		l := &h.links[k]
		sum := h.linkSums(p, l)
		takeOff(m, l.b, &sum)
		if l.a != l.b {
			toFirst(&sum, &g.v[l.pair])
			takeOff(m, l.a, &sum)
		}
	}
	m.sumShells()
	return lin.Ddot(n*n, p, 1, h.h, 1)
}

// linkSums sums density times integral over a link's block, for each operator.
func (h *hamiltonian) linkSums(p []float64, l *link) [gauss.Operators]float64 {
	b, n := h.basis, h.basis.functions()
	fromB, toB := b.atomStart[l.b], b.atomStart[l.b+1]
	var s0, s1, s2, s3, s4, s5, s6, s7, s8 float64
	x := l.block
	for mu := b.atomStart[l.a]; mu < b.atomStart[l.a+1]; mu++ {
		for _, d := range p[mu*n+fromB : mu*n+toB] {
			y := (*[gauss.Operators]float64)(x)
			x = x[gauss.Operators:]
			s0 += d * y[0]
			s1 += d * y[1]
			s2 += d * y[2]
			s3 += d * y[3]
			s4 += d * y[4]
			s5 += d * y[5]
			s6 += d * y[6]
			s7 += d * y[7]
			s8 += d * y[8]
		}
	}
	return [gauss.Operators]float64{s0, s1, s2, s3, s4, s5, s6, s7, s8}
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
	d := (*[3]float64)(m.dipole[3*a:])
	d[0] -= sum[1]
	d[1] -= sum[2]
	d[2] -= sum[3]
	const h = sqrt3 / 2 // sum_m t_m C_m
	q := (*[6]float64)(m.quadrupole[6*a:])
	q[0] += sum[6]/2 - h*sum[8]
	q[1] -= h * sum[4]
	q[2] += sum[6]/2 + h*sum[8]
	q[3] -= h * sum[7]
	q[4] -= h * sum[5]
	q[5] -= sum[6]
}
