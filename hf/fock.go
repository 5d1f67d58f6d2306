package hf

import (
	"context"

	"torsieve/internal/gauss"
)

// A fockBuilder makes Coulomb and exchange matrices of densities at one
// geometry after another. It keeps the repulsion integrals where they fit its
// budget, and computes them anew for each build where not. It owns its memory
// and serves one goroutine at a time.
type fockBuilder struct {
	rep    *gauss.Repulsion
	n      int   // functions
	budget int64 // bytes for integrals

	stored bool      // integrals holds all blocks
	values []float64 // all blocks one after another, or room for the largest
	begin  []int     // of each bra's block in values
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

// place takes the atoms to x and computes the integrals, if they are to be
// kept. Integrals below threshold (hartree) are left out.
func (f *fockBuilder) place(ctx context.Context, x []float64, threshold float64) error {
	f.rep.Place(x, threshold)
	total, largest := f.measure()
	f.stored = int64(total) <= f.budget/8
	if !f.stored {
		f.values = resize(f.values, largest)
		return nil
	}
	f.values = resize(f.values, total)
	for bra := range f.rep.Pairs() {
		if err := ctx.Err(); err != nil {
			return err
		}
		f.rep.Block(f.block(bra), bra, nil)
	}
	return nil
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
	lo, hi := f.begin[bra], f.begin[bra+1]
	if f.stored {
		return f.values[lo:hi]
	}
	return f.values[:hi-lo]
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
	if !f.stored {
		f.bounds.update(total, spins, f.n)
	}
	for bra := range f.rep.Pairs() {
		if err := ctx.Err(); err != nil {
			return err
		}
		v := f.block(bra)
		if !f.stored {
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
