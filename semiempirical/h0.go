package semiempirical

import (
	"math"

	"torsieve/internal/gauss"
)

// A hamiltonian holds the one-electron integrals of a geometry and the core
// Hamiltonian made of them (J. Chem. Theory Comput. 2019, 15, 1652, eqs. 10-15).
type hamiltonian struct {
	basis *basis
	cn    *coordination
	level []float64 // of each shell, hartree
	links []link    // pairs of atoms that overlap, and each atom with itself
	data  []float64 // integrals of all links
	s, h  []float64 // overlap and core Hamiltonian, functions x functions

	onFunction []float64 // potential of each function in the last Fock matrix
	byLevel    []float64 // derivative of the core energy by each shell's level
	work       gauss.Scratch
}

// A link is two atoms a >= b whose functions overlap.
type link struct {
	a, b   int
	pair   int // place in the geometry; -1 where a is b
	both   *diatomicKind
	frame  gauss.Frame
	value  []float64 // integrals in the bond's frame, of all pairs of shells
	slope  []float64 // their derivatives by the distance, if wanted
	block  []float64 // integrals in the molecule's axes
	factor []float64 // of H0: the factor of the overlap, for each pair of shells
}

// Factors of H0 by angular momenta.
var h0Shells = [3][3]float64{
	{1.85, 2.04, 2.0},
	{2.04, 2.23, 2.0},
	{2.0, 2.0, 2.23},
}

// h0Factor is the part of H0's factor between shells i and j of two elements
// that depends neither on the distance nor on the levels (eq. 12-13).
func h0Factor(a, b *element, i, j int) float64 {
	si, sj := &a.Shells[i], &b.Shells[j]
	en := a.Electronegativity - b.Electronegativity
	ratio := 2 * math.Sqrt(si.Zeta*sj.Zeta) / (si.Zeta + sj.Zeta)
	return h0Shells[si.L][sj.L] * math.Sqrt(ratio) * (1 + 0.02*en*en)
}

// polynomial is the factor of H0 that depends on the distance, for one shell,
// and its derivative by u = sqrt(R/(Ra+Rb)), over the factor (eq. 14).
func polynomial(k, u float64) (f, slope float64) {
	f = 1 + k*u
	return f, k / f
}

func newHamiltonian(b *basis, cn *coordination) *hamiltonian {
	n := b.functions()
	return &hamiltonian{basis: b, cn: cn, level: make([]float64, len(b.shells)), s: make([]float64, n*n), h: make([]float64, n*n), onFunction: make([]float64, n), byLevel: make([]float64, len(b.shells))}
}

// update computes everything at a new geometry; slopes says whether a gradient
// will be wanted.
func (h *hamiltonian) update(g *geometry, slopes bool) {
	for i, s := range h.basis.shells {
		h.level[i] = s.Level - s.CNShift*h.cn.numbers[h.basis.shellAtom[i]]
	}
	h.findLinks(g)
	clear(h.s)
	clear(h.h)
	for k := range h.links {
		l := &h.links[k]
		if l.a != l.b {
			h.integrate(l, g, slopes)
		}
		h.fill(l, g)
	}
}

// findLinks lists the pairs of atoms within reach and gives them memory.
func (h *hamiltonian) findLinks(g *geometry) {
	b := h.basis
	h.links = h.links[:0]
	k := 0
	for a := range b.atoms() {
		ka := &b.kinds[b.kind[a]]
		for other := range a {
			if both := ka.with[b.kind[other]]; g.r[k] < both.reach {
				h.links = append(h.links, link{a: a, b: other, pair: k, both: both})
			}
			k++
		}
		h.links = append(h.links, link{a: a, b: a, pair: -1, both: ka.with[b.kind[a]], block: ka.onsite})
	}
	h.allot()
}

// allot divides the memory among the links.
func (h *hamiltonian) allot() {
	total := 0
	for k := range h.links {
		total += h.blockSize(&h.links[k]) + 2*h.links[k].both.size() + len(h.links[k].both.h0)
	}
	if cap(h.data) < total {
		h.data = make([]float64, total+total/8)
	}
	free := h.data[:cap(h.data)]
	take := func(n int) []float64 {
		var x []float64
		x, free = free[:n:n], free[n:]
		return x
	}
	for k := range h.links {
		l := &h.links[k]
		l.factor = take(len(l.both.h0))
		if l.a != l.b {
			l.block = take(h.blockSize(l))
			l.value, l.slope = take(l.both.size()), take(l.both.size())
		}
	}
}

func (h *hamiltonian) blockSize(l *link) int {
	b := h.basis
	return b.kinds[b.kind[l.a]].size * b.kinds[b.kind[l.b]].size * gauss.Operators
}

// integrate fills a link's block.
func (h *hamiltonian) integrate(l *link, g *geometry, slopes bool) {
	ka, kb := &h.basis.kinds[h.basis.kind[l.a]], &h.basis.kinds[h.basis.kind[l.b]]
	l.frame = gauss.NewFrame(g.v[l.pair])
	stride := kb.size * gauss.Operators
	for place, pair := range l.both.integrals {
		value, slope := l.numbers(place)
		if !slopes {
			slope = nil
		}
		pair.Integrals(&h.work, l.frame.R, value, slope)
		i, j := place/len(kb.shells), place%len(kb.shells)
		pair.Block(&h.work, &l.frame, value, l.block[ka.first[i]*stride+kb.first[j]*gauss.Operators:], stride)
	}
}

// numbers returns a pair of shells' share of value and slope.
func (l *link) numbers(place int) (value, slope []float64) {
	from, to := l.both.first[place], l.both.first[place+1]
	return l.value[from:to], l.slope[from:to]
}

// fill enters a link into overlap and core Hamiltonian.
func (h *hamiltonian) fill(l *link, g *geometry) {
	b, n := h.basis, h.basis.functions()
	ka, kb := &b.kinds[b.kind[l.a]], &b.kinds[b.kind[l.b]]
	firstA, firstB := b.atomShell[l.a], b.atomShell[l.b]
	for i := range ka.shells {
		for j := range kb.shells {
			scale := 1.0
			if l.a != l.b {
				scale = l.both.h0[i*len(kb.shells)+j] * distanceFactor(ka.element, kb.element, i, j, g.r[l.pair])
			}
			l.factor[i*len(kb.shells)+j] = scale
			scale *= (h.level[firstA+i] + h.level[firstB+j]) / 2
			for mu := b.shellStart[firstA+i]; mu < b.shellStart[firstA+i+1]; mu++ {
				row := l.block[(mu-b.atomStart[l.a])*kb.size*gauss.Operators:]
				for nu := b.shellStart[firstB+j]; nu < b.shellStart[firstB+j+1]; nu++ {
					s := row[(nu-b.atomStart[l.b])*gauss.Operators]
					h.s[mu*n+nu], h.s[nu*n+mu] = s, s
					h.h[mu*n+nu], h.h[nu*n+mu] = scale*s, scale*s
				}
			}
		}
	}
}

func distanceFactor(a, b *element, i, j int, r float64) float64 {
	u := math.Sqrt(r / (a.AtomicRadius + b.AtomicRadius))
	fi, _ := polynomial(a.Shells[i].Polynomial, u)
	fj, _ := polynomial(b.Shells[j].Polynomial, u)
	return fi * fj
}

// distanceSlope is the derivative of the logarithm of distanceFactor.
func distanceSlope(a, b *element, i, j int, r float64) float64 {
	u := math.Sqrt(r / (a.AtomicRadius + b.AtomicRadius))
	_, di := polynomial(a.Shells[i].Polynomial, u)
	_, dj := polynomial(b.Shells[j].Polynomial, u)
	return (di + dj) * u / (2 * r)
}
