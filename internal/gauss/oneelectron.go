package gauss

import "math"

// Offsets returns the number of the first function of each shell, and at the
// end the number of all functions.
func Offsets(shells []Shell) []int {
	off := make([]int, len(shells)+1)
	for i := range shells {
		off[i+1] = off[i] + shells[i].Size()
	}
	return off
}

// OneElectron holds the integrals over all pairs of functions, each an n by n
// symmetric matrix, row by row.
type OneElectron struct {
	Overlap, Kinetic []float64
	Dipole           [3][]float64 // <a|x|b> about the origin, bohr
}

// NewOneElectron returns the overlap, kinetic-energy (hartree) and dipole
// integrals of the shells with atoms at x (3N, bohr).
//
// Source: McMurchie, Davidson 1978; Helgaker, Jorgensen, Olsen, Molecular
// Electronic-Structure Theory (Wiley 2000), sections 9.3 and 9.5.
func NewOneElectron(shells []Shell, x []float64) *OneElectron {
	off := Offsets(shells)
	n := off[len(shells)]
	o := &OneElectron{Overlap: make([]float64, n*n), Kinetic: make([]float64, n*n)}
	for k := range o.Dipole {
		o.Dipole[k] = make([]float64, n*n)
	}
	var m moments
	for i := range shells {
		for j := range i + 1 {
			a, b := &shells[i], &shells[j]
			m.pair(a, b, x)
			for k, dst := range [...][]float64{o.Overlap, o.Kinetic, o.Dipole[0], o.Dipole[1], o.Dipole[2]} {
				m.place(dst, k, a, b, off[i], off[j], n)
			}
		}
	}
	return o
}

// moments computes one pair of shells: overlap, kinetic energy and the three
// dipole components over monomials.
type moments struct {
	e     [3][]float64
	prims []primitive
	cart  [5][]float64
	maker hermiteMaker
	block []float64
}

func (m *moments) pair(a, b *Shell, x []float64) {
	pa, pb := Powers(a.L), Powers(b.L)
	for k := range m.cart {
		m.cart[k] = grow(m.cart[k], len(pa)*len(pb))
		clear(m.cart[k])
	}
	var ab [3]float64
	for k := range ab {
		ab[k] = x[3*a.Atom+k] - x[3*b.Atom+k]
	}
	m.prims = appendPrimitives(m.prims[:0], a, b, x)
	for _, q := range m.prims {
		m.add(a.L, b.L, ab, &q)
	}
}

// add adds one primitive product. One-dimensional tables reach two powers
// further on b, because the kinetic energy raises them.
func (m *moments) add(la, lb int, ab [3]float64, q *primitive) {
	n, stride := la+lb+3, lb+3
	for k := range m.e {
		m.e[k] = grow(m.e[k], (la+1)*stride*n)
		hermiteTable(m.e[k], la, lb+2, q.p, -q.s*ab[k], (1-q.s)*ab[k])
	}
	centre := [3]float64{q.x, q.y, q.z}
	f := q.c * q.p / pairFactor * math.Pow(math.Pi/q.p, 1.5)
	nb := len(Powers(lb))
	for i, u := range Powers(la) {
		for j, v := range Powers(lb) {
			ui, vi := [3]int{u.X, u.Y, u.Z}, [3]int{v.X, v.Y, v.Z}
			var s, t, d [3]float64 // overlap, kinetic, position in one dimension
			for k := range s {
				row := func(j int) []float64 { return m.e[k][(ui[k]*stride+j)*n:] }
				j := vi[k]
				s[k] = row(j)[0]
				d[k] = row(j)[1] + centre[k]*s[k]
				t[k] = -2*q.mu*q.mu*row(j + 2)[0] + q.mu*float64(2*j+1)*s[k]
				if j > 1 {
					t[k] -= 0.5 * float64(j*(j-1)) * row(j - 2)[0]
				}
			}
			at := i*nb + j
			m.cart[0][at] += f * s[0] * s[1] * s[2]
			m.cart[1][at] += f * (t[0]*s[1]*s[2] + s[0]*t[1]*s[2] + s[0]*s[1]*t[2])
			m.cart[2][at] += f * d[0] * s[1] * s[2]
			m.cart[3][at] += f * s[0] * d[1] * s[2]
			m.cart[4][at] += f * s[0] * s[1] * d[2]
		}
	}
}

// place turns operator k into functions and writes it to both triangles.
func (m *moments) place(dst []float64, k int, a, b *Shell, i0, j0, n int) {
	m.maker.cart = append(m.maker.cart[:0], m.cart[k]...)
	m.block = grow(m.block, a.Size()*b.Size())
	m.maker.toFunctions(m.block, a, b, 1)
	spread(dst, m.block, i0, j0, a.Size(), b.Size(), n)
}

// spread writes a block of na by nb to both triangles of an n by n matrix.
func spread(dst, block []float64, i0, j0, na, nb, n int) {
	for i := range na {
		for j := range nb {
			v := block[i*nb+j]
			dst[(i0+i)*n+j0+j] = v
			dst[(j0+j)*n+i0+i] = v
		}
	}
}
