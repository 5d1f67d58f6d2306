package solvent

import "math"

// A shape is the molecule as an ellipsoid: the radius of the sphere that stands
// for it, from the tensor of inertia of the atoms' spheres, which have their
// volume for mass. A net charge is the more at home in the solvent the smaller
// that sphere.
//
// Source: G. Sigalov, A. Fenley, A. Onufriev, J. Chem. Phys. 2006, 124, 124902.
type shape struct {
	sphere []float64 // van der Waals radius, bohr
	volume float64   // sum of their cubes, bohr^3

	centre  [3]float64 // bohr
	inverse [6]float64 // of the tensor: xx, xy, yy, xz, yz, zz
	size    float64    // bohr
}

func newShape(sphere []float64) *shape {
	s := &shape{sphere: sphere}
	for _, r := range sphere {
		s.volume += r * r * r
	}
	return s
}

// update computes the size. The tensor is never singular: a solid sphere has
// an inertia of its own.
func (s *shape) update(x []float64) {
	s.centre = [3]float64{}
	for a, r := range s.sphere {
		for k := range s.centre {
			s.centre[k] += r * r * r / s.volume * x[3*a+k]
		}
	}
	var t [6]float64
	for a, r := range s.sphere {
		d, mass := s.fromCentre(x, a), r*r*r
		own := 0.4 * r * r
		xx, yy, zz := d[0]*d[0], d[1]*d[1], d[2]*d[2]
		t[0] += mass * (yy + zz + own)
		t[1] -= mass * d[0] * d[1]
		t[2] += mass * (xx + zz + own)
		t[3] -= mass * d[0] * d[2]
		t[4] -= mass * d[1] * d[2]
		t[5] += mass * (xx + yy + own)
	}
	determinant := s.invert(&t)
	s.size = math.Sqrt(math.Cbrt(determinant) / (0.4 * s.volume))
}

func (s *shape) fromCentre(x []float64, a int) [3]float64 {
	return [3]float64{x[3*a] - s.centre[0], x[3*a+1] - s.centre[1], x[3*a+2] - s.centre[2]}
}

// invert sets the inverse of a symmetric tensor and returns the determinant.
func (s *shape) invert(t *[6]float64) float64 {
	xx, xy, yy, xz, yz, zz := t[0], t[1], t[2], t[3], t[4], t[5]
	cofactor := [6]float64{
		yy*zz - yz*yz,
		xz*yz - xy*zz,
		xx*zz - xz*xz,
		xy*yz - xz*yy,
		xy*xz - xx*yz,
		xx*yy - xy*xy,
	}
	determinant := xx*cofactor[0] + xy*cofactor[1] + xz*cofactor[3]
	for i, c := range cofactor {
		s.inverse[i] = c / determinant
	}
	return determinant
}

// addGradient adds to grad scale times the gradient of the size's logarithm:
// d ln size = 1/6 tr(I^-1 dI).
func (s *shape) addGradient(scale float64, x, grad []float64) {
	i := &s.inverse
	trace := i[0] + i[2] + i[5]
	for a, r := range s.sphere {
		d, f := s.fromCentre(x, a), scale*r*r*r/3
		grad[3*a] += f * (trace*d[0] - i[0]*d[0] - i[1]*d[1] - i[3]*d[2])
		grad[3*a+1] += f * (trace*d[1] - i[1]*d[0] - i[2]*d[1] - i[4]*d[2])
		grad[3*a+2] += f * (trace*d[2] - i[3]*d[0] - i[4]*d[1] - i[5]*d[2])
	}
}
