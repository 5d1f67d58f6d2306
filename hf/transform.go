package hf

import (
	"context"
	"fmt"

	"torsieve/internal/gauss"
	"torsieve/internal/linalg"
)

// A transformation makes fitted integrals between occupied and empty orbitals,
//
//	B_Q,ia = sum_A (L^-1)_QA sum_m C_ma sum_n C_ni (A|mn),
//
// for some occupied orbitals at a time.
type transformation struct {
	fit      *gauss.Fitting
	offsets  []int // of shells
	n, aux   int
	lower    []float64 // metric J = L L^T
	dropped  []int
	occupied []float64 // n rows, one number an active occupied orbital
	active   int
	empty    []float64 // rows of n numbers, an empty orbital each
	virtual  int
	block    int // occupied orbitals at a time

	integrals halfTransform
	kept      [2][]float64
	half      []float64 // some functions: [function][orbital][A]
	columns   []float64
	work      linalg.Workspace
}

// newTransformation takes m orbitals as rows of n numbers.
func newTransformation(shells []gauss.Shell, c *correlation, orbitals []float64, occupied, m int) *transformation {
	t := &transformation{fit: gauss.NewFitting(shells, c.auxiliary), offsets: gauss.Offsets(shells), aux: c.functions}
	t.integrals = halfTransform{fit: t.fit, offsets: t.offsets, aux: t.aux}
	t.n = t.offsets[len(shells)]
	t.active, t.virtual = occupied-c.core, m-occupied
	t.empty = orbitals[occupied*t.n:]
	t.occupied = make([]float64, t.n*t.active)
	transpose(t.occupied, t.active, orbitals[c.core*t.n:], t.n, t.active, t.n)
	t.block = t.active
	if correlationBytes(t.n, t.aux, t.virtual, t.active, 1) > c.budget { // two blocks at a time then
		for t.block > 1 && correlationBytes(t.n, t.aux, t.virtual, t.block, 2) > c.budget {
			t.block--
		}
	}
	return t
}

// transformRows is the number of functions whose half-transformed integrals are
// kept together.
const transformRows = 64

// correlationBytes is what blocks of so many orbitals take.
func correlationBytes(n, aux, virtual, orbitals, blocks int) int64 {
	numbers := int64(blocks)*int64(orbitals)*int64(virtual)*int64(aux) +
		int64(transformRows+2*gauss.MaxL)*int64(orbitals)*int64(aux) +
		int64(aux)*int64(aux) + int64(virtual)*int64(aux) + int64(chunkRows+maxBlock)*int64(aux) +
		int64(virtual)*int64(virtual) + 3*int64(n)*int64(n)
	return 8 * numbers
}

func (t *transformation) place(x []float64, threshold float64) error {
	t.fit.Place(x, threshold)
	t.lower = make([]float64, t.aux*t.aux)
	t.fit.Metric(t.lower)
	var err error
	if t.dropped, err = t.work.Cholesky(t.lower, t.aux, unfit); err != nil {
		return fmt.Errorf("hf: metric of the fitting functions: %w", err)
	}
	t.integrals.place()
	return nil
}

// fitted returns B for the active occupied orbitals i0..i1 as [orbital][Q][empty
// orbital], in one of two places.
func (t *transformation) fitted(ctx context.Context, place, i0, i1 int) ([]float64, error) {
	one := t.virtual * t.aux
	rows := i1 - i0
	b := resize(t.kept[place], rows*one)
	t.kept[place] = b
	clear(b)
	shells := len(t.offsets) - 1
	for s := 0; s < shells; {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		lo := t.offsets[s]
		last := s + 1
		for last < shells && t.offsets[last+1]-lo <= transformRows {
			last++
		}
		n := t.offsets[last] - lo
		t.half = resize(t.half, n*rows*t.aux)
		clear(t.half)
		for ; s < last; s++ {
			t.integrals.add(t.half[(t.offsets[s]-lo)*rows*t.aux:], s, t.occupied[i0:], rows, t.active)
		}
		for i := range rows {
			t.work.Gemm(false, false, t.virtual, t.aux, n, 1, t.empty[lo:], t.n, t.half[i*t.aux:], rows*t.aux, 1, b[i*one:], t.aux)
		}
	}
	for i := range rows {
		t.solve(b[i*one : (i+1)*one])
	}
	return b, nil
}

// solve turns [empty orbital][A] into [Q][empty orbital].
func (t *transformation) solve(b []float64) {
	t.columns = resize(t.columns, len(b))
	transpose(t.columns, t.virtual, b, t.aux, t.virtual, t.aux)
	for _, q := range t.dropped {
		clear(t.columns[q*t.virtual : (q+1)*t.virtual])
	}
	t.work.SolveLower(t.lower, t.aux, t.columns, t.virtual, t.virtual)
	copy(b, t.columns)
}
