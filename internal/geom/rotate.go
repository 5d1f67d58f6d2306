package geom

import "math"

// RotateAbout turns the points in moving about the line from j to k by angle,
// in place: clockwise looking along j-k, so that a dihedral i-j-k-l grows by
// angle where l moves and i does not. It does nothing where j and k coincide.
//
// Source: the formula of Rodrigues, v cos a + (n x v) sin a + n (n.v)(1 - cos a).
func RotateAbout(x []float64, j, k int, moving []int, angle float64) {
	o := at(x, k)
	n := sub(o, at(x, j))
	length := norm(n)
	if length == 0 {
		return
	}
	n = vec{n[0] / length, n[1] / length, n[2] / length}
	s, c := math.Sincos(angle)
	for _, m := range moving {
		v := sub(at(x, m), o)
		t := cross(n, v)
		along := dot(n, v) * (1 - c)
		for d := range 3 {
			x[3*m+d] = o[d] + v[d]*c + t[d]*s + n[d]*along
		}
	}
}
