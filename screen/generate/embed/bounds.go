// Package embed turns bounds on distances into coordinates: triangle smoothing,
// the metric matrix, and a refinement that lets handedness correct itself
// through a fourth dimension.
//
// It knows nothing of chemistry. Lengths are in bohr, volumes in bohr^3.
//
// Sources: G. M. Crippen, T. F. Havel, Distance Geometry and Molecular
// Conformation (1988); J. M. Blaney, J. S. Dixon, Rev. Comput. Chem. 1994, 5, 299.
package embed

import (
	"fmt"
	"math"
)

// Far is the upper bound of a distance of which nothing is known, bohr.
const Far = 1000

// Bounds hold the smallest and the largest distance of each pair of n points.
type Bounds struct {
	n            int
	lower, upper []float64 // n x n, symmetric
}

// NewBounds returns bounds for n points that say nothing yet.
func NewBounds(n int) *Bounds {
	b := &Bounds{n: n, lower: make([]float64, n*n), upper: make([]float64, n*n)}
	for i := range n {
		for j := range n {
			if i != j {
				b.upper[i*n+j] = Far
			}
		}
	}
	return b
}

// Clone returns a copy.
func (b *Bounds) Clone() *Bounds {
	return &Bounds{n: b.n, lower: append([]float64(nil), b.lower...), upper: append([]float64(nil), b.upper...)}
}

// Points returns n.
func (b *Bounds) Points() int { return b.n }

// At returns the bounds of a pair.
func (b *Bounds) At(i, j int) (lower, upper float64) {
	return b.lower[i*b.n+j], b.upper[i*b.n+j]
}

// Set replaces the bounds of a pair. Panics if they are not an interval of
// distances: a caller's mistake.
func (b *Bounds) Set(i, j int, lower, upper float64) {
	if i == j || !(0 <= lower && lower <= upper) {
		panic(fmt.Sprintf("embed: bounds %g to %g for points %d and %d", lower, upper, i, j))
	}
	n := b.n
	b.lower[i*n+j], b.lower[j*n+i] = lower, lower
	b.upper[i*n+j], b.upper[j*n+i] = upper, upper
}

// A Contradiction is a pair whose bounds cannot both hold.
type Contradiction struct {
	I, J         int
	Lower, Upper float64 // bohr
}

func (c *Contradiction) Error() string {
	return fmt.Sprintf("the distance of atoms %d and %d should be at least %.3f and at most %.3f bohr",
		c.I+1, c.J+1, c.Lower, c.Upper)
}

// Smooth tightens all bounds until no triangle can: first the upper ones, the
// shortest paths, then the lower ones. It returns a *Contradiction where a
// lower bound ends above its upper bound by more than a thousandth.
//
// Source: Crippen, Havel (1988), chapter 5; the order of the loops is
// Floyd's, Commun. ACM 1962, 5, 345.
func (b *Bounds) Smooth() error {
	b.triangles(func(i, j, k int) {
		n := b.n
		if u := b.upper[i*n+k] + b.upper[k*n+j]; u < b.upper[i*n+j] {
			b.upper[i*n+j], b.upper[j*n+i] = u, u
		}
	})
	if err := b.contradiction(); err != nil {
		return err
	}
	b.triangles(func(i, j, k int) {
		n := b.n
		l := math.Max(b.lower[i*n+k]-b.upper[k*n+j], b.lower[k*n+j]-b.upper[i*n+k])
		if l > b.lower[i*n+j] {
			b.lower[i*n+j], b.lower[j*n+i] = l, l
		}
	})
	return b.contradiction()
}

// triangles calls visit for all pairs i < j and third points k, k outermost.
func (b *Bounds) triangles(visit func(i, j, k int)) {
	for k := range b.n {
		for i := range b.n {
			for j := i + 1; j < b.n; j++ {
				if i != k && j != k {
					visit(i, j, k)
				}
			}
		}
	}
}

func (b *Bounds) contradiction() error {
	for i := range b.n {
		for j := range i {
			l, u := b.At(i, j)
			if l > u*1.001 {
				return &Contradiction{I: j, J: i, Lower: l, Upper: u}
			}
			if l > u {
				b.Set(i, j, u, u)
			}
		}
	}
	return nil
}
