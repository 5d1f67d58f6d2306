package hf

import (
	"context"

	"torsieve/internal/gauss"
)

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
