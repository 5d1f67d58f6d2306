package gauss

import "sync"

// Hermite Gaussians carry the charge cloud of two Gaussians: a product of
// primitives on A and B is a short sum of derivatives, with respect to its
// centre P, of one s Gaussian. The derivatives d^(t+u+v)/dPx^t dPy^u dPz^v are
// numbered by their degree and, inside one degree, as Powers numbers monomials.
//
// Source: L. E. McMurchie, E. R. Davidson, J. Comput. Phys. 1978, 26, 218,
// doi:10.1016/0021-9991(78)90092-X.

// hermiteCount returns how many derivatives there are up to degree l.
func hermiteCount(l int) int { return (l + 1) * (l + 2) * (l + 3) / 6 }

// hermiteIndex returns the number of one derivative.
func hermiteIndex(t, u, v int) int {
	l := t + u + v
	return hermiteCount(l-1) + powerIndex(t, u, l)
}

// A hermiteStep makes one derivative from lower ones:
// R[i] = X[axis] R'[down] + times R'[down2], R' with one order more of Boys.
type hermiteStep struct {
	axis, down, down2 int
	times             float64
}

// hermiteSteps holds the steps for all derivatives up to degree 4 MaxL.
var hermiteSteps = sync.OnceValue(func() []hermiteStep {
	steps := []hermiteStep{{}}
	for l := 1; l <= 4*MaxL; l++ {
		for x := l; x >= 0; x-- {
			for y := l - x; y >= 0; y-- {
				steps = append(steps, stepTo([3]int{x, y, l - x - y}))
			}
		}
	}
	return steps
})

// stepTo lowers the axis with the smallest power, which saves second terms.
func stepTo(n [3]int) hermiteStep {
	axis := -1
	for i, k := range n {
		if k > 0 && (axis < 0 || k < n[axis]) {
			axis = i
		}
	}
	s := hermiteStep{axis: axis, times: float64(n[axis] - 1)}
	n[axis]--
	s.down = hermiteIndex(n[0], n[1], n[2])
	if n[axis] > 0 {
		n[axis]--
		s.down2 = hermiteIndex(n[0], n[1], n[2])
	}
	return s
}

// hermiteSums returns, for degrees up to l, the table of index sums: entry
// t*count+u is the number of the derivative that both together make.
func hermiteSums(l int) []int32 { return hermiteSumTables[l]() }

var hermiteSumTables = func() (tables [2*MaxL + 1]func() []int32) {
	for l := range tables {
		tables[l] = sync.OnceValue(func() []int32 {
			n := hermiteCount(l)
			all := make([]Power, 0, n)
			for k := 0; k <= l; k++ {
				all = append(all, Powers(k)...)
			}
			sums := make([]int32, n*n)
			for i, a := range all {
				for j, b := range all {
					sums[i*n+j] = int32(hermiteIndex(a.X+b.X, a.Y+b.Y, a.Z+b.Z))
				}
			}
			return sums
		})
	}
	return tables
}()

// coulombHermite writes into r the derivatives up to degree l of
// F_0(a X^2), the potential between an s Gaussian pair of reduced exponent a
// and a point at distance vector X, each times pre. scratch is as long as r;
// boys holds l+1 numbers.
//
// Source: McMurchie, Davidson 1978, eq. 4.6 to 4.8.
func coulombHermite(r, scratch, boys []float64, l int, a float64, x [3]float64, pre float64) {
	Boys(boys[:l+1], a*(x[0]*x[0]+x[1]*x[1]+x[2]*x[2]))
	for m := range l + 1 {
		boys[m] *= pre
		pre *= -2 * a
	}
	raiseHermite(r, scratch, boys, l, x)
}

// raiseHermite writes the derivatives up to degree l into r: boys holds those
// of degree 0 at all orders m. scratch is as long as r.
func raiseHermite(r, scratch, boys []float64, l int, x [3]float64) {
	steps := hermiteSteps()
	cur, next := r, scratch
	if l%2 == 1 { // so that the last level falls into r
		cur, next = scratch, r
	}
	cur[0] = boys[l]
	for m := l - 1; m >= 0; m-- {
		next[0] = boys[m]
		for i, n := 1, hermiteCount(l-m); i < n; i++ {
			s := &steps[i]
			next[i] = x[s.axis]*cur[s.down] + s.times*cur[s.down2]
		}
		cur, next = next, cur
	}
}

// hermiteTable fills e with E_t^{ij} of one dimension: the coefficients of the
// product x_A^i x_B^j of two primitives in Hermite Gaussians, without the
// factor exp(-mu AB^2). e is indexed [(i*(lb+1)+j)*(la+lb+1)+t]; pa and pb are
// P-A and P-B, p the sum of exponents.
//
// Source: Helgaker, Jorgensen, Olsen, Molecular Electronic-Structure Theory
// (Wiley 2000), eqs. 9.5.6 and 9.5.7.
func hermiteTable(e []float64, la, lb int, p, pa, pb float64) {
	n := la + lb + 1
	at := func(i, j int) []float64 { return e[(i*(lb+1)+j)*n:][:n] }
	raise := func(dst, src []float64, shift float64) {
		for t := range n {
			s := shift * src[t]
			if t > 0 {
				s += src[t-1] / (2 * p)
			}
			if t+1 < n {
				s += float64(t+1) * src[t+1]
			}
			dst[t] = s
		}
	}
	clear(at(0, 0))
	at(0, 0)[0] = 1
	for i := 1; i <= la; i++ {
		raise(at(i, 0), at(i-1, 0), pa)
	}
	for i := range la + 1 {
		for j := 1; j <= lb; j++ {
			raise(at(i, j), at(i, j-1), pb)
		}
	}
}
