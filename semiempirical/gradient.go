package semiempirical

import "torsieve/internal/gauss"

// addElectronic adds to grad the part of the gradient that comes from the
// integrals, for the density p, the energy-weighted density w and the
// potential that made the last Fock matrix; what goes through the levels is
// added to dEdCN. All else being stationary, no other part depends on the
// density's response.
func (h *hamiltonian) addElectronic(grad, dEdCN, p, w []float64, shell []float64, atoms []atomWeights, g *geometry) {
	var weights gauss.Weights
	for k := range h.links {
		l := &h.links[k]
		h.addLevels(l, p, dEdCN)
		if l.a == l.b {
			continue
		}
		var joint multipoleWeights
		joint.set(&atoms[l.a], &atoms[l.b], &g.v[l.pair])
		f := h.linkSlope(l, &weights, &joint, p, w, shell, g)
		shift := h.originSlope(l, &atoms[l.a], p, &g.v[l.pair])
		for i := range f {
			f[i] += shift[i]
		}
		addPair(grad, l.a, l.b, 1, f)
	}
}

// linkSlope is the derivative with respect to atom a's place of a link's
// energy, but for what comes with the moved origin of the operators.
func (h *hamiltonian) linkSlope(l *link, weights *gauss.Weights, joint *multipoleWeights, p, w, shell []float64, g *geometry) [3]float64 {
	b, n := h.basis, h.basis.functions()
	ka, kb := &b.kinds[b.kind[l.a]], &b.kinds[b.kind[l.b]]
	both := ka.with[b.kind[l.b]]
	frame := gauss.NewFrame(g.v[l.pair])
	var f [3]float64
	var radial float64
	for i := range ka.shells {
		si := b.atomShell[l.a] + i
		for j := range kb.shells {
			sj := b.atomShell[l.b] + j
			place := i*len(kb.shells) + j
			h0 := l.scale[place] * (h.level[si] + h.level[sj])
			v := joint[0] + shell[si] + shell[sj]
			var core float64
			for mu := range ka.shells[i].Size() {
				row := (b.shellStart[si]+mu)*n + b.shellStart[sj]
				s := l.block[((ka.first[i]+mu)*kb.size+kb.first[j])*gauss.Operators:]
				for nu := range kb.shells[j].Size() {
					d := p[row+nu]
					weights.Overlap[mu][nu] = d*(h0-v) - 2*w[row+nu]
					weights.Density[mu][nu] = -d
					core += d * s[nu*gauss.Operators]
				}
			}
			copy(weights.Operator[1:], joint[1:])
			slope := both.integrals[place].Slope(&h.work, &frame, weights)
			for k := range f {
				f[k] += slope[k]
			}
			radial += core * h0 * distanceSlope(ka.element, kb.element, i, j, frame.R)
		}
	}
	for k := range f {
		f[k] += radial / frame.R * g.v[l.pair][k]
	}
	return f
}

// originSlope is the derivative through the vector t from a to b, by which the
// operators of a are moved (fock.go).
func (h *hamiltonian) originSlope(l *link, a *atomWeights, p []float64, v *[3]float64) [3]float64 {
	b, n := h.basis, h.basis.functions()
	var s float64
	var d [3]float64
	x := l.block
	for mu := b.atomStart[l.a]; mu < b.atomStart[l.a+1]; mu++ {
		for nu := b.atomStart[l.b]; nu < b.atomStart[l.b+1]; nu++ {
			e := p[mu*n+nu]
			s += e * x[0]
			d[0] += e * x[1]
			d[1] += e * x[2]
			d[2] += e * x[3]
			x = x[gauss.Operators:]
		}
	}
	f := [3]float64{a.dipole[0] * s, a.dipole[1] * s, a.dipole[2] * s}
	for k := range d {
		d[k] = 2 * (d[k] - v[k]*s)
	}
	cd := timesVector(&d)
	for m, u := range a.quad {
		for k := range f {
			f[k] += u * cd[m][k]
		}
	}
	return f
}

// addLevels adds the derivative of a link's core energy by the levels, times
// their fall with the coordination number.
func (h *hamiltonian) addLevels(l *link, p, dEdCN []float64) {
	b, n := h.basis, h.basis.functions()
	ka, kb := &b.kinds[b.kind[l.a]], &b.kinds[b.kind[l.b]]
	for i := range ka.shells {
		si := b.atomShell[l.a] + i
		for j := range kb.shells {
			sj := b.atomShell[l.b] + j
			var sum float64
			for mu := range ka.shells[i].Size() {
				row := (b.shellStart[si]+mu)*n + b.shellStart[sj]
				s := l.block[((ka.first[i]+mu)*kb.size+kb.first[j])*gauss.Operators:]
				for nu := range kb.shells[j].Size() {
					sum += p[row+nu] * s[nu*gauss.Operators]
				}
			}
			sum *= l.scale[i*len(kb.shells)+j]
			if l.a == l.b {
				sum /= 2
			}
			dEdCN[l.a] -= b.shells[si].CNShift * sum
			dEdCN[l.b] -= b.shells[sj].CNShift * sum
		}
	}
}
