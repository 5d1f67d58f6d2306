package gauss_test

import (
	"math"
	"testing"

	"torsieve/internal/gauss"
)

// fullList returns all n^4 integrals (ij|kl) of the shells at x.
func fullList(shells []gauss.Shell, x []float64) ([]float64, int) {
	off := gauss.Offsets(shells)
	n := off[len(shells)]
	all := make([]float64, n*n*n*n)
	r := gauss.NewRepulsion(shells)
	r.Place(x, 1e-14)
	first, second := r.Functions()
	for bra := range r.Pairs() {
		spans, rows := r.Rows(nil, bra)
		lo, hi := r.Columns(bra)
		v := make([]float64, rows*(hi-lo))
		r.Block(v, bra, nil)
		at := 0
		for _, s := range spans {
			for k := s.Begin; k < s.End; k++ {
				for col := lo; col < hi; col++ {
					place(all, n, int(first[col]), int(second[col]), int(first[k]), int(second[k]), v[at])
					at++
				}
			}
		}
	}
	return all, n
}

// place adds an integral, which carries its factors, at all permutations; those
// that coincide add up to the whole.
func place(all []float64, n, i, j, k, l int, v float64) {
	for _, p := range [][4]int{{i, j, k, l}, {j, i, k, l}, {i, j, l, k}, {j, i, l, k},
		{k, l, i, j}, {l, k, i, j}, {k, l, j, i}, {l, k, j, i}} {
		all[((p[0]*n+p[1])*n+p[2])*n+p[3]] += v
	}
}

func TestRepulsionIntegralsOfWater(t *testing.T) {
	for _, b := range water(t) {
		t.Run(b.Basis, func(t *testing.T) {
			all, n := fullList(b.shells, b.position)
			for _, e := range b.ERI {
				i, j, k, l, want := int(e[0]), int(e[1]), int(e[2]), int(e[3]), e[4]
				if got := all[((i*n+j)*n+k)*n+l]; math.Abs(got-want) > 2e-12 {
					t.Errorf("(%d %d|%d %d) = %.12f, want %.12f", i, j, k, l, got, want)
				}
			}
			sum := 0.0
			for _, v := range all {
				sum += v * v
			}
			if math.Abs(sum-b.SumOfSq) > 1e-10*b.SumOfSq {
				t.Errorf("sum of squares %.12g, want %.12g", sum, b.SumOfSq)
			}
		})
	}
}
