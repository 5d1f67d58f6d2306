package gauss

import (
	"cmp"
	"math"
	"slices"
)

// A monomial is coef x^i y^j z^k.
type monomial struct {
	coef    float64
	i, j, k int
}

// axialHarmonics are the real solid harmonics of s, p and d shells, in the
// order of this package, scaled so that they share the norm of x^l.
var axialHarmonics = [3][][]monomial{
	{{{1, 0, 0, 0}}},
	{{{1, 1, 0, 0}}, {{1, 0, 1, 0}}, {{1, 0, 0, 1}}},
	{
		{{sqrt3, 1, 1, 0}},
		{{sqrt3, 0, 1, 1}},
		{{1, 0, 0, 2}, {-0.5, 2, 0, 0}, {-0.5, 0, 2, 0}},
		{{sqrt3, 1, 0, 1}},
		{{sqrt3 / 2, 2, 0, 0}, {-sqrt3 / 2, 0, 2, 0}},
	},
}

const sqrt3 = 1.7320508075688772935

// axialOperators are the nine operators of an AxialPair.
var axialOperators = slices.Concat(axialHarmonics[0], axialHarmonics[1], axialHarmonics[2])

// A primitivePair is one product of Gaussians, alpha on a and beta on b.
type primitivePair struct {
	alpha, beta, p, mu float64
	prefactor          float64 // both coefficients times (pi/p)^(3/2)
}

// primitivePairs lists the products of two shells by rising mu.
func primitivePairs(a, b *Shell) []primitivePair {
	var prims []primitivePair
	for i, alpha := range a.Exps {
		for j, beta := range b.Exps {
			p := alpha + beta
			prims = append(prims, primitivePair{alpha, beta, p, alpha * beta / p,
				a.Coefs[i] * b.Coefs[j] * math.Pow(math.Pi/p, 1.5)})
		}
	}
	slices.SortStableFunc(prims, func(s, t primitivePair) int { return cmp.Compare(s.mu, t.mu) })
	return prims
}

// axialPowers is the number of powers of R, 0 to 6 for two d functions and a
// quadrupole.
const axialPowers = 7

// axialPolynomials writes, for powers 0, 1, ... of R and for each primitive
// pair, the coefficient of R^power exp(-mu R^2) in <ha| ho |hb>, a standing at
// R on the z axis and b at the origin.
func axialPolynomials(poly [][]float64, prims []primitivePair, ha, ho, hb []monomial) {
	for t := range poly {
		clear(poly[t])
	}
	for k, pr := range prims {
		for _, ma := range ha {
			for _, mo := range ho {
				for _, mb := range hb {
					c := pr.prefactor * ma.coef * mo.coef * mb.coef *
						gaussMoment(ma.i+mo.i+mb.i, pr.p) * gaussMoment(ma.j+mo.j+mb.j, pr.p)
					addAxial(poly, k, c, pr, ma.k, mo.k+mb.k)
				}
			}
		}
	}
}

// addAxial adds c times the one-dimensional integral of (z-R)^a z^b along the
// bond, divided by its Gaussian prefactor: both powers are expanded about the
// centre alpha R/p of the product.
func addAxial(poly [][]float64, k int, c float64, pr primitivePair, a, b int) {
	if c == 0 {
		return
	}
	toA, toB := -pr.beta/pr.p, pr.alpha/pr.p // centre minus a, minus b, over R
	powerA := 1.0
	for u := a; u >= 0; u-- {
		power := powerA
		for v := b; v >= 0; v-- {
			if (u+v)%2 == 0 {
				poly[a-u+b-v][k] += c * pascal[a][u] * pascal[b][v] * power * gaussMoment(u+v, pr.p)
			}
			power *= toB
		}
		powerA *= toA
	}
}

// gaussMoment is the mean of x^n under exp(-p x^2): (n-1)!!/(2p)^(n/2).
func gaussMoment(n int, p float64) float64 {
	if n%2 == 1 {
		return 0
	}
	m := 1.0
	for k := n - 1; k > 0; k -= 2 {
		m *= float64(k) / (2 * p)
	}
	return m
}

// pascal[n][k] is n over k.
var pascal = [5][5]float64{{1}, {1, 1}, {1, 2, 1}, {1, 3, 3, 1}, {1, 4, 6, 4, 1}}
