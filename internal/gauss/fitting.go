package gauss

import (
	"math"
	"slices"
	"unsafe"

	"torsieve/internal/linalg"
)

// Fitting computes the integrals of density fitting for a fixed set of orbital
// and auxiliary shells, for one geometry after another: (ab|C) = integral of
// a(1)b(1) C(2) / r12, and the metric (A|C). It owns scratch memory and serves one
// goroutine at a time.
//
// Auxiliary functions have an order of its own, the same in all that it returns;
// nothing that is fitted depends on it. A block belongs to a pair of orbital
// shells: the charge cloud as a matrix over Hermite Gaussians of all its
// primitives (row a pair of functions), times the potential between those and
// the auxiliary functions.
//
// Source: L. E. McMurchie, E. R. Davidson, J. Comput. Phys. 1978, 26, 218; as a
// product of matrices: F. Neese, J. Comput. Chem. 2023, 44, 381.
type Fitting struct {
	rep *Repulsion // for its pairs and their bounds
	aux *auxiliarySet
	x   []float64

	lanes      laneKernel
	maker      hermiteMaker
	e, cloud   []float64 // charge cloud of one pair: one primitive; all
	potential  []float64 // rows: Hermite Gaussians of all primitives
	g, d, r, s []float64
	out        []float64
	terms      []rowTerm
	counts     []int
	work       linalg.Workspace
}

// NewFitting returns an engine. The shells are kept, not copied.
func NewFitting(orbital, auxiliary []Shell) *Fitting {
	return &Fitting{rep: NewRepulsion(orbital), aux: newAuxiliarySet(auxiliary), lanes: activeLanes()}
}

// PairBytes is what an engine holds of the pairs of shells, at most.
func PairBytes(shells []Shell) int64 {
	primitives := 0
	for i := range shells {
		primitives += len(shells[i].Exps)
	}
	n, m := int64(len(shells)), int64(primitives)
	return (n*(n+1)*int64(unsafe.Sizeof(shellPair{})) + m*(m+1)*int64(unsafe.Sizeof(primitive{}))) / 2
}

// Place takes the atoms to x (3N, bohr). Pairs of shells are left out from then
// on where the Schwarz bound shows that all their repulsion integrals are below
// threshold (hartree).
func (f *Fitting) Place(x []float64, threshold float64) {
	r := f.rep
	f.x = append(f.x[:0], x...)
	r.threshold = threshold
	r.makePairs(x)
	r.batch.cut, r.quartet.cut = 0, 0
	largest := 0.0
	for k := range r.pairs {
		p := &r.pairs[k]
		if p.class == classAny {
			f.e = grow(f.e, len(p.prims)*p.nf*p.nh)
			f.expand(f.e, p)
			p.e = f.e
		}
		p.bound = r.schwarz(p)
		p.e = nil
		largest = max(largest, p.bound)
	}
	r.pairs = slices.DeleteFunc(r.pairs, func(p shellPair) bool { return p.bound*largest < threshold })
	f.aux.place(x)
}

// expand writes the Hermite matrices of all primitives of a pair, one after
// the other.
func (f *Fitting) expand(dst []float64, p *shellPair) {
	one := p.nf * p.nh
	for m := range p.prims {
		f.maker.expand(dst[m*one:], &f.rep.shells[p.i], &f.rep.shells[p.j], p.ab, &p.prims[m])
	}
}

// Functions returns the number of auxiliary functions.
func (f *Fitting) Functions() int { return f.aux.n }

// Order returns the places of the functions of each auxiliary shell.
func (f *Fitting) Order() [][]int { return f.aux.functions() }

// Pairs returns the number of pairs of shells that count.
func (f *Fitting) Pairs() int { return len(f.rep.pairs) }

// Pair returns the two shells of a pair, the first of which has the higher
// angular momentum.
func (f *Fitting) Pair(k int) (i, j int) { return f.rep.pairs[k].i, f.rep.pairs[k].j }

// Size returns the number of pairs of functions of pair k.
func (f *Fitting) Size(k int) int { return f.rep.pairs[k].nf }

// Integrals writes the block of pair k into dst: a row for each pair of
// functions, the second shell's fastest, ld numbers apart.
func (f *Fitting) Integrals(dst []float64, ld, k int) {
	p := &f.rep.pairs[k]
	n := 0 // primitives that count
	for n < len(p.prims) && math.Abs(p.prims[n].c) >= f.rep.threshold*fittingShare {
		n++
	}
	f.block(dst, ld, p, n)
}

// fittingShare times the threshold is the weight under which a product of
// primitives is left out.
const fittingShare = 1e-4

// block is Integrals for the first n primitives of a pair whose shells are
// f.rep.shells.
func (f *Fitting) block(dst []float64, ld int, p *shellPair, n int) {
	f.e = grow(f.e, len(p.prims)*p.nf*p.nh)
	f.expand(f.e, p)
	f.blockOf(dst, ld, p, n)
}

// blockOf takes the Hermite matrices from f.e.
func (f *Fitting) blockOf(dst []float64, ld int, p *shellPair, n int) {
	f.cloud = grow(f.cloud, p.nf*n*p.nh)
	for m := range n {
		for i := range p.nf {
			copy(f.cloud[(i*n+m)*p.nh:][:p.nh], f.e[(m*p.nf+i)*p.nh:])
		}
	}
	l := degree(p.nh)
	for c := range f.aux.chunks {
		ch := &f.aux.chunks[c]
		columns := (2*ch.l + 1) * ch.stride
		f.potential = grow(f.potential, n*p.nh*columns)
		for m := range n {
			f.potentials(f.potential[m*p.nh*columns:][:p.nh*columns], &p.prims[m], ch, l)
		}
		f.out = grow(f.out, p.nf*columns)
		f.contract(p.nf, n*p.nh, columns)
		ch.collect(dst, ld, f.out, p.nf)
	}
}

// contract forms f.out = cloud potential; few rows are not worth a packed
// product.
func (f *Fitting) contract(rows, inner, columns int) {
	if inner == 0 {
		clear(f.out[:rows*columns])
		return
	}
	if rows >= 5 {
		f.work.Gemm(false, false, rows, columns, inner, 1, f.cloud, inner, f.potential, columns, 0, f.out, columns)
		return
	}
	f.terms, f.counts = f.terms[:0], f.counts[:0]
	for i := range rows {
		before := len(f.terms)
		for k, c := range f.cloud[i*inner:][:inner] {
			if c != 0 || k == 0 {
				f.terms = append(f.terms, rowTerm{k, c})
			}
		}
		f.counts = append(f.counts, len(f.terms)-before)
	}
	f.lanes.combine(f.out, f.potential, f.terms, f.counts, columns)
}

// potentials fills rows t, each of 2l+1 times stride numbers, with the
// derivative t, up to the given degree, of the potentials of the chunk's
// harmonics at the primitive p.
func (f *Fitting) potentials(dst []float64, p *primitive, ch *auxiliaryChunk, degree int) {
	top, n := degree+ch.l, ch.stride
	f.g, f.d = grow(f.g, (top+1)*n), grow(f.d, 3*n)
	f.r, f.s = grow(f.r, hermiteCount(top)*n), grow(f.s, hermiteCount(top)*n)
	laneBoys(f.g, f.d, p, ch, top)
	cur, next := f.r, f.s
	copy(cur, f.g[top*n:][:n])
	for m := top - 1; m >= 0; m-- {
		copy(next, f.g[m*n:][:n])
		f.lanes.raise(next[n:], cur, f.d, hermiteSteps()[1:hermiteCount(top-m)], n)
		cur, next = next, cur
	}
	h := laneHarmonics(degree, ch.l)
	f.lanes.combine(dst, cur, h.terms, h.counts, n)
}

// collect adds the lanes of each shell up and writes them where its functions
// stand.
func (ch *auxiliaryChunk) collect(dst []float64, ld int, out []float64, rows int) {
	shells, components := len(ch.shells), 2*ch.l+1
	for i := range rows {
		for m := range components {
			from := out[(i*components+m)*ch.stride:][:ch.stride]
			to := dst[i*ld+ch.first+m*shells:][:shells]
			if ch.plain {
				copy(to, from)
				continue
			}
			for s := range to {
				v := 0.0
				for _, w := range from[ch.begin[s]:ch.begin[s+1]] {
					v += w
				}
				to[s] = v
			}
		}
	}
}
