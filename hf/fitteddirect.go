package hf

import (
	"context"

	"torsieve/internal/linalg"

	gonum "gonum.org/v1/gonum/blas/gonum"
)

// Without room for B each build computes the integrals anew: for some occupied
// orbitals at a time, as many as fit, the half-transformed integrals of all
// functions are made and fitted,
//
//	X_m,iQ = sum_A (L^-1)_QA sum_n (A|mn) C_ni,
//
// and give their part of the exchange matrix and of g. The Coulomb matrix then
// takes one more pass over the integrals: J_mn = sum_A (A|mn) (L^-T g)_A.

// directBytes is what so many orbitals at a time take.
func directBytes(n, aux, orbitals int) int64 {
	const shell = 2*6 + 1 // functions of the largest shell
	return 8 * (int64(aux)*int64(aux) + int64(n)*int64(aux)*int64(orbitals) +
		int64(aux)*(2*shell*int64(orbitals)+2*chunkRows+maxBlock))
}

func (f *fittedEngine) buildDirect(ctx context.Context, d *density, ks [][]float64) error {
	f.g = resize(f.g, f.aux)
	clear(f.g)
	for s := range ks {
		c := &d.factors[s]
		if c.rows == 0 {
			continue
		}
		f.columnsOf(c)
		most := 1
		for most < c.rows && directBytes(f.n, f.aux, most+1) <= f.budget {
			most++
		}
		for i := 0; i < c.rows; i += most {
			rows := min(most, c.rows-i)
			if err := f.halfDirect(ctx, i, rows, c.rows); err != nil {
				return err
			}
			f.sumHalf(i, rows, f.aux, c.rows, d.each)
			f.work.AddSquare(ks[s], f.half, f.n, rows*f.aux)
		}
	}
	linalg.SolveLowerTransposed(f.lower, f.aux, f.g)
	for lo := 0; lo < f.fit.Pairs(); {
		if err := ctx.Err(); err != nil {
			return err
		}
		hi := f.upTo(lo)
		f.integrals(lo, hi)
		for r := f.pairs.begin[lo]; r < f.pairs.begin[hi]; r++ {
			row := f.chunk[(r-f.pairs.begin[lo])*f.aux:][:f.aux]
			f.packed[r] = gonum.Implementation{}.Ddot(f.aux, row, 1, f.g, 1)
		}
		lo = hi
	}
	return nil
}

// halfDirect fills f.half for rows of all orbitals from first on.
func (f *fittedEngine) halfDirect(ctx context.Context, first, rows, all int) error {
	one := rows * f.aux
	f.half = resize(f.half, f.n*one)
	clear(f.half)
	for s := range len(f.pairs.offsets) - 1 {
		if err := ctx.Err(); err != nil {
			return err
		}
		lo, hi := f.pairs.offsets[s], f.pairs.offsets[s+1]
		n := (hi - lo) * rows
		x := f.half[lo*one : hi*one]
		f.direct.add(x, s, f.orbitals[first:], rows, all)
		f.columns = resize(f.columns, n*f.aux)
		transpose(f.columns, n, x, f.aux, n, f.aux)
		f.solve(f.columns, n)
		transpose(x, f.aux, f.columns, n, f.aux, n)
	}
	return nil
}
