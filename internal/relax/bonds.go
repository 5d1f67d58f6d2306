package relax

import (
	"math"

	"torsieve/internal/element"
	"torsieve/internal/geom"
)

// bondLimit is the longest bond, in sums of the covalent radii.
const bondLimit = 1.3

// A net says which atoms count as bonded, from distances alone, in one piece.
type net struct {
	near  [][]int // neighbours of each atom
	piece []int   // of each atom, while pieces are joined
}

func newNet(atoms int) *net {
	return &net{near: make([][]int, atoms), piece: make([]int, atoms)}
}

// find joins all that are within the length of a bond, and then pieces by the
// shortest way between two of them until one is left.
func (b *net) find(x []float64, numbers []int) {
	for i := range b.near {
		b.near[i] = b.near[i][:0]
		b.piece[i] = i
	}
	for i, z := range numbers {
		for j := range i {
			if geom.Distance(x, i, j) < bondLimit*(element.CovalentRadius(z)+element.CovalentRadius(numbers[j])) {
				b.join(i, j)
			}
		}
	}
	for {
		i, j := b.closestPieces(x)
		if i == j {
			return
		}
		b.join(i, j)
	}
}

// join makes a bond of i and j, and one piece of theirs.
func (b *net) join(i, j int) {
	b.near[i] = append(b.near[i], j)
	b.near[j] = append(b.near[j], i)
	from, to := b.piece[i], b.piece[j]
	for k, p := range b.piece {
		if p == from {
			b.piece[k] = to
		}
	}
}

// closestPieces returns the two closest atoms of different pieces, or 0 and 0.
func (b *net) closestPieces(x []float64) (i, j int) {
	best := math.Inf(1)
	for p := range b.piece {
		for q := range p {
			if b.piece[p] == b.piece[q] {
				continue
			}
			if r := geom.Distance(x, p, q); r < best {
				best, i, j = r, p, q
			}
		}
	}
	return i, j
}
