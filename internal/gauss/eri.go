package gauss

import (
	"math"
	"sort"
)

// Repulsion computes the electron repulsion integrals (ab|cd) = integral of
// a(1)b(1) c(2)d(2) / r12 of a fixed set of shells, for one geometry after
// another. It owns scratch memory and serves one goroutine at a time.
//
// Integrals come in blocks. A block belongs to one pair of shells, the bra; its
// rows are the pairs of functions of all kets that are not after the bra in a
// fixed order of pairs and whose Schwarz bound times the bra's passes the
// threshold, and its columns the bra's pairs of functions. So each integral
// comes once. It carries a factor 1/2 for a = b, for c = d, and for the bra being the
// ket: what a Coulomb and an exchange sum over all permutations asks for.
//
// Source of the bound: M. Haser, R. Ahlrichs, J. Comput. Chem. 1989, 10, 104,
// doi:10.1002/jcc.540100111.
type Repulsion struct {
	shells  []Shell
	offsets []int
	general bool // some shell is d or higher

	threshold     float64 // hartree
	pairs         []shellPair
	prims         []primitive
	expansion     []float64
	begin         [classes + 1]int
	first, second []int32

	maker hermiteMaker
	quartet
	batch batch
}

// NewRepulsion returns an engine for the shells. They are kept, not copied.
func NewRepulsion(shells []Shell) *Repulsion {
	r := &Repulsion{shells: shells, offsets: Offsets(shells)}
	r.batch.kernel = activePotentials()
	total, squares := 0, 0
	for i := range shells {
		n := len(shells[i].Exps)
		r.general = r.general || shells[i].L > 1
		total, squares = total+n, squares+n*n
	}
	r.prims = make([]primitive, 0, (total*total+squares)/2) // never moves: pairs keep slices of it
	return r
}

// Place takes the atoms to x (3N, bohr). Integrals that the Schwarz bound shows
// to be below threshold (hartree) are left out from then on.
func (r *Repulsion) Place(x []float64, threshold float64) {
	r.threshold = threshold
	r.makePairs(x)
	r.expandPairs()
	r.batch.cut, r.quartet.cut = 0, 0 // bounds are square roots: nothing in them is too small
	r.bounds()
	r.batch.cut, r.quartet.cut = primitiveShare*threshold, primitiveShare*threshold
	r.sortPairs()
}

// primitiveShare times the threshold is the size under which one product of
// primitives is left out of an integral.
const primitiveShare = 1e-2

// Pairs returns the number of bras.
func (r *Repulsion) Pairs() int { return len(r.pairs) }

// Functions returns the two functions of each pair of functions, in the order
// in which blocks number them. The slices change with Place.
func (r *Repulsion) Functions() (first, second []int32) { return r.first, r.second }

// Columns returns the pairs of functions of a bra: from begin up to end.
func (r *Repulsion) Columns(bra int) (begin, end int) {
	p := &r.pairs[bra]
	return p.first, p.first + p.unique
}

// A Span is a range of pairs of functions, End not included.
type Span struct{ Begin, End int }

// Rows appends the ranges of ket functions of a bra's block to dst, which it
// returns with their number. Ket pairs inside a range are ordered by falling
// bound.
func (r *Repulsion) Rows(dst []Span, bra int) ([]Span, int) {
	n := 0
	for c := range r.pairs[bra].class + 1 {
		if lo, hi := r.kets(bra, c); hi > lo {
			s := Span{r.pairs[lo].first, r.pairs[hi-1].first + r.pairs[hi-1].unique}
			n += s.End - s.Begin
			dst = append(dst, s)
		}
	}
	return dst, n
}

// kets returns the range of kets of one class.
func (r *Repulsion) kets(bra int, c pairClass) (lo, hi int) {
	lo, hi = r.begin[c], min(r.begin[c+1], bra+1)
	if hi <= lo {
		return lo, lo
	}
	b := r.pairs[bra].bound
	n := sort.Search(hi-lo, func(k int) bool { return r.pairs[lo+k].bound*b < r.threshold })
	return lo, lo + n
}

// Bound returns the Schwarz bound of a pair and its two shells.
func (r *Repulsion) Bound(pair int) (bound float64, i, j int) {
	p := &r.pairs[pair]
	return p.bound, p.i, p.j
}

// Block writes the integrals of one bra, row by row, into dst, whose length is
// rows times columns. Where skip is not nil, kets for which it returns true are
// left at zero.
func (r *Repulsion) Block(dst []float64, bra int, skip func(ket int) bool) {
	p := &r.pairs[bra]
	var buffer [classes]Span
	_, rows := r.Rows(buffer[:0], bra)
	if len(dst) != rows*p.unique {
		panic("gauss: Block: slice of the wrong length")
	}
	if skip != nil {
		clear(dst)
	}
	for c := range p.class + 1 {
		lo, hi := r.kets(bra, c)
		if hi == lo {
			continue
		}
		if c == classAny {
			base := r.pairs[lo].first
			for k := lo; k < hi; k++ {
				if skip == nil || !skip(k) {
					ket := &r.pairs[k]
					r.scatter(dst[(ket.first-base)*p.unique:], p, ket, r.quartet.integrals(p, ket))
				}
			}
		} else {
			r.batches(dst, bra, lo, hi, skip)
		}
		dst = dst[(r.pairs[hi-1].first+r.pairs[hi-1].unique-r.pairs[lo].first)*p.unique:]
	}
}

// scatter writes one quartet, given as nf_bra by nf_ket, as rows of a block,
// each unique pair once and with its factor.
func (r *Repulsion) scatter(dst []float64, bra, ket *shellPair, v []float64) {
	if bra.i != bra.j && ket.i != ket.j && bra != ket {
		n, m := bra.nf, ket.nf
		v = v[:n*m]
		for row := range m {
			out := dst[row*n:][:n]
			for col := range out {
				out[col] = v[col*m+row]
			}
		}
		return
	}
	nb, nd := r.shells[bra.j].Size(), r.shells[ket.j].Size()
	row := 0
	for c := range r.shells[ket.i].Size() {
		for d := range nd {
			if ket.i == ket.j && d > c {
				break
			}
			col := 0
			for a := range r.shells[bra.i].Size() {
				for b := range nb {
					if bra.i == bra.j && b > a {
						break
					}
					f := share(bra, ket, a == b, c == d)
					dst[row*bra.unique+col] = f * v[(a*nb+b)*ket.nf+c*nd+d]
					col++
				}
			}
			row++
		}
	}
}

// share is the factor that an integral (ab|cd) carries.
func share(bra, ket *shellPair, ab, cd bool) float64 {
	f := 1.0
	if bra == ket {
		f *= 0.5
	}
	if bra.i == bra.j && ab {
		f *= 0.5
	}
	if ket.i == ket.j && cd {
		f *= 0.5
	}
	return f
}

// bounds computes the Schwarz bound of every pair.
func (r *Repulsion) bounds() {
	for k := range r.pairs {
		r.pairs[k].bound = r.schwarz(&r.pairs[k])
	}
}

// schwarz computes the bound of one pair.
func (r *Repulsion) schwarz(p *shellPair) float64 {
	v := r.one(p, p)
	largest := 0.0
	for f := range p.nf {
		largest = max(largest, v[f*p.nf+f])
	}
	return math.Sqrt(largest)
}

// one returns the integrals of one quartet, nf_bra by nf_ket, without any
// factors. The slice is good until the next call.
func (r *Repulsion) one(bra, ket *shellPair) []float64 {
	if bra.class < ket.class {
		panic("gauss: bra and ket in the wrong order")
	}
	if ket.class == classAny {
		return r.quartet.integrals(bra, ket)
	}
	return r.batch.single(bra, ket)
}

// Threshold returns what Place was given, hartree.
func (r *Repulsion) Threshold() float64 { return r.threshold }

// Shell returns shell number i.
func (r *Repulsion) Shell(i int) *Shell { return &r.shells[i] }
