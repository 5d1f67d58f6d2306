package semiempirical

import "torsieve/internal/gauss"

// addElectronic adds to grad the part of the gradient that comes from the
// integrals, for the density p, the energy-weighted density w and the
// potential that made the last Fock matrix; what goes through the levels is
// added to dEdCN. All else being stationary, no other part depends on the
// density's response.
func (h *hamiltonian) addElectronic(grad, dEdCN, p, w []float64, atoms []atomWeights, g *geometry) {
	var weights gauss.Weights
	clear(h.byLevel)
	for k := range h.links {
		l := &h.links[k]
		if l.a == l.b {
			h.addOnsite(l.a, p)
			continue
		}
		var joint multipoleWeights
		joint.set(&atoms[l.a], &atoms[l.b], &g.v[l.pair])
		f := h.linkSlope(l, &weights, &joint, p, w, g)
		shift := h.originSlope(l, &atoms[l.a], p, &g.v[l.pair])
		for i := range f {
			f[i] += shift[i]
		}
		addPair(grad, l.a, l.b, 1, f)
	}
	for i, s := range h.basis.shells {
		dEdCN[h.basis.shellAtom[i]] -= s.CNShift * h.byLevel[i]
	}
}

// linkSlope is the derivative with respect to atom a's place of a link's
// energy, but for what comes with the moved origin of the operators.
func (h *hamiltonian) linkSlope(l *link, weights *gauss.Weights, joint *multipoleWeights, p, w []float64, g *geometry) [3]float64 {
	b := h.basis
	kb := &b.kinds[b.kind[l.b]]
	var f [3]float64
	var radial float64
	copy(weights.Operator[1:], joint[1:])
	weights.ToBond(&l.frame)
	for place, pair := range l.both.integrals {
		i, j := place/len(kb.shells), place%len(kb.shells)
		si, sj := b.atomShell[l.a]+i, b.atomShell[l.b]+j
		h0 := l.factor[place] * (h.level[si] + h.level[sj])
		v := joint[0] + h.onFunction[b.shellStart[si]] + h.onFunction[b.shellStart[sj]]
		s := h.weigh(l, weights, i, j, h0-v, p, w)
		value, slope := l.numbers(place)
		by := pair.Slope(&l.frame, value, slope, weights)
		for k := range f {
			f[k] += by[k]
		}
		radial += s * h0 * distanceSlope(b.elements[l.a], b.elements[l.b], i, j, l.frame.R)
		h.addLevels(l, place, si, sj, s)
	}
	for k := range f {
		f[k] += radial / l.frame.R * g.v[l.pair][k]
	}
	return f
}

// weigh sets the weights of a pair of shells: of the overlap, potential (which
// is H0 over S, minus the potential) times density minus twice the
// energy-weighted density w. It returns the sum of density times overlap.
func (h *hamiltonian) weigh(l *link, weights *gauss.Weights, i, j int, potential float64, p, w []float64) (sum float64) {
	b, n := h.basis, h.basis.functions()
	ka, kb := &b.kinds[b.kind[l.a]], &b.kinds[b.kind[l.b]]
	firstA, firstB := b.atomStart[l.a]+ka.first[i], b.atomStart[l.b]+kb.first[j]
	size := kb.shells[j].Size()
	for mu := range ka.shells[i].Size() {
		from := (firstA+mu)*n + firstB
		s := l.block[((ka.first[i]+mu)*kb.size+kb.first[j])*gauss.Operators:]
		to := gauss.WeightsRow * mu
		rho := w[from : from+size]
		for nu, d := range p[from : from+size] {
			weights.Overlap[(to+nu)&31] = d*potential - 2*rho[nu]
			weights.Density[(to+nu)&31] = -d
			sum += d * s[nu*gauss.Operators]
		}
	}
	return sum
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

// addLevels notes for the derivative by the levels of two shells the sum of
// density times overlap between them.
func (h *hamiltonian) addLevels(l *link, place, si, sj int, sum float64) {
	h.byLevel[si] += sum * l.factor[place]
	h.byLevel[sj] += sum * l.factor[place]
}

// addOnsite does so for the shells of one atom.
func (h *hamiltonian) addOnsite(a int, p []float64) {
	b, n := h.basis, h.basis.functions()
	size := b.atomStart[a+1] - b.atomStart[a]
	for i := range size {
		mu := b.atomStart[a] + i
		h.byLevel[b.funcShell[mu]] += p[mu*n+mu] * h.s[mu*n+mu]
	}
}
