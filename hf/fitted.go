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
