package geom

import "math"

// A Superposition is the rigid motion that lays one set of points onto another
// with the smallest root-mean-square distance. It never mirrors.
type Superposition struct {
	Rotation [9]float64 // rows of a proper rotation
	From, To [3]float64 // centroid of the points moved, and where it goes
	RMSD     float64    // in the unit of the coordinates
}

// Align returns the motion that lays x onto onto, point by point. Panics if
// they differ in length.
//
// Source: the largest eigenvalue of the 4x4 matrix of Horn, J. Opt. Soc. Am. A
// 1987, 4, 629 (also S. K. Kearsley, Acta Cryst. A 1989, 45, 208); its
// eigenvector is the rotation as a quaternion.
func Align(onto, x []float64) Superposition {
	s := Superposition{From: Centroid(x), To: Centroid(onto)}
	m, _, _ := correlation(onto, x, s.To, s.From)
	_, q := largest(horn(m))
	s.Rotation = rotation(q)
	s.RMSD = s.distance(onto, x)
	return s
}

// Apply moves the points x in place.
func (s Superposition) Apply(x []float64) {
	for i := 0; i < len(x); i += 3 {
		p := s.move(vec{x[i], x[i+1], x[i+2]})
		x[i], x[i+1], x[i+2] = p[0], p[1], p[2]
	}
}

func (s Superposition) move(p vec) vec {
	p = sub(p, s.From)
	r := &s.Rotation
	return vec{
		r[0]*p[0] + r[1]*p[1] + r[2]*p[2] + s.To[0],
		r[3]*p[0] + r[4]*p[1] + r[5]*p[2] + s.To[1],
		r[6]*p[0] + r[7]*p[1] + r[8]*p[2] + s.To[2],
	}
}

// distance is the RMSD of the moved x, summed point by point: the closed form
// (G - 2 lambda) loses half of the digits for nearly equal shapes.
func (s Superposition) distance(onto, x []float64) float64 {
	if len(x) == 0 {
		return 0
	}
	var sum float64
	for i := 0; i < len(x); i += 3 {
		d := sub(s.move(vec{x[i], x[i+1], x[i+2]}), vec{onto[i], onto[i+1], onto[i+2]})
		sum += dot(d, d)
	}
	return math.Sqrt(sum / float64(len(x)/3))
}

// RMSD returns the smallest root-mean-square distance of two sets of points
// over proper rigid motions, and the smallest for the mirror image of b, both
// from one pass over the points. Both are good to about 1e-8 of the size of
// the set. Panics if the sets differ in length.
func RMSD(a, b []float64) (same, mirrored float64) {
	if len(a) == 0 {
		return 0, 0
	}
	m, ga, gb := correlation(a, b, Centroid(a), Centroid(b))
	// Inverting b through its centroid changes the sign of all of m, and with
	// it of all eigenvalues: the largest of the mirror image is minus the
	// smallest of this one.
	low, high := extremes(horn(m))
	n := float64(len(a) / 3)
	rms := func(lambda float64) float64 { return math.Sqrt(math.Max(0, ga+gb-2*lambda) / n) }
	return rms(high), rms(-low)
}

// correlation returns sum (a - ca)(b - cb)^T by rows, and the sums of squares
// of the centred sets.
func correlation(a, b []float64, ca, cb vec) (m [9]float64, ga, gb float64) {
	if len(a) != len(b) {
		panic("geom: sets of points differ in length")
	}
	for i := 0; i < len(a); i += 3 {
		p0, p1, p2 := a[i]-ca[0], a[i+1]-ca[1], a[i+2]-ca[2]
		q0, q1, q2 := b[i]-cb[0], b[i+1]-cb[1], b[i+2]-cb[2]
		ga += p0*p0 + p1*p1 + p2*p2
		gb += q0*q0 + q1*q1 + q2*q2
		m[0] += p0 * q0
		m[1] += p0 * q1
		m[2] += p0 * q2
		m[3] += p1 * q0
		m[4] += p1 * q1
		m[5] += p1 * q2
		m[6] += p2 * q0
		m[7] += p2 * q1
		m[8] += p2 * q2
	}
	return m, ga, gb
}

// horn builds the symmetric matrix whose quadratic form in a unit quaternion q
// is sum a.(R(q) b), from m = sum a b^T.
func horn(m [9]float64) [4][4]float64 {
	xx, xy, xz := m[0], m[3], m[6]
	yx, yy, yz := m[1], m[4], m[7]
	zx, zy, zz := m[2], m[5], m[8]
	return [4][4]float64{
		{xx + yy + zz, yz - zy, zx - xz, xy - yx},
		{yz - zy, xx - yy - zz, xy + yx, zx + xz},
		{zx - xz, xy + yx, yy - xx - zz, yz + zy},
		{xy - yx, zx + xz, yz + zy, zz - xx - yy},
	}
}

// rotation turns a unit quaternion into the rows of a rotation.
func rotation(q [4]float64) [9]float64 {
	w, x, y, z := q[0], q[1], q[2], q[3]
	return [9]float64{
		w*w + x*x - y*y - z*z, 2 * (x*y - w*z), 2 * (x*z + w*y),
		2 * (x*y + w*z), w*w - x*x + y*y - z*z, 2 * (y*z - w*x),
		2 * (x*z - w*y), 2 * (y*z + w*x), w*w - x*x - y*y + z*z,
	}
}
