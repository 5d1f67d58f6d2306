package forcefield

// A term is one sum of the force field over a list of number-only entries.
//
// addTo returns the term's energy in hartree and, where grad is not nil, adds
// dE/dx in hartree/bohr into it. x and grad hold 3N numbers, atom by atom. A
// term holds no scratch memory: one value serves many goroutines.
type term interface {
	name() string // the key in the energy breakdown
	addTo(grad, x []float64) float64
}

// A vec is an arrow in space.
type vec = [3]float64

// arrow returns xi - xj.
func arrow(x []float64, i, j int32) vec {
	a, b := x[3*i:3*i+3:3*i+3], x[3*j:3*j+3:3*j+3]
	return vec{a[0] - b[0], a[1] - b[1], a[2] - b[2]}
}

func dot(a, b vec) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }

func cross(a, b vec) vec {
	return vec{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}

// combine returns p a + q b.
func combine(p float64, a vec, q float64, b vec) vec {
	return vec{p*a[0] + q*b[0], p*a[1] + q*b[1], p*a[2] + q*b[2]}
}

// push adds f v to the gradient of atom i.
func push(grad []float64, i int32, f float64, v vec) {
	g := grad[3*i : 3*i+3 : 3*i+3]
	g[0] += f * v[0]
	g[1] += f * v[1]
	g[2] += f * v[2]
}
