package gauss

import (
	"math"
	"sync"
)

// The Boys function F_n(t) = integral of x^2n exp(-t x^2) over 0..1 is the
// radial part of every Coulomb integral. It is interpolated on a grid by a
// Taylor series for the highest n, and falls to lower n by the recursion that
// is stable that way; beyond the grid the asymptotic form holds.
//
// Source: T. Helgaker, P. Jorgensen, J. Olsen, Molecular Electronic-Structure
// Theory (Wiley 2000), section 9.8.
const (
	boysMaxN  = 4*MaxL + 1 // highest n that Boys serves
	boysStep  = 1.0 / 16   // grid distance, an exact binary fraction
	boysTerms = 7          // terms of the Taylor series; error below 1e-15
	boysEnd   = 30 + boysMaxN
)

// boysTable holds F_n at the grid points, a row a point.
var boysTable = sync.OnceValue(func() []float64 {
	const row = boysMaxN + boysTerms
	points := int(boysEnd/boysStep) + 2
	table := make([]float64, points*row)
	for k := range points {
		boysSeries(table[k*row:(k+1)*row], float64(k)*boysStep)
	}
	return table
})

// boysSeries fills f with F_0..F_{len(f)-1} at t from the series of positive
// terms for the highest n, then downward.
func boysSeries(f []float64, t float64) {
	n := len(f) - 1
	term := 1 / float64(2*n+1)
	sum := term
	for k := 1; term > 1e-18*sum; k++ {
		term *= 2 * t / float64(2*(n+k)+1)
		sum += term
	}
	e := math.Exp(-t)
	f[n] = e * sum
	for ; n > 0; n-- {
		f[n-1] = (2*t*f[n] + e) / float64(2*n-1)
	}
}

// Boys writes F_0(t)..F_n(t) into f, len(f) == n+1, for t >= 0, to 1e-14
// absolute. Panics if n is above the table: a caller's mistake.
func Boys(f []float64, t float64) {
	n := len(f) - 1
	if n > boysMaxN {
		panic("gauss: Boys function of too high an order")
	}
	if t >= boysEnd {
		f[0] = 0.5 * math.Sqrt(math.Pi/t)
		for m := range n { // exp(-t) is below 1e-17 here
			f[m+1] = float64(2*m+1) * f[m] / (2 * t)
		}
		return
	}
	const row = boysMaxN + boysTerms
	k := int(t/boysStep + 0.5)
	d := float64(k)*boysStep - t
	g := boysTable()[k*row+n : k*row+n+boysTerms]
	s := g[boysTerms-1]
	for j := boysTerms - 2; j >= 0; j-- {
		s = g[j] + s*d/float64(j+1)
	}
	f[n] = s
	e := math.Exp(-t)
	for m := n; m > 0; m-- {
		f[m-1] = (2*t*f[m] + e) / float64(2*m-1)
	}
}
