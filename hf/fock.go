package hf

import (
	"context"
	"sort"

	"torsieve/internal/gauss"
)

// A fockBuilder makes Coulomb and exchange matrices of densities at one
// geometry after another. It keeps the repulsion integrals that fit its budget,
// and computes the rest anew for each build. It owns its memory and serves one
// goroutine at a time.
type fockBuilder struct {
	rep    *gauss.Repulsion
	n      int   // functions
	budget int64 // bytes for integrals

	kept   int       // bras whose blocks are kept: the first ones, of lowest angular momentum, save most time a byte
	values []float64 // kept blocks one after another, then room for the largest other one
	begin  []int     // of each bra's block, if all were kept
	spans  []gauss.Span

	packed  []float64 // density by pairs of functions
	coulomb []float64 // likewise
	columns []float64 // of one bra
	near    local
	bounds  densityBounds
}

func newFockBuilder(shells []gauss.Shell, budget int64) *fockBuilder {
	off := gauss.Offsets(shells)
	return &fockBuilder{rep: gauss.NewRepulsion(shells), n: off[len(shells)], budget: budget, bounds: densityBounds{offsets: off}}
}

// place takes the atoms to x and computes the integrals that are to be kept.
// Integrals below threshold (hartree) are left out.
func (f *fockBuilder) place(ctx context.Context, x []float64, threshold float64) error {
	f.rep.Place(x, threshold)
	total, largest := f.measure()
	room := int(f.budget / 8)
	f.kept = f.rep.Pairs()
	if total > room {
		f.kept = sort.Search(f.rep.Pairs(), func(bra int) bool { return f.begin[bra+1] > room-largest })
		total = f.begin[f.kept] + largest
	}
	f.reserve(total)
	for bra := range f.kept {
		if err := ctx.Err(); err != nil {
			return err
		}
		f.rep.Block(f.block(bra), bra, nil)
	}
	return nil
}

// complete says whether all integrals are kept.
func (f *fockBuilder) complete() bool { return f.kept == f.rep.Pairs() }

// reserve makes values n long. Conformers of one molecule differ a little, so
// it takes a little more than it must, and gives the old memory up before.
func (f *fockBuilder) reserve(n int) {
	if cap(f.values) < n {
		f.values = nil
		f.values = make([]float64, max(n, min(n+n/16, int(f.budget/8))))
	}
	f.values = f.values[:n]
}

// measure finds where each block begins, and returns how many integrals there
// are and how many the largest block has.
func (f *fockBuilder) measure() (total, largest int) {
	f.begin = f.begin[:0]
	for bra := range f.rep.Pairs() {
		f.begin = append(f.begin, total)
		var rows int
		f.spans, rows = f.rep.Rows(f.spans[:0], bra)
		lo, hi := f.rep.Columns(bra)
		total += rows * (hi - lo)
		largest = max(largest, rows*(hi-lo))
	}
	f.begin = append(f.begin, total)
	return total, largest
}

// block returns the memory of one bra's block.
func (f *fockBuilder) block(bra int) []float64 {
	lo, size := f.begin[bra], f.begin[bra+1]-f.begin[bra]
	if bra >= f.kept {
		lo = f.begin[f.kept]
	}
	return f.values[lo : lo+size]
}

// build writes J_ab = sum P_cd (ab|cd) of the density total, and for each of
// the densities spins its K_ac = sum P_bd (ab|cd). Matrices are n by n, row by
// row, and symmetric. Where integrals are not kept, those that would change no
// element by more than threshold are not computed.
func (f *fockBuilder) build(ctx context.Context, total []float64, spins [][]float64, j []float64, ks [][]float64) error {
	first, second := f.rep.Functions()
	f.packed, f.coulomb = resize(f.packed, len(first)), resize(f.coulomb, len(first))
	for k, a := range first {
		f.packed[k] = total[int(a)*f.n+int(second[k])]
	}
	clear(f.coulomb)
	for _, k := range ks {
		clear(k)
	}
	if !f.complete() {
		f.bounds.update(total, spins, f.n)
	}
	for bra := range f.rep.Pairs() {
		if err := ctx.Err(); err != nil {
			return err
		}
		v := f.block(bra)
		if bra >= f.kept {
			f.rep.Block(v, bra, f.bounds.skip(f.rep, bra))
		}
		f.digest(bra, v, spins, ks)
	}
	clear(j)
	for k, a := range first {
		b := int(second[k])
		v := 2 * f.coulomb[k]
		if int(a) == b {
			v *= 2 // integrals carry 1/2 there
		}
		j[int(a)*f.n+b], j[b*f.n+int(a)] = v, v
	}
	for _, k := range ks {
		addTranspose(k, f.n)
	}
	return nil
}

// addTranspose makes m + m^T of m.
func addTranspose(m []float64, n int) {
	for i := range n {
		m[i*n+i] *= 2
		for j := range i {
			v := m[i*n+j] + m[j*n+i]
			m[i*n+j], m[j*n+i] = v, v
		}
	}
}

func resize(s []float64, n int) []float64 {
	if cap(s) < n {
		return make([]float64, n)
	}
	return s[:n]
}
