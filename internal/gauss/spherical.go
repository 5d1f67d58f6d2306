package gauss

import (
	"math"
	"sync"
)

// MaxL is the highest angular momentum that the tables reach.
const MaxL = 6

// A Power is one Cartesian monomial x^X y^Y z^Z.
type Power struct{ X, Y, Z int }

// Powers returns the monomials of degree l in the order xx, xy, xz, yy, yz, zz
// (x falling, then y falling). The slice is shared: do not change it.
func Powers(l int) []Power { return powersOf()[l] }

var powersOf = sync.OnceValue(func() [][]Power {
	table := make([][]Power, 2*MaxL+2)
	for l := range table {
		for x := l; x >= 0; x-- {
			for y := l - x; y >= 0; y-- {
				table[l] = append(table[l], Power{x, y, l - x - y})
			}
		}
	}
	return table
})

// Harmonics returns the real solid harmonics of degree l as rows over
// Powers(l): 2l+1 rows for l >= 2 in the order m = -l..l, and the unit matrix
// for s and p, which stay x, y, z. Times the common radial part of a Shell each
// row has unit norm. The slices are shared: do not change them.
//
// Source: T. Helgaker, P. Jorgensen, J. Olsen, Molecular Electronic-Structure
// Theory (Wiley 2000), eq. 6.4.47; no Condon-Shortley sign.
func Harmonics(l int) [][]float64 { return harmonicsOf()[l] }

var harmonicsOf = sync.OnceValue(func() [][][]float64 {
	table := make([][][]float64, MaxL+1)
	for l := range table {
		if l < 2 {
			for i := range Powers(l) {
				row := make([]float64, len(Powers(l)))
				row[i] = 1
				table[l] = append(table[l], row)
			}
			continue
		}
		for m := -l; m <= l; m++ {
			table[l] = append(table[l], harmonic(l, m))
		}
	}
	return table
})

// harmonic expands one solid harmonic in the monomials of degree l.
func harmonic(l, m int) []float64 {
	row := make([]float64, len(Powers(l)))
	a := max(m, -m)
	half := 0 // twice v0: the sums over v run over integers + v0
	if m < 0 {
		half = 1
	}
	norm := 2 * factorial(l+a) * factorial(l-a)
	if m == 0 {
		norm /= 2
	}
	norm = math.Sqrt(norm) / (math.Pow(2, float64(a)) * factorial(l))
	for t := 0; 2*t <= l-a; t++ {
		for u := 0; u <= t; u++ {
			for w := half; w <= a; w += 2 { // w = 2v
				sign := 1.0
				if (t+(w-half)/2)%2 == 1 {
					sign = -1
				}
				c := sign * norm * math.Pow(0.25, float64(t)) *
					choose(l, t) * choose(l-t, a+t) * choose(t, u) * choose(a, w)
				x, y := 2*t+a-2*u-w, 2*u+w
				row[powerIndex(x, y, l)] += c
			}
		}
	}
	return row
}

// powerIndex returns the place of x^i y^j z^(l-i-j) in Powers(l).
func powerIndex(i, j, l int) int {
	k := l - i // y + z
	return k*(k+1)/2 + k - j
}

func factorial(n int) float64 {
	f := 1.0
	for ; n > 1; n-- {
		f *= float64(n)
	}
	return f
}

func choose(n, k int) float64 {
	if k < 0 || k > n {
		return 0
	}
	return factorial(n) / (factorial(k) * factorial(n-k))
}

// components returns the functions of a shell as rows over Powers(s.L).
func components(s *Shell) [][]float64 {
	if !s.Cartesian {
		return Harmonics(s.L)
	}
	n := len(Powers(s.L))
	rows := make([][]float64, n)
	for i := range rows {
		rows[i] = make([]float64, n)
		rows[i][i] = 1
	}
	return rows
}
