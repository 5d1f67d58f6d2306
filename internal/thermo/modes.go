package thermo

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/floats"

	"torsieve/internal/linalg"
)

// Modes are the normal vibrations of a molecule.
type Modes struct {
	Body Body // the molecule as a rigid rotor

	// Quanta h c nu in hartree, rising: imaginary ones, which are negative,
	// first. There are 3N-6, 3N-5 of a linear molecule, none of an atom.
	Quanta []float64

	// Vectors has one row of 3N for each quantum: unit vectors in mass-weighted
	// coordinates.
	Vectors []float64

	// Rigid are the quanta that translations (three) and rotations would have
	// as vibrations, hartree: 0 at a minimum, but for noise, anharmonicity over
	// the step and, in a solvent, the surface's own preference for an orientation.
	// They were taken out before, and touch nothing.
	Rigid []float64

	masses []float64
}

// NormalModes returns the vibrations for a Hessian (3N*3N, hartree/bohr^2,
// symmetric; not changed) at x (3N, bohr) with masses (N, electron masses).
// Translations and infinitesimal rotations are projected out.
//
// Errors: numbers that are not finite, and atoms all at one point. Panics where
// the lengths do not fit.
//
// Source: E. B. Wilson, J. C. Decius, P. C. Cross, Molecular Vibrations (1955),
// chapter 2; the projection as in W. H. Miller, N. C. Handy, J. E. Adams,
// J. Chem. Phys. 1980, 72, 99, without the reaction path.
func NormalModes(hessian, x, masses []float64) (Modes, error) {
	n := len(x)
	if len(hessian) != n*n {
		panic(fmt.Sprintf("thermo: Hessian of %d numbers for %d coordinates", len(hessian), n))
	}
	f, err := newFrame(x, masses)
	if err != nil {
		return Modes{}, err
	}
	m := Modes{Body: f.body, masses: slices.Clone(masses)}
	a := weighted(hessian, masses)
	motions := f.rigid(x, masses)
	for _, v := range motions {
		m.Rigid = append(m.Rigid, signedRoot(project(a, v)))
	}
	// Out of the way: above all vibrations.
	shift := 2 * largestRow(a, n)
	for _, v := range motions {
		addOuter(a, v, shift)
	}
	w := make([]float64, n)
	if err := linalg.NewEigen(n).Solve(a, w, a); err != nil {
		return Modes{}, fmt.Errorf("thermo: normal modes: %w", err)
	}
	vibrations := n - len(motions)
	for _, lambda := range w[:vibrations] {
		m.Quanta = append(m.Quanta, signedRoot(lambda))
	}
	m.Vectors = a[:vibrations*n]
	return m, nil
}

// Motion returns the Cartesian displacement (3N) of mode k, in which the atom
// that moves furthest moves by 1. Its sign is arbitrary.
func (m *Modes) Motion(k int) []float64 {
	n := 3 * len(m.masses)
	d := slices.Clone(m.Vectors[k*n : k*n+n])
	var most float64
	for i, mass := range m.masses {
		r := d[3*i : 3*i+3]
		floats.Scale(1/math.Sqrt(mass), r)
		most = math.Max(most, floats.Norm(r, 2))
	}
	floats.Scale(1/most, d)
	return d
}

// weighted returns H_ij / sqrt(m_i m_j), hartree^2 with hbar = 1.
func weighted(hessian, masses []float64) []float64 {
	n := 3 * len(masses)
	a := make([]float64, n*n)
	for i := range n {
		for j := range n {
			a[i*n+j] = hessian[i*n+j] / math.Sqrt(masses[i/3]*masses[j/3])
		}
	}
	return a
}

// project takes the unit vector v out of the symmetric matrix, (1-vv')a(1-vv'),
// and returns v'av.
func project(a, v []float64) float64 {
	n := len(v)
	u := make([]float64, n)
	for i := range n {
		u[i] = floats.Dot(a[i*n:i*n+n], v)
	}
	curvature := floats.Dot(u, v)
	for i := range n {
		row := a[i*n : i*n+n]
		floats.AddScaled(row, -v[i], u)
		floats.AddScaled(row, curvature*v[i]-u[i], v)
	}
	return curvature
}

// addOuter adds f times vv' to the matrix.
func addOuter(a, v []float64, f float64) {
	n := len(v)
	for i := range n {
		floats.AddScaled(a[i*n:i*n+n], f*v[i], v)
	}
}

// largestRow bounds the eigenvalues: the largest sum of magnitudes in a row.
func largestRow(a []float64, n int) float64 {
	var most float64
	for i := range n {
		most = math.Max(most, floats.Norm(a[i*n:i*n+n], 1))
	}
	return most
}

// signedRoot is the quantum that belongs to a curvature; that of a negative one
// is imaginary and written as a negative number.
func signedRoot(lambda float64) float64 {
	return math.Copysign(math.Sqrt(math.Abs(lambda)), lambda)
}
