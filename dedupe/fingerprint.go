package dedupe

import (
	"math"

	"torsieve/internal/geom"
)

// A fingerprint holds the three singular values of the centred coordinates,
// divided by the root of the number of points, largest first. Moving, turning,
// mirroring and renumbering do not change it.
type fingerprint [3]float64

// fingerprintOf computes it from the eigenvalues of the 3x3 sum of products.
func fingerprintOf(x []float64) fingerprint {
	c := geom.Centroid(x)
	var xx, xy, xz, yy, yz, zz float64
	for i := 0; i < len(x); i += 3 {
		a, b, d := x[i]-c[0], x[i+1]-c[1], x[i+2]-c[2]
		xx += a * a
		xy += a * b
		xz += a * d
		yy += b * b
		yz += b * d
		zz += d * d
	}
	var f fingerprint
	for k, v := range eigenvalues(xx, xy, xz, yy, yz, zz) {
		f[k] = math.Sqrt(math.Max(0, v) / float64(max(1, len(x)/3)))
	}
	return f
}

// apart returns a proven lower bound of the RMSD of two shapes.
// Source: L. Mirsky, Q. J. Math. 1960, 11, 50: the singular values of two
// matrices differ by no more, in sum of squares, than the matrices do.
func (f fingerprint) apart(g fingerprint) float64 {
	var sum float64
	for k := range f {
		sum += (f[k] - g[k]) * (f[k] - g[k])
	}
	return math.Sqrt(sum)
}

// eigenvalues of a symmetric 3x3 matrix, largest first.
// Source: O. K. Smith, Commun. ACM 1961, 4, 168 (trigonometric solution).
func eigenvalues(xx, xy, xz, yy, yz, zz float64) [3]float64 {
	mean := (xx + yy + zz) / 3
	a, b, c := xx-mean, yy-mean, zz-mean
	p := (a*a + b*b + c*c + 2*(xy*xy+xz*xz+yz*yz)) / 6
	if p <= 1e-300 {
		return [3]float64{mean, mean, mean}
	}
	q := (a*(b*c-yz*yz) - xy*(xy*c-yz*xz) + xz*(xy*yz-b*xz)) / 2
	root := math.Sqrt(p)
	phi := math.Acos(math.Max(-1, math.Min(1, q/(p*root)))) / 3
	first := mean + 2*root*math.Cos(phi)
	last := mean + 2*root*math.Cos(phi+2*math.Pi/3)
	return [3]float64{first, 3*mean - first - last, last}
}
