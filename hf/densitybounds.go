package hf

import (
	"math"

	"torsieve/internal/gauss"
)

// densityBounds holds the largest density element of each block of shells, and
// tells which kets cannot matter for a bra.
//
// Source: M. Haser, R. Ahlrichs, J. Comput. Chem. 1989, 10, 104.
type densityBounds struct {
	offsets []int
	largest []float64 // shells by shells
	all     float64
}

func (b *densityBounds) update(total []float64, spins [][]float64, n int) {
	m := len(b.offsets) - 1
	b.largest = resize(b.largest, m*m)
	b.all = 0
	for i := range m {
		for j := range i + 1 {
			v := 0.0
			for p := b.offsets[i]; p < b.offsets[i+1]; p++ {
				for q := b.offsets[j]; q < b.offsets[j+1]; q++ {
					v = max(v, math.Abs(total[p*n+q]))
					for _, s := range spins {
						v = max(v, math.Abs(s[p*n+q]))
					}
				}
			}
			b.largest[i*m+j], b.largest[j*m+i] = v, v
			b.all = max(b.all, v)
		}
	}
}

// skip returns the test that Repulsion.Block asks of each ket.
func (b *densityBounds) skip(r *gauss.Repulsion, bra int) func(int) bool {
	m := len(b.offsets) - 1
	at := func(i, j int) float64 { return b.largest[i*m+j] }
	bound, i, j := r.Bound(bra)
	limit := r.Threshold() / bound
	return func(ket int) bool {
		q, k, l := r.Bound(ket)
		if q*4*b.all < limit {
			return true
		}
		d := max(4*at(i, j), 4*at(k, l), at(i, k), at(i, l), at(j, k), at(j, l))
		return q*d < limit
	}
}
