// Package gradcheck compares analytic gradients with finite differences, for
// tests.
package gradcheck

import (
	"math"
	"testing"
)

// Run compares the gradient that f writes with central four-point differences
// of its energy at x, and fails where any component is off by more than tol
// relative to the largest component (or to 1 if that is smaller).
//
// f returns the energy in hartree and, where grad is not nil, adds its
// gradient in hartree/bohr; len(grad) == len(x). A gradient of zeros fails
// too: comparing 0 with 0 proves nothing, so choose a bent geometry.
func Run(t *testing.T, x []float64, step, tol float64, f func(x, grad []float64) float64) {
	t.Helper()
	grad := make([]float64, len(x))
	f(x, grad)
	numeric := make([]float64, len(x))
	var largest float64
	for i := range x {
		numeric[i] = derivative(x, i, step, f)
		largest = math.Max(largest, math.Abs(numeric[i]))
	}
	if largest < 10*tol {
		t.Fatalf("the gradient is flat here (largest %g): choose a bent geometry", largest)
	}
	for i := range x {
		if math.Abs(grad[i]-numeric[i]) > tol*math.Max(1, largest) {
			t.Errorf("component %d: analytic %.12g, numeric %.12g", i, grad[i], numeric[i])
		}
	}
}

// derivative is the four-point central difference, with an error of order
// step^4. Source: Abramowitz, Stegun, Handbook of Mathematical Functions
// (1964), eq. 25.3.6.
func derivative(x []float64, i int, step float64, f func(x, grad []float64) float64) float64 {
	x0 := x[i]
	at := func(k float64) float64 {
		x[i] = x0 + k*step
		return f(x, nil)
	}
	d := (8*(at(1)-at(-1)) - (at(2) - at(-2))) / (12 * step)
	x[i] = x0
	return d
}
