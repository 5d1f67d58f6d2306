package hf

import (
	"context"
	"fmt"
	"runtime"

	"torsieve/internal/gauss"
	"torsieve/internal/linalg"

	gonum "gonum.org/v1/gonum/blas/gonum"
)

// A fittedEngine takes charge clouds as sums of auxiliary functions, fitted in
// the Coulomb metric J_AC = (A|C) = L L^T:
//
//	B_Q,mn = sum_A (L^-1)_QA (A|mn)      (mn|ls) ~ sum_Q B_Q,mn B_Q,ls
//	J_mn = sum_Q B_Q,mn g_Q              g_Q = sum_ls B_Q,ls P_ls
//	K_mn = sum_Qi X_m,iQ X_n,iQ          X_m,iQ = sum_n B_Q,mn C_ni
//
// Where B fits the memory it is kept, each pair of functions once; else the
// integrals are computed anew in each build (fitteddirect.go). The energy is the
// same but for rounding.
//
// Sources: O. Vahtras, J. Almlof, M. W. Feyereisen, Chem. Phys. Lett. 1993, 213,
// 514; F. Weigend, Phys. Chem. Chem. Phys. 2002, 4, 4285.
type fittedEngine struct {
	fit    *gauss.Fitting
	n, aux int // functions, auxiliary functions
	budget int64
	pairs  pairTable

	lower   []float64 // L
	dropped []int     // auxiliary functions that others make up
	stored  bool
	width   int         // auxiliary functions of a block of B
	blocks  [][]float64 // of B: rows of width numbers, one a pair

	chunk, columns []float64 // integrals of some pairs, by rows and by columns
	orbitals       []float64 // n rows of occupied orbitals
	half           []float64 // X
	g, packed      []float64
	direct         halfTransform
	work           linalg.Workspace
}

func newFittedEngine(shells, auxiliary []gauss.Shell, budget int64) *fittedEngine {
	f := &fittedEngine{fit: gauss.NewFitting(shells, auxiliary), budget: budget}
	f.pairs.offsets = gauss.Offsets(shells)
	f.n, f.aux = f.pairs.offsets[len(shells)], f.fit.Functions()
	f.direct = halfTransform{fit: f.fit, offsets: f.pairs.offsets, aux: f.aux}
	return f
}

const (
	chunkRows = 480       // pairs of functions that are fitted together
	halfBytes = 128 << 20 // of X, at most
	unfit     = 1e-13     // share of a pivot's diagonal under which it is left out
)

func (f *fittedEngine) forget() {}

// release collects what it gives up: what comes next is as large, and both at once
// would break the budget.
func (f *fittedEngine) release() {
	if f.blocks == nil && f.half == nil {
		return
	}
	f.blocks, f.chunk, f.columns, f.half = nil, nil, nil, nil
	runtime.GC()
}

func (f *fittedEngine) place(ctx context.Context, x []float64, threshold float64) error {
	f.fit.Place(x, threshold)
	f.pairs.fill(f.fit)
	f.lower = resize(f.lower, f.aux*f.aux)
	f.fit.Metric(f.lower)
	var err error
	if f.dropped, err = f.work.Cholesky(f.lower, f.aux, unfit); err != nil {
		return fmt.Errorf("hf: metric of the fitting functions: %w", err)
	}
	f.width = blockWidth(f.aux)
	if f.stored = storedBytes(f.n, f.aux, f.pairs.rows()) <= f.budget; !f.stored {
		f.release()
		f.direct.place()
		return nil
	}
	return f.fill(ctx)
}

// blockWidth divides the auxiliary functions evenly into blocks, of whole panels
// of the products.
func blockWidth(aux int) int {
	const most, panel = 240, 24
	blocks := (aux + most - 1) / most
	width := (aux + blocks - 1) / blocks
	return (width + panel - 1) / panel * panel
}

// fill computes B.
func (f *fittedEngine) fill(ctx context.Context) error {
	count := (f.aux + f.width - 1) / f.width
	size := f.pairs.rows() * f.width
	if len(f.blocks) != count || cap(f.blocks[0]) < size {
		f.release()
		room := size
		if more := f.pairs.rows() + f.pairs.rows()/32; storedBytes(f.n, f.aux, more) <= f.budget {
			room = more * f.width // conformers of one molecule differ a little
		}
		f.blocks = make([][]float64, count)
		for i := range f.blocks {
			f.blocks[i] = make([]float64, room)
		}
	}
	last := f.aux - (count-1)*f.width
	for i := range f.blocks {
		f.blocks[i] = f.blocks[i][:size]
	}
	if last < f.width {
		clear(f.blocks[count-1])
	}
	for lo := 0; lo < f.fit.Pairs(); {
		if err := ctx.Err(); err != nil {
			return err
		}
		hi := f.upTo(lo)
		f.fillPairs(lo, hi)
		lo = hi
	}
	return nil
}

// upTo returns how far a chunk of pairs of shells from lo on goes.
func (f *fittedEngine) upTo(lo int) int {
	hi := lo + 1
	for hi < f.fit.Pairs() && f.pairs.begin[hi+1]-f.pairs.begin[lo] <= chunkRows {
		hi++
	}
	return hi
}

// fillPairs computes the rows of B of pairs of shells lo..hi.
func (f *fittedEngine) fillPairs(lo, hi int) {
	row := f.pairs.begin[lo]
	n := f.pairs.begin[hi] - row
	f.integrals(lo, hi)
	f.columns = resize(f.columns, n*f.aux)
	transpose(f.columns, n, f.chunk, f.aux, n, f.aux)
	f.solve(f.columns, n)
	for i, block := range f.blocks {
		q := i * f.width
		transpose(block[row*f.width:], f.width, f.columns[q*n:], n, min(f.width, f.aux-q), n)
	}
}

// integrals fills f.chunk with the rows (mn|A) of pairs of shells lo..hi.
func (f *fittedEngine) integrals(lo, hi int) {
	rows := f.pairs.begin[hi] - f.pairs.begin[lo]
	f.chunk = resize(f.chunk, (rows+maxBlock)*f.aux) // a block with both triangles reaches further
	for k := lo; k < hi; k++ {
		at := f.chunk[(f.pairs.begin[k]-f.pairs.begin[lo])*f.aux:]
		f.fit.Integrals(at, f.aux, k)
		if f.pairs.begin[k+1]-f.pairs.begin[k] < f.fit.Size(k) {
			f.pack(at, k)
		}
	}
}

// maxBlock is the number of pairs of functions of two shells, at most.
const maxBlock = (2*gauss.MaxL + 1) * (2*gauss.MaxL + 1)

// pack moves the lower triangle of a block of one shell with itself together.
func (f *fittedEngine) pack(rows []float64, k int) {
	i, _ := f.fit.Pair(k)
	n := f.pairs.offsets[i+1] - f.pairs.offsets[i]
	to := 0
	for a := range n {
		for b := range a + 1 {
			copy(rows[to*f.aux:(to+1)*f.aux], rows[(a*n+b)*f.aux:])
			to++
		}
	}
}

// storedBytes is what a fit of so many pairs of functions takes that is kept.
func storedBytes(n, aux, rows int) int64 {
	width := int64(blockWidth(aux))
	half := 8 * int64(n) * width * min(int64(n), max(1, halfBytes/(8*int64(n)*width)))
	blocks := (int64(aux) + width - 1) / width
	return half + 8*(int64(aux)*int64(aux)+int64(rows)*width*blocks+int64(aux)*(2*chunkRows+maxBlock))
}

// solve turns columns of integrals into columns of B.
func (f *fittedEngine) solve(columns []float64, n int) {
	for _, q := range f.dropped {
		clear(columns[q*n : (q+1)*n])
	}
	f.work.SolveLower(f.lower, f.aux, columns, n, n)
}

// transpose writes the rows by columns matrix src as columns by rows into dst.
func transpose(dst []float64, ldd int, src []float64, lds, rows, columns int) {
	const block = 16
	for i0 := 0; i0 < rows; i0 += block {
		i1 := min(i0+block, rows)
		for j0 := 0; j0 < columns; j0 += block {
			j1 := min(j0+block, columns)
			for j := j0; j < j1; j++ {
				to := dst[j*ldd+i0 : j*ldd+i1]
				at := i0*lds + j
				for i := range to {
					to[i] = src[at]
					at += lds
				}
			}
		}
	}
}

func (f *fittedEngine) build(ctx context.Context, d *density, j []float64, ks [][]float64) error {
	for _, k := range ks {
		clear(k)
	}
	f.packed = resize(f.packed, f.pairs.rows())
	clear(f.packed)
	var err error
	if f.stored {
		err = f.buildStored(ctx, d, ks)
	} else {
		err = f.buildDirect(ctx, d, ks)
	}
	if err != nil {
		return err
	}
	clear(j)
	for r, v := range f.packed {
		a, b := int(f.pairs.first[r]), int(f.pairs.second[r])
		j[a*f.n+b], j[b*f.n+a] = v, v
	}
	for _, k := range ks {
		for a := range f.n {
			for b := range a {
				k[b*f.n+a] = k[a*f.n+b]
			}
		}
	}
	return nil
}

// buildStored adds to f.packed and the lower triangles of ks.
func (f *fittedEngine) buildStored(ctx context.Context, d *density, ks [][]float64) error {
	f.g = resize(f.g, f.width)
	for _, block := range f.blocks {
		clear(f.g)
		for s := range ks {
			if err := f.exchange(ctx, block, &d.factors[s], d.each, ks[s]); err != nil {
				return err
			}
		}
		for r := range f.packed {
			f.packed[r] += gonum.Implementation{}.Ddot(f.width, block[r*f.width:(r+1)*f.width], 1, f.g, 1)
		}
	}
	return nil
}

// exchange adds the part of one block of auxiliary functions to k and, each
// times, to f.g.
func (f *fittedEngine) exchange(ctx context.Context, block []float64, c *factor, each float64, k []float64) error {
	if c.rows == 0 {
		return nil
	}
	f.columnsOf(c)
	most := min(c.rows, max(1, halfBytes/(8*f.n*f.width)))
	for i := 0; i < c.rows; i += most {
		if err := ctx.Err(); err != nil {
			return err
		}
		rows := min(most, c.rows-i)
		one := rows * f.width
		f.half = resize(f.half, f.n*one)
		for m := range f.n {
			partner, row := f.pairs.of(m)
			f.work.Gather(rows, f.width, f.orbitals[i:], partner, c.rows, block, row, f.width, 0, f.half[m*one:], f.width)
		}
		f.sumHalf(i, rows, f.width, c.rows, each)
		f.work.AddSquare(k, f.half, f.n, one)
	}
	return nil
}

// columnsOf writes orbitals as rows of functions.
func (f *fittedEngine) columnsOf(c *factor) {
	f.orbitals = resize(f.orbitals, f.n*c.rows)
	transpose(f.orbitals, c.rows, c.c, f.n, c.rows, f.n)
}

// sumHalf adds each times the sum of C_mi X_m,iQ to f.g: rows orbitals from
// first on are in f.half, of all.
func (f *fittedEngine) sumHalf(first, rows, width, all int, each float64) {
	for m := range f.n {
		for i, c := range f.orbitals[m*all+first:][:rows] {
			gonum.Implementation{}.Daxpy(width, each*c, f.half[(m*rows+i)*width:], 1, f.g, 1)
		}
	}
}
