package relax

import (
	"math"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/gonum"
	lapack "gonum.org/v1/gonum/lapack/gonum"

	"torsieve/internal/geom"
)

// A model is the factorised model Hessian at the start of a minimisation:
// stretches, bends and torsions whose strength depends on the distances alone,
// so that no bonds need be known.
//
// Source: R. Lindh, A. Bernhardsson, G. Karlstrom, P.-A. Malmqvist, Chem. Phys.
// Lett. 1995, 241, 423 (constants from memory; the torsion's is doubled, which
// saved a tenth of the steps in the force field). A minimum does not depend on
// them, only the way there.
type model struct {
	n      int       // coordinates
	factor []float64 // n*n, lower triangle of Cholesky
	rho    []float64 // N*N, strength of each pair
	near   [][]int   // partners with a rho that counts for bends and torsions
	b      []float64 // n, derivative of one internal coordinate
	usable bool
}

const (
	stretchConstant = 0.45  // hartree/bohr^2
	bendConstant    = 0.15  // hartree/rad^2
	torsionConstant = 0.01  // hartree/rad^2
	rhoPair         = 1e-4  // least strength of a stretch
	rhoBond         = 0.08  // least strength of a bond in bends and torsions
	shift           = 0.008 // hartree/bohr^2, keeps free directions bounded
)

// Exponents (bohr^-2) and reference lengths (bohr) by the rows of the periodic
// table: hydrogen and helium, lithium to neon, all others.
var (
	lindhAlpha  = [3][3]float64{{1, 0.3949, 0.3949}, {0.3949, 0.28, 0.28}, {0.3949, 0.28, 0.28}}
	lindhLength = [3][3]float64{{1.35, 2.1, 2.53}, {2.1, 2.87, 3.4}, {2.53, 3.4, 3.4}}
)

func lindhRow(number int) int {
	switch {
	case number <= 2:
		return 0
	case number <= 10:
		return 1
	}
	return 2
}

// lindhStrength is rho for atoms of two numbers at a distance: 1 at the
// reference length, and bounded where atoms clash.
func lindhStrength(za, zb int, r float64) float64 {
	a, b := lindhRow(za), lindhRow(zb)
	r0 := lindhLength[a][b]
	return math.Exp(lindhAlpha[a][b] * math.Min(0.5, r0*r0-r*r))
}

func (m *model) ready() bool { return m != nil && m.usable }

// prepareModel builds the model at x, or drops it where numbers is nil or it
// cannot be factorised.
func (m *Minimiser) prepareModel(x []float64, numbers []int) {
	if numbers == nil {
		m.model = nil
		return
	}
	if m.model == nil {
		n := len(x)
		m.model = &model{n: n, factor: make([]float64, n*n), rho: make([]float64, len(numbers)*len(numbers)),
			near: make([][]int, len(numbers)), b: make([]float64, n)}
	}
	m.model.build(x, numbers)
}

func (m *model) build(x []float64, numbers []int) {
	clear(m.factor)
	for i := range m.n {
		m.factor[i*m.n+i] = shift
	}
	m.strengths(x, numbers)
	m.stretches(x)
	m.bends(x)
	m.torsions(x)
	m.usable = lapack.Implementation{}.Dpotrf(blas.Lower, m.n, m.factor, m.n)
}

// strengths fills rho and near.
func (m *model) strengths(x []float64, numbers []int) {
	n := len(numbers)
	for i := range m.near {
		m.near[i] = m.near[i][:0]
	}
	for i := range n {
		for j := range i {
			rho := lindhStrength(numbers[i], numbers[j], geom.Distance(x, i, j))
			m.rho[i*n+j], m.rho[j*n+i] = rho, rho
			if rho > rhoBond {
				m.near[i] = append(m.near[i], j)
				m.near[j] = append(m.near[j], i)
			}
		}
	}
}

func (m *model) stretches(x []float64) {
	n := len(m.near)
	for i := range n {
		for j := range i {
			if rho := m.rho[i*n+j]; rho > rhoPair {
				geom.AddDistance(m.b, x, i, j, 1)
				m.add(stretchConstant*rho, i, j)
			}
		}
	}
}

func (m *model) bends(x []float64) {
	n := len(m.near)
	for j, near := range m.near {
		for a, i := range near {
			for _, k := range near[:a] {
				c := bendConstant * m.rho[i*n+j] * m.rho[j*n+k]
				if math.Sin(geom.Angle(x, i, j, k)) < 0.1 {
					m.linearBend(c, x, i, j, k)
					continue
				}
				geom.AddAngle(m.b, x, i, j, k, 1)
				m.add(c, i, j, k)
			}
		}
	}
}

// linearBend adds both bends of a straight angle, whose plane is not defined.
func (m *model) linearBend(c float64, x []float64, i, j, k int) {
	var axis [3]float64
	for d := range 3 {
		axis[d] = x[3*k+d] - x[3*i+d]
	}
	ri, rk := geom.Distance(x, i, j), geom.Distance(x, j, k)
	first, second := perpendicular(axis)
	for _, e := range [2][3]float64{first, second} {
		for d := range 3 {
			m.b[3*i+d], m.b[3*k+d] = e[d]/ri, e[d]/rk
			m.b[3*j+d] = -e[d]/ri - e[d]/rk
		}
		m.add(c, i, j, k)
	}
}

// perpendicular returns two unit arrows at right angles to v and to each other.
func perpendicular(v [3]float64) (a, b [3]float64) {
	small := 0
	for d := range 3 {
		if math.Abs(v[d]) < math.Abs(v[small]) {
			small = d
		}
	}
	var e [3]float64
	e[small] = 1
	a = unitCross(v, e)
	return a, unitCross(v, a)
}

func unitCross(v, w [3]float64) [3]float64 {
	c := [3]float64{v[1]*w[2] - v[2]*w[1], v[2]*w[0] - v[0]*w[2], v[0]*w[1] - v[1]*w[0]}
	l := math.Sqrt(c[0]*c[0] + c[1]*c[1] + c[2]*c[2])
	if l == 0 {
		return c
	}
	return [3]float64{c[0] / l, c[1] / l, c[2] / l}
}

func (m *model) torsions(x []float64) {
	n := len(m.near)
	for k := range m.near {
		for _, j := range m.near[k] {
			if j > k {
				continue
			}
			for _, i := range m.near[j] {
				for _, l := range m.near[k] {
					if i == k || l == j || i == l || straight(x, i, j, k) || straight(x, j, k, l) {
						continue
					}
					geom.AddDihedral(m.b, x, i, j, k, l, 1)
					m.add(torsionConstant*m.rho[i*n+j]*m.rho[j*n+k]*m.rho[k*n+l], i, j, k, l)
				}
			}
		}
	}
}

// straight reports an angle too straight, or too sharp, for a dihedral to mean much.
func straight(x []float64, i, j, k int) bool { return math.Sin(geom.Angle(x, i, j, k)) < 0.2 }

// add adds c times b b^T to the lower triangle and clears b, which is not zero
// at the given atoms only.
func (m *model) add(c float64, atoms ...int) {
	for _, p := range atoms {
		for _, q := range atoms {
			if q > p {
				continue
			}
			for a := 3 * p; a < 3*p+3; a++ {
				f := c * m.b[a]
				row := m.factor[a*m.n:]
				for b := 3 * q; b < 3*q+3; b++ {
					row[b] += f * m.b[b]
				}
			}
		}
	}
	for _, p := range atoms {
		m.b[3*p], m.b[3*p+1], m.b[3*p+2] = 0, 0, 0
	}
}

// solve replaces d by the inverse of the model times d.
func (m *model) solve(d []float64) {
	var impl gonum.Implementation
	impl.Dtrsv(blas.Lower, blas.NoTrans, blas.NonUnit, m.n, m.factor, m.n, d, 1)
	impl.Dtrsv(blas.Lower, blas.Trans, blas.NonUnit, m.n, m.factor, m.n, d, 1)
}
