package semiempirical

import (
	"math"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/gonum"
)

const trans, noTrans = blas.Trans, blas.NoTrans

// An anisotropic is the electrostatics between atomic charges, dipoles and
// quadrupoles, damped at short range (J. Chem. Theory Comput. 2019, 15, 1652,
// eqs. 24-29). Radii of the damping follow the coordination number.
//
// With v the vector from b to a, a charge on a and a dipole on b have the
// energy f3 q v.mu, two dipoles f5 (R^2 mu.mu' - 3 v.mu v.mu'), a charge and a
// quadrupole f5 q v.Theta.v. At fixed places all that is bilinear in the
// moments, so it is kept as two matrices.
type anisotropic struct {
	elements []*element
	cn       *coordination
	radius   []float64 // bohr, of each atom
	slope    []float64 // d radius / d coordination number
	g        *geometry // of the last update
	f3, f5   []float64 // damping over R^3, of charge and dipole; over R^5, of the rest

	charged []float64 // N x 9N: charge a with dipole b, and with quadrupole b
	dipoles []float64 // 3N x 3N
	higher  []float64 // dipoles, and quadrupoles times packedCount
	field   []float64 // of the charges, where the higher moments are
}

var _ contribution = (*anisotropic)(nil)

const (
	radiusMax   = 5 // bohr
	radiusShift = 1.2
	radiusSteep = 4
)

func newAnisotropic(b *basis, cn *coordination) *anisotropic {
	n := b.atoms()
	pairs := n * (n - 1) / 2
	return &anisotropic{
		elements: b.elements, cn: cn,
		radius: make([]float64, n), slope: make([]float64, n),
		f3: make([]float64, pairs), f5: make([]float64, pairs),
		charged: make([]float64, 9*n*n), dipoles: make([]float64, 9*n*n),
		higher: make([]float64, 9*n), field: make([]float64, 9*n),
	}
}

func (*anisotropic) name() string { return "anisotropic electrostatics" }

func (p *anisotropic) update(g *geometry) {
	p.g = g
	for a, e := range p.elements {
		t := math.Exp(-radiusSteep * (p.cn.numbers[a] - e.MultipoleCN - radiusShift))
		p.radius[a] = e.MultipoleRadius + (radiusMax-e.MultipoleRadius)/(1+t)
		// t/(1+t)^2, without overflow
		p.slope[a] = radiusSteep * (radiusMax - e.MultipoleRadius) / ((1 + t) * (1 + 1/t))
	}
	k := 0
	for a := range p.radius {
		for b := range a {
			r := g.r[k]
			d3, d5 := p.damping(a, b, r)
			p.f3[k] = d3 / (r * r * r)
			p.f5[k] = d5 / (r * r * r * r * r)
			p.couple(a, b, k)
			k++
		}
	}
}

// couple fills the matrices for a pair.
func (p *anisotropic) couple(a, b, k int) {
	n := len(p.radius)
	v, f3, f5 := &p.g.v[k], p.f3[k], p.f5[k]
	ab, ba := p.charged[9*n*a:9*n*(a+1)], p.charged[9*n*b:9*n*(b+1)]
	for i := range 3 {
		ab[3*b+i], ba[3*a+i] = f3*v[i], -f3*v[i]
	}
	square := p.g.r[k] * p.g.r[k]
	outer := [6]float64{f5 * v[0] * v[0], f5 * v[0] * v[1], f5 * v[1] * v[1], f5 * v[0] * v[2], f5 * v[1] * v[2], f5 * v[2] * v[2]}
	copy(ab[3*n+6*b:], outer[:])
	copy(ba[3*n+6*a:], outer[:])
	for i := range 3 {
		for j := range 3 {
			c := -3 * f5 * v[i] * v[j]
			if i == j {
				c += f5 * square
			}
			p.dipoles[3*n*(3*a+i)+3*b+j] = c
			p.dipoles[3*n*(3*b+j)+3*a+i] = c
		}
	}
}

// damping returns the factors of charge-dipole terms and of the others.
func (p *anisotropic) damping(a, b int, r float64) (d3, d5 float64) {
	x := (p.radius[a] + p.radius[b]) / (2 * r)
	x3 := x * x * x
	return 1 / (1 + 6*x3), 1 / (1 + 6*x3*x)
}

func (p *anisotropic) energy(m *moments, v *potential) float64 {
	n := len(p.radius)
	copy(p.higher, m.dipole)
	for i, t := range m.quadrupole {
		p.higher[3*n+i] = packedCount[i%6] * t
	}
	var lin gonum.Implementation
	lin.Dgemv(trans, n, 9*n, 1, p.charged, 9*n, m.atom, 1, 0, p.field, 1)
	energy := dot(p.field, p.higher)
	for i, f := range p.field[3*n:] {
		v.quadrupole[i] += f
	}
	lin.Dgemv(noTrans, n, 9*n, 1, p.charged, 9*n, p.higher, 1, 1, v.atom, 1)
	mutual := p.field[3*n : 6*n]
	lin.Dgemv(noTrans, 3*n, 3*n, 1, p.dipoles, 3*n, m.dipole, 1, 0, mutual, 1)
	for i, f := range mutual {
		v.dipole[i] += p.field[i] + f
		energy += f * m.dipole[i] / 2
	}
	return energy
}

// packedCount is how often each element of a packed tensor (xx, xy, yy, xz,
// yz, zz) stands in the full one.
var packedCount = [6]float64{1, 2, 1, 2, 2, 1}
