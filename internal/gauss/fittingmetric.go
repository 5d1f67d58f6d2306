package gauss

import (
	"sync"
)

// Metric writes the integrals (A|C), Functions() squared, into dst. An auxiliary
// shell is a pair with a function that is one everywhere.
func (f *Fitting) Metric(dst []float64) {
	n := f.aux.n
	if len(dst) != n*n {
		panic("gauss: Metric: slice of the wrong length")
	}
	unit := Shell{Exps: []float64{0}, Coefs: []float64{1}}
	var rows []float64
	at := f.aux.functions()
	for i := range f.aux.shells {
		sh := f.aux.shells[i]
		unit.Atom = sh.Atom
		p := shellPair{prims: appendPrimitives(nil, &sh, &unit, f.x), nf: sh.Size(), nh: hermiteCount(sh.L)}
		one := p.nf * p.nh
		f.e = grow(f.e, len(p.prims)*one)
		for m := range p.prims {
			f.maker.expand(f.e[m*one:], &sh, &unit, p.ab, &p.prims[m])
		}
		rows = grow(rows, p.nf*n)
		f.blockOf(rows, n, &p, len(p.prims))
		for m, to := range at[i] {
			copy(dst[to*n:][:n], rows[m*n:])
		}
	}
	for i := range n {
		for j := range i {
			v := (dst[i*n+j] + dst[j*n+i]) / 2
			dst[i*n+j], dst[j*n+i] = v, v
		}
	}
}

// A laneTable says how harmonics of derivatives are made of derivatives.
type laneTable struct {
	terms  []rowTerm
	counts []int
}

// laneHarmonics returns the table for all derivatives up to a degree of the
// harmonics of l: one row for each derivative and component.
func laneHarmonics(degree, l int) *laneTable { return laneHarmonicTables[degree][l]() }

var laneHarmonicTables = func() (tables [2*MaxL + 1][MaxL + 1]func() *laneTable) {
	for d := range tables {
		for l := range tables[d] {
			tables[d][l] = sync.OnceValue(func() *laneTable { return makeLaneHarmonics(d, l) })
		}
	}
	return tables
}()

func makeLaneHarmonics(degree, l int) *laneTable {
	t := new(laneTable)
	for k := range degree + 1 {
		for _, a := range Powers(k) {
			for _, row := range Harmonics(l) {
				before := len(t.terms)
				for j, c := range row {
					if b := Powers(l)[j]; c != 0 {
						t.terms = append(t.terms, rowTerm{hermiteIndex(a.X+b.X, a.Y+b.Y, a.Z+b.Z), c})
					}
				}
				t.counts = append(t.counts, len(t.terms)-before)
			}
		}
	}
	return t
}
