package gauss

import "math"

// Normalise writes into dst the coefficients of Shell.Coefs for a published
// contraction: coefs refer to normalised primitives with exponents exps
// (1/bohr^2), and the contraction as a whole is brought to unit norm, which
// several published sets are not. dst may be coefs.
//
// The norm is that of the component x^l, so a Cartesian d shell has
// <xx|xx> = 1 and <xy|xy> = 1/3. Panics if the lengths differ.
//
// Source: T. Helgaker, P. Jorgensen, J. Olsen, Molecular Electronic-Structure
// Theory (Wiley 2000), section 6.6 (norms of Gaussians).
func Normalise(dst []float64, l int, exps, coefs []float64) {
	if len(dst) != len(coefs) || len(exps) != len(coefs) {
		panic("gauss: exponents and coefficients differ in length")
	}
	for k, a := range exps {
		dst[k] = coefs[k] * primitiveNorm(a, l)
	}
	s := 0.0
	for k, a := range exps {
		for m, b := range exps {
			s += dst[k] * dst[m] * selfOverlap(a+b, l)
		}
	}
	s = 1 / math.Sqrt(s)
	for k := range dst {
		dst[k] *= s
	}
}

// primitiveNorm returns N with <N x^l exp(-a r^2)|same> = 1.
func primitiveNorm(a float64, l int) float64 {
	return 1 / math.Sqrt(selfOverlap(2*a, l))
}

// selfOverlap returns the integral of x^2l exp(-p r^2) over all space.
func selfOverlap(p float64, l int) float64 {
	return doubleFactorial(2*l-1) * math.Pow(math.Pi, 1.5) / (math.Pow(2, float64(l)) * math.Pow(p, float64(l)+1.5))
}

// doubleFactorial returns n!!, with (-1)!! = 1.
func doubleFactorial(n int) float64 {
	f := 1.0
	for ; n > 1; n -= 2 {
		f *= float64(n)
	}
	return f
}
