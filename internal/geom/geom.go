// Package geom is the geometry of points: distances, angles and dihedrals with
// their derivatives, rotations about a bond, and the best superposition.
//
// Coordinates are flat, 3N numbers, atom by atom, in whatever unit of length
// the caller uses; angles are in radians.
package geom

import "math"

// A vec is a point or an arrow in space.
type vec [3]float64

func at(x []float64, i int) vec { return vec{x[3*i], x[3*i+1], x[3*i+2]} }

func sub(a, b vec) vec { return vec{a[0] - b[0], a[1] - b[1], a[2] - b[2]} }

func dot(a, b vec) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }

func cross(a, b vec) vec {
	return vec{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}

func norm(a vec) float64 { return math.Sqrt(dot(a, a)) }

// addTo adds f times v to the three numbers of atom i.
func addTo(grad []float64, i int, f float64, v vec) {
	grad[3*i] += f * v[0]
	grad[3*i+1] += f * v[1]
	grad[3*i+2] += f * v[2]
}

// Distance returns |xi - xj|.
func Distance(x []float64, i, j int) float64 { return norm(sub(at(x, i), at(x, j))) }

// AddDistance adds f times the derivative of Distance to grad. It adds nothing
// where the two points coincide.
func AddDistance(grad, x []float64, i, j int, f float64) {
	d := sub(at(x, i), at(x, j))
	r := norm(d)
	if r == 0 {
		return
	}
	addTo(grad, i, f/r, d)
	addTo(grad, j, -f/r, d)
}

// SignedVolume returns (a-d).[(b-d)x(c-d)], six times the signed volume of the
// tetrahedron a, b, c, d. It is positive where, seen from a, the points b, c, d
// run anticlockwise.
func SignedVolume(x []float64, a, b, c, d int) float64 {
	o := at(x, d)
	return dot(sub(at(x, a), o), cross(sub(at(x, b), o), sub(at(x, c), o)))
}

// Centroid returns the mean of all points.
func Centroid(x []float64) [3]float64 {
	var c [3]float64
	for i := 0; i < len(x); i += 3 {
		c[0] += x[i]
		c[1] += x[i+1]
		c[2] += x[i+2]
	}
	if n := float64(len(x) / 3); n > 0 {
		c[0], c[1], c[2] = c[0]/n, c[1]/n, c[2]/n
	}
	return c
}
