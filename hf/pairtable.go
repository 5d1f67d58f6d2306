package hf

import "torsieve/internal/gauss"

// A pairTable numbers the pairs of functions that count, each once, as rows.
type pairTable struct {
	offsets []int // of shells
	begin   []int // first row of each pair of shells
	first   []int32
	second  []int32

	// Of each function: the functions that it makes pairs with, and their rows.
	from    []int
	partner []int32
	row     []int32
}

func (t *pairTable) rows() int { return len(t.first) }

// of returns the partners of function m and the rows of the pairs.
func (t *pairTable) of(m int) (partner, row []int32) {
	lo, hi := t.from[m], t.from[m+1]
	return t.partner[lo:hi], t.row[lo:hi]
}

// fill numbers the pairs that fit has kept.
func (t *pairTable) fill(fit *gauss.Fitting) {
	t.begin, t.first, t.second = t.begin[:0], t.first[:0], t.second[:0]
	for k := range fit.Pairs() {
		t.begin = append(t.begin, len(t.first))
		i, j := fit.Pair(k)
		for a := t.offsets[i]; a < t.offsets[i+1]; a++ {
			for b := t.offsets[j]; b < t.offsets[j+1] && (i != j || b <= a); b++ {
				t.first, t.second = append(t.first, int32(a)), append(t.second, int32(b))
			}
		}
	}
	t.begin = append(t.begin, len(t.first))
	n := t.offsets[len(t.offsets)-1]
	t.from = make([]int, n+1)
	for r, a := range t.first {
		t.from[a+1]++
		if b := t.second[r]; b != a {
			t.from[b+1]++
		}
	}
	for m := range n {
		t.from[m+1] += t.from[m]
	}
	at := append([]int(nil), t.from...)
	t.partner, t.row = make([]int32, t.from[n]), make([]int32, t.from[n])
	put := func(m, partner int32, row int) {
		t.partner[at[m]], t.row[at[m]] = partner, int32(row)
		at[m]++
	}
	for r, a := range t.first {
		b := t.second[r]
		put(a, b, r)
		if a != b {
			put(b, a, r)
		}
	}
}
