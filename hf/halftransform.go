package hf

import (
	"torsieve/internal/gauss"
	"torsieve/internal/linalg"
)

// A halfTransform multiplies integrals (A|mn), computed for the purpose, with
// orbitals over n.
type halfTransform struct {
	fit     *gauss.Fitting
	offsets []int // of shells
	aux     int
	of      [][]int // pairs that each shell is in

	chunk   []float64 // rows of integrals
	partner []int32   // functions n of the rows
	at      [][]int32 // rows of each function of the shell
	work    linalg.Workspace
}

// place takes up the pairs that count at a new geometry.
func (h *halfTransform) place() {
	h.of = make([][]int, len(h.offsets)-1)
	for k := range h.fit.Pairs() {
		i, j := h.fit.Pair(k)
		h.of[i] = append(h.of[i], k)
		if i != j {
			h.of[j] = append(h.of[j], k)
		}
	}
}

// add adds sum over n of (A|mn) C_ni for each function m of shell s to dst, as
// [m][i][A]. Orbitals are rows of functions, all numbers apart, of which the
// first count.
func (h *halfTransform) add(dst []float64, s int, orbitals []float64, count, all int) {
	own := h.offsets[s+1] - h.offsets[s]
	for len(h.at) < own {
		h.at = append(h.at, nil)
	}
	one, used := count*h.aux, 0
	flush := func() {
		for a := range own {
			h.work.Gather(count, h.aux, orbitals, h.partner, all, h.chunk, h.at[a], h.aux, 1, dst[a*one:], h.aux)
			h.at[a] = h.at[a][:0]
		}
		h.partner, used = h.partner[:0], 0
	}
	h.chunk = resize(h.chunk, (chunkRows+maxBlock)*h.aux)
	for _, k := range h.of[s] {
		if used+h.fit.Size(k) > chunkRows+maxBlock {
			flush()
		}
		h.fit.Integrals(h.chunk[used*h.aux:], h.aux, k)
		i, j := h.fit.Pair(k)
		nj := h.offsets[j+1] - h.offsets[j]
		other, step, stride := j, nj, 1
		if i != s {
			other, step, stride = i, 1, nj
		}
		for b := range h.offsets[other+1] - h.offsets[other] {
			h.partner = append(h.partner, int32(h.offsets[other]+b))
			for a := range own {
				h.at[a] = append(h.at[a], int32(used+a*step+b*stride))
			}
		}
		used += h.fit.Size(k)
	}
	flush()
}
