package geom

import "math"

// Angle returns the angle i-j-k at j, 0 to pi. It stays accurate near 0 and pi,
// where the arc cosine would lose half of the digits.
func Angle(x []float64, i, j, k int) float64 {
	u, v := sub(at(x, i), at(x, j)), sub(at(x, k), at(x, j))
	return math.Atan2(norm(cross(u, v)), dot(u, v))
}

// AddAngle adds f times the derivative of Angle to grad. It adds nothing where
// the three points lie on a line: the derivative has no direction there.
func AddAngle(grad, x []float64, i, j, k int, f float64) {
	u, v := sub(at(x, i), at(x, j)), sub(at(x, k), at(x, j))
	n := cross(u, v)
	s := norm(n)
	if s < 1e-12*(dot(u, u)+dot(v, v)) {
		return
	}
	// Turning u about n by dt moves i by (n/|n|) x u dt, which opens the angle
	// when dt is negative.
	gi, gk := cross(u, n), cross(n, v)
	fi, fk := f/(s*dot(u, u)), f/(s*dot(v, v))
	addTo(grad, i, fi, gi)
	addTo(grad, k, fk, gk)
	addTo(grad, j, -fi, gi)
	addTo(grad, j, -fk, gk)
}

// Dihedral returns the dihedral angle i-j-k-l in (-pi, pi]: positive where,
// looking along j-k, the front bond is turned clockwise onto the rear one
// (IUPAC). It is 0 where three of the points lie on a line.
func Dihedral(x []float64, i, j, k, l int) float64 {
	f, g, h := sub(at(x, i), at(x, j)), sub(at(x, j), at(x, k)), sub(at(x, l), at(x, k))
	a, b := cross(f, g), cross(h, g)
	return math.Atan2(dot(cross(b, a), g), norm(g)*dot(a, b))
}

// AddDihedral adds c times the derivative of Dihedral to grad. It adds nothing
// where three of the points lie on a line: the angle is undefined there.
// Source: A. Blondel, M. Karplus, J. Comput. Chem. 1996, 17, 1132.
func AddDihedral(grad, x []float64, i, j, k, l int, c float64) {
	f, g, h := sub(at(x, i), at(x, j)), sub(at(x, j), at(x, k)), sub(at(x, l), at(x, k))
	a, b := cross(f, g), cross(h, g)
	aa, bb, gg := dot(a, a), dot(b, b), dot(g, g)
	if aa < 1e-24*gg*dot(f, f) || bb < 1e-24*gg*dot(h, h) {
		return
	}
	gl := math.Sqrt(gg)
	pa, pb := c*dot(f, g)/(aa*gl), c*dot(h, g)/(bb*gl)
	addTo(grad, i, -c*gl/aa, a)
	addTo(grad, j, c*gl/aa+pa, a)
	addTo(grad, j, -pb, b)
	addTo(grad, k, -pa, a)
	addTo(grad, k, pb-c*gl/bb, b)
	addTo(grad, l, c*gl/bb, b)
}
