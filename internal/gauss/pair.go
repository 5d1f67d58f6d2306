package gauss

import "math"

// A primitive is the product of one primitive of each shell of a pair.
type primitive struct {
	p       float64 // sum of exponents, 1/bohr^2
	x, y, z float64 // centre P, bohr
	c       float64 // d_a d_b exp(-mu AB^2) sqrt2 pi^(5/4) / p
	h       float64 // 1/(2p)
	s       float64 // b/p, so that P-A = -s AB and P-B = (1-s) AB
	mu      float64 // exponent of the second shell; for kinetic energies
}

// pairCut is the size of c under which a primitive product is dropped for
// good. It lies far below what any total could notice.
const pairCut = 1e-16

var pairFactor = math.Sqrt2 * math.Pow(math.Pi, 1.25)

// appendPrimitives appends the products of the primitives of a and b, at x
// (3N, bohr), to dst.
func appendPrimitives(dst []primitive, a, b *Shell, x []float64) []primitive {
	ax, bx := x[3*a.Atom:][:3], x[3*b.Atom:][:3]
	dx, dy, dz := ax[0]-bx[0], ax[1]-bx[1], ax[2]-bx[2]
	r2 := dx*dx + dy*dy + dz*dz
	for i, ea := range a.Exps {
		for j, eb := range b.Exps {
			p := ea + eb
			c := a.Coefs[i] * b.Coefs[j] * math.Exp(-ea*eb/p*r2) * pairFactor / p
			if math.Abs(c) < pairCut {
				continue
			}
			s := eb / p
			dst = append(dst, primitive{p: p, c: c, h: 0.5 / p, s: s, mu: eb,
				x: ax[0] - s*dx, y: ax[1] - s*dy, z: ax[2] - s*dz})
		}
	}
	return dst
}

// A hermiteMaker expands the charge cloud of a pair of shells in Hermite
// Gaussians. It holds scratch memory for one goroutine.
type hermiteMaker struct {
	e    [3][]float64
	cart []float64
	half []float64
}

// expand writes the matrix E of one primitive product into dst: a row for each
// pair of functions (second shell fastest), a column for each Hermite Gaussian
// up to degree la+lb. Every element carries the factor c.
func (m *hermiteMaker) expand(dst []float64, a, b *Shell, ab [3]float64, q *primitive) {
	la, lb := a.L, b.L
	n, nh := la+lb+1, hermiteCount(la+lb)
	for k := range m.e {
		m.e[k] = grow(m.e[k], (la+1)*(lb+1)*n)
		hermiteTable(m.e[k], la, lb, q.p, -q.s*ab[k], (1-q.s)*ab[k])
	}
	pa, pb := Powers(la), Powers(lb)
	m.cart = grow(m.cart, len(pa)*len(pb)*nh)
	clear(m.cart)
	for i, u := range pa {
		for j, v := range pb {
			row := m.cart[(i*len(pb)+j)*nh:][:nh]
			ex := m.e[0][(u.X*(lb+1)+v.X)*n:]
			ey := m.e[1][(u.Y*(lb+1)+v.Y)*n:]
			ez := m.e[2][(u.Z*(lb+1)+v.Z)*n:]
			for tx := range u.X + v.X + 1 {
				for ty := range u.Y + v.Y + 1 {
					for tz := range u.Z + v.Z + 1 {
						row[hermiteIndex(tx, ty, tz)] = q.c * ex[tx] * ey[ty] * ez[tz]
					}
				}
			}
		}
	}
	m.toFunctions(dst, a, b, nh)
}

// toFunctions turns the rows of m.cart, over monomials, into rows over the
// functions of both shells.
func (m *hermiteMaker) toFunctions(dst []float64, a, b *Shell, nh int) {
	ca, cb := components(a), components(b)
	na, nb, mb := len(ca), len(cb), len(Powers(b.L))
	m.half = grow(m.half, na*mb*nh)
	clear(m.half)
	for i, row := range ca {
		for k, c := range row {
			if c != 0 {
				addScaled(m.half[i*mb*nh:][:mb*nh], c, m.cart[k*mb*nh:])
			}
		}
	}
	clear(dst[:na*nb*nh])
	for i := range na {
		for j, row := range cb {
			for k, c := range row {
				if c != 0 {
					addScaled(dst[(i*nb+j)*nh:][:nh], c, m.half[(i*mb+k)*nh:])
				}
			}
		}
	}
}

// addScaled adds c times the beginning of src to dst.
func addScaled(dst []float64, c float64, src []float64) {
	src = src[:len(dst)]
	for i, v := range src {
		dst[i] += c * v
	}
}

// grow returns a slice of length n, the old one where it is long enough.
func grow(s []float64, n int) []float64 {
	if cap(s) < n {
		return make([]float64, n)
	}
	return s[:n]
}
