package embed

import "math"

// A Volume asks the signed volume (p0-p3).[(p1-p3)x(p2-p3)] to lie within
// Low..High, bohr^3.
type Volume struct {
	P         [4]int
	Low, High float64
}

// weights of the parts of the error function in one stage.
type weights struct {
	chiral, planar float64
	fourth         float64 // of the square of the fourth coordinates
}

// volumeUnit makes volumes comparable with the dimensionless distance errors:
// the volume of a tetrahedral carbon with arms of 1.53 angstrom is 11 cubic
// angstrom, a cubic angstrom is 6.75 bohr^3.
const volumeUnit = 6.748

// fourthUnit is one angstrom squared, bohr^2.
const fourthUnit = 3.571

// An errorFunction measures how far coordinates are from what a Problem asks.
// It is dimensionless. Coordinates: 3n of space, then the n of the fourth
// dimension, filled up with zeros to a multiple of three.
//
// Source: the distance terms are those of T. F. Havel (Crippen, Havel 1988,
// section 6.4): (d^2/u^2 - 1)^2 above, (2 l^2/(l^2 + d^2) - 1)^2 below.
type errorFunction struct {
	n       int
	pairs   []pair
	chiral  []Volume
	planar  []Volume
	twist   []Volume
	weights weights
}

type pair struct {
	i, j   int
	l2, u2 float64 // squares; u2 is 0 where there is no upper bound
}

func newErrorFunction(p *Problem) *errorFunction {
	f := &errorFunction{n: p.Bounds.n, chiral: p.Chiral, planar: p.Planar, twist: p.Twist}
	for i := range f.n {
		for j := i + 1; j < f.n; j++ {
			l, u := p.Bounds.At(i, j)
			q := pair{i: i, j: j, l2: l * l, u2: u * u}
			if u >= Far/2 {
				q.u2 = 0
			}
			f.pairs = append(f.pairs, q)
		}
	}
	return f
}

// value returns the error and, where grad is not nil, adds its gradient.
func (f *errorFunction) value(grad, x []float64) float64 {
	sum := f.distances(grad, x)
	for _, v := range f.chiral {
		sum += v.penalty(grad, x, f.weights.chiral)
	}
	for _, v := range f.twist {
		sum += v.penalty(grad, x, f.weights.chiral)
	}
	if f.weights.planar > 0 {
		for _, v := range f.planar {
			sum += v.penalty(grad, x, f.weights.planar)
		}
	}
	k := f.weights.fourth / fourthUnit
	for i := 3 * f.n; i < 4*f.n; i++ {
		sum += k * x[i] * x[i]
		if grad != nil {
			grad[i] += 2 * k * x[i]
		}
	}
	return sum
}

func (f *errorFunction) distances(grad, x []float64) float64 {
	var sum float64
	w := x[3*f.n:]
	for k := range f.pairs {
		q := &f.pairs[k]
		i, j := 3*q.i, 3*q.j
		dx, dy, dz, dw := x[i]-x[j], x[i+1]-x[j+1], x[i+2]-x[j+2], w[q.i]-w[q.j]
		d2 := dx*dx + dy*dy + dz*dz + dw*dw
		var slope float64 // dE/d(d2)
		switch {
		case q.u2 > 0 && d2 > q.u2:
			e := d2/q.u2 - 1
			sum += e * e
			slope = 2 * e / q.u2
		case d2 < q.l2:
			s := q.l2 + d2
			e := 2*q.l2/s - 1
			sum += e * e
			slope = -4 * q.l2 * e / (s * s)
		default:
			continue
		}
		if grad == nil {
			continue
		}
		slope *= 2
		grad[i] += slope * dx
		grad[i+1] += slope * dy
		grad[i+2] += slope * dz
		grad[j] -= slope * dx
		grad[j+1] -= slope * dy
		grad[j+2] -= slope * dz
		grad[3*f.n+q.i] += slope * dw
		grad[3*f.n+q.j] -= slope * dw
	}
	return sum
}

// penalty is weight ((V - nearest allowed V)/volumeUnit)^2.
func (v *Volume) penalty(grad, x []float64, weight float64) float64 {
	a, b, c := v.arms(x)
	bc := cross(b, c)
	volume := dot(a, bc)
	off := volume - math.Max(v.Low, math.Min(v.High, volume))
	if off == 0 {
		return 0
	}
	if grad != nil {
		k := 2 * weight * off / (volumeUnit * volumeUnit)
		ca, ab := cross(c, a), cross(a, b)
		for d := range 3 {
			grad[3*v.P[0]+d] += k * bc[d]
			grad[3*v.P[1]+d] += k * ca[d]
			grad[3*v.P[2]+d] += k * ab[d]
			grad[3*v.P[3]+d] -= k * (bc[d] + ca[d] + ab[d])
		}
	}
	return weight * off * off / (volumeUnit * volumeUnit)
}

// at returns the volume at x.
func (v *Volume) at(x []float64) float64 {
	a, b, c := v.arms(x)
	return dot(a, cross(b, c))
}

func (v *Volume) arms(x []float64) (a, b, c [3]float64) {
	for d := range 3 {
		o := x[3*v.P[3]+d]
		a[d], b[d], c[d] = x[3*v.P[0]+d]-o, x[3*v.P[1]+d]-o, x[3*v.P[2]+d]-o
	}
	return a, b, c
}

func cross(a, b [3]float64) [3]float64 {
	return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}

func dot(a, b [3]float64) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }
