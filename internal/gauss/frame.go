package gauss

import "math"

// A Frame is the bond's coordinate system: where its axes point, and how the
// harmonics up to d in it make up those of the molecule's axes.
type Frame struct {
	R float64 // length of the bond, bohr

	// axes[k] is local axis k (x, y, z) in the molecule's axes; z points from
	// the second atom to the first. So it is the column k of the turn of p
	// functions.
	axes [3][3]float64

	// d[k] is the local d harmonic k, in those of the molecule's axes.
	d [5][5]float64
}

// NewFrame returns the frame of a bond with the vector v, not zero, from the
// second atom to the first, in bohr. The two axes across the bond are chosen
// by a fixed rule; no result depends on it beyond rounding.
func NewFrame(v [3]float64) Frame {
	var f Frame
	f.R = math.Sqrt(v[0]*v[0] + v[1]*v[1] + v[2]*v[2])
	z := [3]float64{v[0] / f.R, v[1] / f.R, v[2] / f.R}
	least := 0
	for k := 1; k < 3; k++ {
		if math.Abs(z[k]) < math.Abs(z[least]) {
			least = k
		}
	}
	var e [3]float64
	e[least] = 1
	x := cross(e, z)
	norm := math.Sqrt(x[0]*x[0] + x[1]*x[1] + x[2]*x[2])
	for k := range x {
		x[k] /= norm
	}
	f.axes = [3][3]float64{x, cross(z, x), z}
	f.turnD()
	return f
}

// turnD fills the columns of the turn of d functions. A harmonic is the
// symmetric tensor of QuadrupoleTensor between two vectors; turning its local
// axes turns the tensor.
func (f *Frame) turnD() {
	x, y, z := &f.axes[0], &f.axes[1], &f.axes[2]
	f.d[0] = product(x, y)
	f.d[1] = product(y, z)
	f.d[2] = [5]float64{sqrt3 * z[0] * z[1], sqrt3 * z[1] * z[2], 1.5*z[2]*z[2] - 0.5, sqrt3 * z[0] * z[2], sqrt3 / 2 * (z[0]*z[0] - z[1]*z[1])}
	f.d[3] = product(x, z)
	f.d[4] = [5]float64{
		x[0]*x[1] - y[0]*y[1],
		x[1]*x[2] - y[1]*y[2],
		sqrt3 / 2 * (x[2]*x[2] - y[2]*y[2]),
		x[0]*x[2] - y[0]*y[2],
		(x[0]*x[0] - x[1]*x[1] - y[0]*y[0] + y[1]*y[1]) / 2,
	}
}

// product is the harmonic sqrt3 (r.u)(r.v) of two unit vectors at right
// angles, in the harmonics of the molecule's axes.
func product(u, v *[3]float64) [5]float64 {
	return [5]float64{
		u[0]*v[1] + u[1]*v[0],
		u[1]*v[2] + u[2]*v[1],
		sqrt3 * u[2] * v[2],
		u[0]*v[2] + u[2]*v[0],
		u[0]*v[0] - u[1]*v[1],
	}
}

func cross(a, b [3]float64) [3]float64 {
	return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}

// QuadrupoleTensor holds the tensors C with harmonic m = sum_kl C[m][k][l] x_k
// x_l. They are orthogonal with norm 3/2, so that a traceless tensor T with
// components t_m = (2/3) C[m]:T is sum_m t_m C[m], and (3/2) times the
// traceless part of x_k x_l is sum_m harmonic_m C[m].
var QuadrupoleTensor = [5][3][3]float64{
	{{0, sqrt3 / 2, 0}, {sqrt3 / 2, 0, 0}, {0, 0, 0}},
	{{0, 0, 0}, {0, 0, sqrt3 / 2}, {0, sqrt3 / 2, 0}},
	{{-0.5, 0, 0}, {0, -0.5, 0}, {0, 0, 1}},
	{{0, 0, sqrt3 / 2}, {0, 0, 0}, {sqrt3 / 2, 0, 0}},
	{{sqrt3 / 2, 0, 0}, {0, -sqrt3 / 2, 0}, {0, 0, 0}},
}

// generator is element (to, from) of the rate at which functions of l turn
// about an axis: harmonic from becomes, per radian, this much of harmonic to.
func generator(l, axis, to, from int) float64 {
	switch l {
	case 0:
		return 0
	case 1:
		return spin(axis, to, from)
	}
	return spinD[axis][to][from]
}

// spinD is the generator for d harmonics: (2/3) C[to] : (G C[from] + C[from] G^T).
var spinD = func() (spins [3][5][5]float64) {
	for axis := range 3 {
		for to := range 5 {
			for from := range 5 {
				var sum float64
				for i := range 3 {
					for j := range 3 {
						for k := range 3 {
							sum += QuadrupoleTensor[to][i][j] *
								(spin(axis, i, k)*QuadrupoleTensor[from][k][j] + QuadrupoleTensor[from][i][k]*spin(axis, j, k))
						}
					}
				}
				spins[axis][to][from] = sum / 1.5
			}
		}
	}
	return spins
}()

// spin is the generator of turns of vectors: axis cross e_from, component to.
func spin(axis, to, from int) float64 {
	switch {
	case from == (axis+1)%3 && to == (axis+2)%3:
		return 1
	case from == (axis+2)%3 && to == (axis+1)%3:
		return -1
	}
	return 0
}
