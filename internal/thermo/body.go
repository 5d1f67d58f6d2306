package thermo

import (
	"errors"
	"fmt"
	"math"

	"torsieve/internal/linalg"
)

// A Body is a molecule as a rigid rotor.
type Body struct {
	Mass    float64    // electron masses
	Moments [3]float64 // of inertia, rising, electron masses bohr^2; those about an axis that does not count are 0
	Axes    int        // that it can turn about: 3, 2 if it is linear, 0 for an atom
}

// straight is how far an atom may lie off the axis of a molecule that counts as
// linear, bohr: more than the noise of a relaxation bends a linear one, less
// than any bent molecule has.
const straight = 0.1

// errCoincide is about the data: no rotor can be made of it.
var errCoincide = errors.New("thermo: all atoms lie at one point")

// NewBody returns the rotor of the geometry x (3N, bohr) with masses (N,
// electron masses). Its error says that the atoms lie at one point, or that a
// number is not finite. Panics if there is no atom or the lengths do not fit.
func NewBody(x, masses []float64) (Body, error) {
	f, err := newFrame(x, masses)
	return f.body, err
}

// A frame is a body with its centre of mass and its principal axes.
type frame struct {
	body   Body
	centre [3]float64
	axes   [3][3]float64 // unit vectors, by rows, in the order of Moments
}

func newFrame(x, masses []float64) (frame, error) {
	if len(masses) == 0 || len(x) != 3*len(masses) {
		panic(fmt.Sprintf("thermo: %d coordinates, %d masses", len(x), len(masses)))
	}
	var f frame
	for i, m := range masses {
		f.body.Mass += m
		for k := range 3 {
			f.centre[k] += m * x[3*i+k]
		}
	}
	for k := range 3 {
		f.centre[k] /= f.body.Mass
	}
	if len(masses) == 1 {
		return f, nil
	}
	if err := f.turn(x, masses); err != nil {
		return frame{}, err
	}
	f.body.Axes = 3
	if f.offAxis(x) < straight {
		f.body.Axes, f.body.Moments[0] = 2, 0
	}
	if f.body.Moments[1] == 0 {
		return frame{}, errCoincide
	}
	return f, nil
}

// turn fills in the moments of inertia and the principal axes.
func (f *frame) turn(x, masses []float64) error {
	var inertia, axes [9]float64
	for i, m := range masses {
		r := f.arm(x, i)
		r2 := r[0]*r[0] + r[1]*r[1] + r[2]*r[2]
		for k := range 3 {
			inertia[3*k+k] += m * r2
			for l := range 3 {
				inertia[3*k+l] -= m * r[k] * r[l]
			}
		}
	}
	if err := linalg.NewEigen(3).Solve(inertia[:], f.body.Moments[:], axes[:]); err != nil {
		return fmt.Errorf("thermo: moments of inertia: %w", err)
	}
	for k := range 3 {
		f.body.Moments[k] = math.Max(0, f.body.Moments[k])
		f.axes[k] = [3]float64(axes[3*k : 3*k+3])
	}
	return nil
}

// arm is where atom i lies, seen from the centre of mass.
func (f *frame) arm(x []float64, i int) [3]float64 {
	return [3]float64{x[3*i] - f.centre[0], x[3*i+1] - f.centre[1], x[3*i+2] - f.centre[2]}
}

// offAxis is the largest distance of an atom from the axis of the smallest
// moment of inertia.
func (f *frame) offAxis(x []float64) float64 {
	var most float64
	for i := range len(x) / 3 {
		c := cross(f.arm(x, i), f.axes[0])
		most = math.Max(most, math.Sqrt(c[0]*c[0]+c[1]*c[1]+c[2]*c[2]))
	}
	return most
}

// rigid returns the motions of the body as a whole as orthonormal rows in
// mass-weighted coordinates: three translations and Axes rotations. Rotations
// about principal axes through the centre of mass are orthogonal as they stand.
func (f *frame) rigid(x, masses []float64) [][]float64 {
	var motions [][]float64
	for k := range 3 {
		v := make([]float64, len(x))
		for i, m := range masses {
			v[3*i+k] = math.Sqrt(m / f.body.Mass)
		}
		motions = append(motions, v)
	}
	for k := 3 - f.body.Axes; k < 3; k++ {
		v := make([]float64, len(x))
		for i, m := range masses {
			c := cross(f.axes[k], f.arm(x, i))
			for l := range 3 {
				v[3*i+l] = math.Sqrt(m/f.body.Moments[k]) * c[l]
			}
		}
		motions = append(motions, v)
	}
	return motions
}

func cross(a, b [3]float64) [3]float64 {
	return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}
