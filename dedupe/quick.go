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

// newton finds the largest root of l^4 + c2 l^2 + c1 l + c0 from above, where
// the polynomial rises and is convex. Twofold roots, of flat shapes, halve the
// error with each step. Below floor it stops: the root is lower still.
func newton(c2, c1, c0, l, floor float64) float64 {
	for range 60 {
		if l < floor {
			break
		}
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
