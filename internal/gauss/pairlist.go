package gauss

import (
	"cmp"
	"math"
	"slices"
)

// pairClass sorts pairs of shells by the code that integrates them.
type pairClass int

const (
	classSS pairClass = iota
	classPS
	classPP
	classAny // a d or higher shell is in it
	classes
)

// A shellPair is one electron's charge cloud: two shells, the higher angular
// momentum first.
type shellPair struct {
	i, j   int // shells
	class  pairClass
	ab     [3]float64 // centre of i minus centre of j, bohr
	prims  []primitive
	nf     int       // functions of i times functions of j
	nh     int       // Hermite Gaussians up to degree l_i + l_j
	e      []float64 // len(prims) matrices of nf by nh; nil where not needed
	bound  float64   // Schwarz: |(ij|kl)| <= bound_ij bound_kl
	first  int       // number of its first pair of functions
	unique int       // pairs of functions, each counted once
}

// classify says which code integrates a pair of shells.
func classify(a, b *Shell) pairClass {
	if a.L > 1 {
		return classAny
	}
	return pairClass(a.L + b.L)
}

// makePairs builds all pairs whose charge clouds are not nothing.
func (r *Repulsion) makePairs(x []float64) {
	r.pairs = r.pairs[:0]
	r.prims = r.prims[:0]
	for i := range r.shells {
		for j := range i + 1 {
			p := shellPair{i: i, j: j}
			if r.shells[i].L < r.shells[j].L {
				p.i, p.j = j, i
			}
			a, b := &r.shells[p.i], &r.shells[p.j]
			begin := len(r.prims)
			r.prims = appendPrimitives(r.prims, a, b, x)
			if p.prims = r.prims[begin:]; len(p.prims) == 0 {
				continue
			}
			slices.SortStableFunc(p.prims, func(a, b primitive) int {
				return cmp.Compare(math.Abs(b.c), math.Abs(a.c))
			})
			for k := range p.ab {
				p.ab[k] = x[3*a.Atom+k] - x[3*b.Atom+k]
			}
			p.class, p.nf, p.nh = classify(a, b), a.Size()*b.Size(), hermiteCount(a.L+b.L)
			p.unique = p.nf
			if i == j {
				p.unique = a.Size() * (a.Size() + 1) / 2
			}
			r.pairs = append(r.pairs, p)
		}
	}
}

// expandPairs makes the Hermite matrices where a general class may ask for
// them: if there is any d shell, of every pair.
func (r *Repulsion) expandPairs() {
	if !r.general {
		return
	}
	size := 0
	for k := range r.pairs {
		size += len(r.pairs[k].prims) * r.pairs[k].nf * r.pairs[k].nh
	}
	r.expansion = grow(r.expansion, size)
	rest := r.expansion
	for k := range r.pairs {
		p := &r.pairs[k]
		one := p.nf * p.nh
		p.e, rest = rest[:len(p.prims)*one], rest[len(p.prims)*one:]
		for m := range p.prims {
			r.maker.expand(p.e[m*one:], &r.shells[p.i], &r.shells[p.j], p.ab, &p.prims[m])
		}
	}
}

// sortPairs drops what no integral above the threshold needs, brings the rest
// into the order of classes and falling bounds, and numbers their functions.
func (r *Repulsion) sortPairs() {
	largest := 0.0
	for k := range r.pairs {
		largest = max(largest, r.pairs[k].bound)
	}
	r.pairs = slices.DeleteFunc(r.pairs, func(p shellPair) bool {
		return p.bound*largest < r.threshold
	})
	slices.SortStableFunc(r.pairs, func(a, b shellPair) int {
		return cmp.Or(cmp.Compare(a.class, b.class), cmp.Compare(b.bound, a.bound))
	})
	r.begin = [classes + 1]int{}
	r.first, r.second = r.first[:0], r.second[:0]
	for k := range r.pairs {
		p := &r.pairs[k]
		r.begin[p.class+1] = k + 1
		p.first = len(r.first)
		r.numberFunctions(p)
	}
	for c := range classes { // empty classes
		r.begin[c+1] = max(r.begin[c+1], r.begin[c])
	}
}

func (r *Repulsion) numberFunctions(p *shellPair) {
	for a := range r.shells[p.i].Size() {
		nb := r.shells[p.j].Size()
		if p.i == p.j {
			nb = a + 1
		}
		for b := range nb {
			r.first = append(r.first, int32(r.offsets[p.i]+a))
			r.second = append(r.second, int32(r.offsets[p.j]+b))
		}
	}
}
