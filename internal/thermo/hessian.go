package thermo

import (
	"context"
	"fmt"
	"math"
	"slices"

	"torsieve/internal/relax"
)

// DefaultStep is by how much a coordinate is moved to either side, bohr. It was
// chosen by measurement with GFN2-xTB (package comment): below it the noise of a
// loose self-consistency and the roughness in a solvent grow, above it the
// anharmonicity.
const DefaultStep = 0.01

// Stationary is the gradient, root mean square of its components in hartree/bohr,
// to which a geometry is to be relaxed before its Hessian is taken: soft modes
// that are off their minimum are softer, or imaginary (package comment).
const Stationary = 1e-5

// A Hessian is the matrix of second derivatives of an energy, and what was seen
// on the way to it.
type Hessian struct {
	Matrix    []float64 // 3N*3N by rows, symmetric, hartree/bohr^2
	Energy    float64   // at the centre, hartree
	Gradient  float64   // root mean square of its components at the centre, hartree/bohr
	Gradients int       // evaluations of the surface: 6N+1

	// Asymmetry is the root mean square over i < j of (H_ij - H_ji)/2 before the
	// two were averaged. It is the error of an element of Matrix as far as the
	// errors of the two are independent: noise of the gradient over the step
	// always, the step's own error in part. hartree/bohr^2.
	Asymmetry float64
}

// Differences returns the Hessian of s at x (3N, bohr) from central differences
// of its gradient; step is in bohr, 0 stands for DefaultStep.
//
// The centre comes first, then for each coordinate in turn the point above and
// the one below it: a surface that starts from its last state goes from one
// neighbour to the next, and the result depends on s as it is handed over (reset
// it for the same bytes every time) and on nothing else. x is not changed.
//
// Errors: ctx's, and the surface's with the atom that was moved. Panics if x is
// not made of triples or the step is negative or not finite.
func Differences(ctx context.Context, s relax.Surface, x []float64, step float64) (Hessian, error) {
	if step == 0 {
		step = DefaultStep
	}
	if len(x)%3 != 0 || !(step > 0) || math.IsInf(step, 0) {
		panic(fmt.Sprintf("thermo: %d coordinates, step %g", len(x), step))
	}
	n := len(x)
	h := Hessian{Matrix: make([]float64, n*n), Gradients: 2*n + 1}
	at, below := slices.Clone(x), make([]float64, n)
	energy, err := s.Gradient(ctx, below, x)
	if err == nil {
		err = finite(energy, below)
	}
	if err != nil {
		return Hessian{}, fmt.Errorf("thermo: geometry as it stands: %w", err)
	}
	h.Energy, h.Gradient = energy, rms(below)
	for i := range n {
		row := h.Matrix[i*n : i*n+n]
		if err := displaced(ctx, s, row, at, i, step); err != nil {
			return Hessian{}, err
		}
		if err := displaced(ctx, s, below, at, i, -step); err != nil {
			return Hessian{}, err
		}
		for j := range row {
			row[j] = (row[j] - below[j]) / (2 * step)
		}
	}
	h.Asymmetry = symmetrise(h.Matrix, n)
	return h, nil
}

// displaced writes the gradient at x with coordinate i moved by step into grad,
// and leaves x as it was.
func displaced(ctx context.Context, s relax.Surface, grad, x []float64, i int, step float64) error {
	x0 := x[i]
	x[i] += step
	energy, err := s.Gradient(ctx, grad, x)
	x[i] = x0
	if err == nil {
		err = finite(energy, grad)
	}
	if err != nil {
		return fmt.Errorf("thermo: atom %d moved by %g bohr along %c: %w", i/3+1, step, "xyz"[i%3], err)
	}
	return nil
}

func finite(energy float64, grad []float64) error {
	poisoned := 0 * energy // NaN for NaN and infinity
	for _, g := range grad {
		poisoned += 0 * g
	}
	if poisoned != 0 {
		return relax.ErrExploded
	}
	return nil
}

// symmetrise averages the matrix with its transpose and returns the root mean
// square of half the differences.
func symmetrise(a []float64, n int) float64 {
	var sum float64
	for i := range n {
		for j := range i {
			half := (a[i*n+j] - a[j*n+i]) / 2
			sum += half * half
			mean := (a[i*n+j] + a[j*n+i]) / 2
			a[i*n+j], a[j*n+i] = mean, mean
		}
	}
	return math.Sqrt(sum / math.Max(1, float64(n*(n-1)/2)))
}

func rms(v []float64) float64 {
	var sum float64
	for _, x := range v {
		sum += x * x
	}
	return math.Sqrt(sum / math.Max(1, float64(len(v))))
}
