package hf

import "math"

// slaterOverlap returns the overlap of two normalised s-type Slater functions
// of principal quantum numbers n, m (1 to 3) and exponents za, zb (1/bohr) at
// the distance r > 0 (bohr), and its derivative with respect to r.
//
// Source: R. S. Mulliken, C. A. Rieke, D. Orloff, H. Orloff, J. Chem. Phys.
// 1949, 17, 1248: the overlap in elliptic coordinates is a sum of products of
// the auxiliary integrals A and B.
func slaterOverlap(n, m int, za, zb, r float64) (s, slope float64) {
	p, t := 0.5*(za+zb)*r, 0.5*(za-zb)*r
	var a, b [8]float64
	slaterA(p, a[:n+m+2])
	slaterB(t, b[:n+m+2])
	sum, dsum := 0.0, 0.0
	powers := ellipticPowers(n, m)
	for k, c := range powers[:n+m+1] {
		l := n + m - k
		sum += c * a[k] * b[l]
		dsum -= c * (p*a[k+1]*b[l] + t*a[k]*b[l+1]) / r
	}
	order := float64(n + m + 1)
	prefactor := 0.5 * slaterNorm(n, za) * slaterNorm(m, zb) * math.Pow(0.5*r, order)
	s = prefactor * sum
	return s, order/r*s + prefactor*dsum
}

// slaterNorm normalises r^(n-1) exp(-z r), without the angular part.
func slaterNorm(n int, z float64) float64 {
	factorial := [4]float64{1, 2, 24, 720} // (2n)!
	return math.Pow(2*z, float64(n)+0.5) / math.Sqrt(factorial[n])
}

// ellipticPowers returns, for k = 0..n+m, the coefficient of x^k y^(n+m-k) in
// (x+y)^n (x-y)^m.
func ellipticPowers(n, m int) (c [7]float64) {
	c[0] = 1
	for i := range n + m {
		sign := 1.0
		if i >= n {
			sign = -1
		}
		for k := i + 1; k > 0; k-- { // times x + sign y
			c[k] = c[k-1] + sign*c[k]
		}
		c[0] *= sign
	}
	return c
}

// slaterA writes the integrals of x^k exp(-p x) from 1 to infinity.
func slaterA(p float64, a []float64) {
	e := math.Exp(-p)
	a[0] = e / p
	for k := 1; k < len(a); k++ {
		a[k] = (e + float64(k)*a[k-1]) / p
	}
}

// slaterB writes the integrals of y^l exp(-t y) from -1 to 1. The recursion
// cancels for small t; there the terms of the exponential series are
// integrated, all of which have one sign.
func slaterB(t float64, b []float64) {
	if math.Abs(t) < 4 {
		for l := range b {
			b[l] = slaterBSeries(l, t)
		}
		return
	}
	up, down := math.Exp(t), math.Exp(-t)
	b[0] = (up - down) / t
	for l := 1; l < len(b); l++ {
		up = -up
		b[l] = (up - down + float64(l)*b[l-1]) / t
	}
}

func slaterBSeries(l int, t float64) float64 {
	term, i := 1.0, 0 // (-t)^i / i!
	if l%2 == 1 {
		term, i = -t, 1
	}
	sum := 0.0
	for {
		add := 2 * term / float64(l+i+1)
		sum += add
		if math.Abs(add) <= 1e-17*math.Abs(sum) {
			return sum
		}
		term *= t * t / float64((i+1)*(i+2))
		i += 2
	}
}
