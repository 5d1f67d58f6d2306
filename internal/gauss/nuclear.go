package gauss

import (
	"context"
	"math"
)

// Nuclear writes into v, n by n, row by row, the energy integrals (hartree) of
// an electron in the field of point charges: sites (3 each, bohr) with charges
// (e). The shells' atoms are at x (3N, bohr).
//
// It returns ctx.Err() where ctx ends before the work is done.
//
// Source: McMurchie, Davidson 1978; Helgaker, Jorgensen, Olsen, Molecular
// Electronic-Structure Theory (Wiley 2000), eq. 9.9.32.
func Nuclear(ctx context.Context, v []float64, shells []Shell, x, sites, charges []float64) error {
	off := Offsets(shells)
	n := off[len(shells)]
	if len(v) != n*n || len(sites) != 3*len(charges) {
		panic("gauss: Nuclear: slice of the wrong length")
	}
	var w potential
	for i := range shells {
		if err := ctx.Err(); err != nil {
			return err
		}
		for j := range i + 1 {
			a, b := &shells[i], &shells[j]
			w.pair(a, b, x, sites, charges)
			spread(v, w.block, off[i], off[j], a.Size(), b.Size(), n)
		}
	}
	return nil
}

// potential computes the block of one pair of shells.
type potential struct {
	maker                           hermiteMaker
	prims                           []primitive
	e, r, sum, scratch, boys, block []float64
}

func (w *potential) pair(a, b *Shell, x, sites, charges []float64) {
	l := a.L + b.L
	nh, nf := hermiteCount(l), a.Size()*b.Size()
	w.e, w.block = grow(w.e, nf*nh), grow(w.block, nf)
	w.r, w.sum, w.scratch, w.boys = grow(w.r, nh), grow(w.sum, nh), grow(w.scratch, nh), grow(w.boys, l+1)
	clear(w.block)
	var ab [3]float64
	for k := range ab {
		ab[k] = x[3*a.Atom+k] - x[3*b.Atom+k]
	}
	w.prims = appendPrimitives(w.prims[:0], a, b, x)
	for _, q := range w.prims {
		clear(w.sum)
		for k, z := range charges {
			d := [3]float64{q.x - sites[3*k], q.y - sites[3*k+1], q.z - sites[3*k+2]}
			coulombHermite(w.r, w.scratch, w.boys, l, q.p, d, -z)
			addScaled(w.sum, 1, w.r)
		}
		w.maker.expand(w.e, a, b, ab, &q)
		f := 2 * math.Pi / pairFactor // c holds pairFactor/p, the law wants 2 pi/p
		for i := range nf {
			w.block[i] += f * dot(w.e[i*nh:][:nh], w.sum)
		}
	}
}
