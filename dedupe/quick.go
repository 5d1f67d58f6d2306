package dedupe

import "math"

// A cloud is the compared atoms of a shape about their centroid.
type cloud struct {
	x []float64 // 3 per compared atom, bohr
	g float64   // sum of squares
}

// newCloud moves the points x to their centroid, in place.
func newCloud(x []float64) cloud {
	var c [3]float64
	n := float64(max(1, len(x)/3))
	for i, v := range x {
		c[i%3] += v
	}
	k := cloud{x: x}
	for i := range x {
		x[i] -= c[i%3] / n
		k.g += x[i] * x[i]
	}
	return k
}

// distances returns the RMSD of a and the renumbered b, and of a and the mirror
// image of b, over all rotations.
//
// Source: D. L. Theobald, Acta Cryst. A 2005, 61, 478: the largest eigenvalue
// of Horn's matrix by Newton steps from above on its characteristic polynomial;
// for the mirror image only the linear term changes its sign.
func distances(a, b cloud, p []int) (same, mirrored float64) {
	n := len(p)
	if n == 0 {
		return 0, 0
	}
	var xx, xy, xz, yx, yy, yz, zx, zy, zz float64
	for k, q := range p {
		u, v := a.x[3*k:3*k+3:3*k+3], b.x[3*q:3*q+3:3*q+3]
		xx += u[0] * v[0]
		xy += u[0] * v[1]
		xz += u[0] * v[2]
		yx += u[1] * v[0]
		yy += u[1] * v[1]
		yz += u[1] * v[2]
		zx += u[2] * v[0]
		zy += u[2] * v[1]
		zz += u[2] * v[2]
	}
	c2 := -2 * (xx*xx + xy*xy + xz*xz + yx*yx + yy*yy + yz*yz + zx*zx + zy*zy + zz*zz)
	c1 := -8 * (xx*(yy*zz-yz*zy) - xy*(yx*zz-yz*zx) + xz*(yx*zy-yy*zx))
	c0 := hornDeterminant(xx, xy, xz, yx, yy, yz, zx, zy, zz)
	start := (a.g + b.g) / 2
	rms := func(c1 float64) float64 {
		return math.Sqrt(math.Max(0, a.g+b.g-2*newton(c2, c1, c0, start)) / float64(n))
	}
	return rms(c1), rms(-c1)
}

// newton finds the largest root of l^4 + c2 l^2 + c1 l + c0 from above, where
// the polynomial rises and is convex. Twofold roots, of flat shapes, halve the
// error with each step.
func newton(c2, c1, c0, l float64) float64 {
	for range 60 {
		l2 := l * l
		slope := 4*l2*l + 2*c2*l + c1
		if slope <= 0 {
			break
		}
		value := l2*l2 + c2*l2 + c1*l + c0
		if value <= 1e-14*l2*l2 {
			break // all that is left is noise, and of a twofold root so is the slope
		}
		d := value / slope
		if l -= d; math.Abs(d) <= 1e-12*math.Abs(l) {
			break
		}
	}
	return l
}

// hornDeterminant is the determinant of the 4x4 matrix of B. K. P. Horn, J. Opt.
// Soc. Am. A 1987, 4, 629, expanded by 2x2 minors of its upper and lower half.
func hornDeterminant(xx, xy, xz, yx, yy, yz, zx, zy, zz float64) float64 {
	a, b, c, d := xx+yy+zz, yz-zy, zx-xz, xy-yx
	e, f, g := xx-yy-zz, xy+yx, zx+xz
	h, i := yy-xx-zz, yz+zy
	j := zz - xx - yy
	// rows: (a b c d) (b e f g) (c f h i) (d g i j)
	return (a*e-b*b)*(h*j-i*i) - (a*f-c*b)*(f*j-i*g) + (a*g-d*b)*(f*i-h*g) +
		(b*f-c*e)*(c*j-i*d) - (b*g-d*e)*(c*i-h*d) + (c*g-d*f)*(c*g-f*d)
}
