package solvent

import (
	"math"

	"gonum.org/v1/gonum/blas"
	blasgo "gonum.org/v1/gonum/blas/gonum"
)

// A reaction is the reaction field's energy, 1/2 sum q_i q_j J_ij with
// J_ij = kappa (1/f_ij + alpha/D), f the P16 kernel and D the shape's radius.
//
// Source: kernel of A. W. Lange, J. M. Herbert, J. Chem. Theory Comput. 2012,
// 8, 1999; kappa and alpha of G. Sigalov, A. Fenley, A. Onufriev, J. Chem.
// Phys. 2006, 124, 124902.
type reaction struct {
	zeta         float64
	kappa, alpha float64

	matrix []float64 // J, n x n, hartree/e^2
	field  []float64 // J times q
	dEdb   []float64 // derivative by the Born radii at the charges of slopes
}

func newReaction(n int, t *table, f *fit) *reaction {
	alpha := t.ShapeAlpha / f.Permittivity
	return &reaction{
		zeta: t.KernelZeta, alpha: alpha, kappa: (1/f.Permittivity - 1) / (1 + alpha),
		matrix: make([]float64, n*n), field: make([]float64, n), dEdb: make([]float64, n),
	}
}

// update fills in the matrix.
func (re *reaction) update(p *pairs, radius []float64, size float64) {
	shape, k := re.alpha/size, 0
	for i, a := range radius {
		for j, b := range radius[:i] {
			f, _, _ := re.kernel(p.r[k], math.Sqrt(a*b))
			jij := re.kappa * (1/f + shape)
			re.matrix[i*p.n+j], re.matrix[j*p.n+i] = jij, jij
			k++
		}
		re.matrix[i*p.n+i] = re.kappa * (1/a + shape)
	}
}

// kernel returns f = r + b (1 + zeta r/16b)^-16 and its derivatives by r and
// by b, the geometric mean of two Born radii.
func (re *reaction) kernel(r, b float64) (f, byR, byB float64) {
	w := 1 / (1 + re.zeta*r/(16*b))
	w16 := w * w
	w16 *= w16
	w16 *= w16
	w16 *= w16
	return r + b*w16, 1 - re.zeta*w16*w, w16 * (1 + re.zeta*r/b*w)
}

// energy returns the energy at the charges q and adds its derivative to v.
func (re *reaction) energy(q, v []float64) float64 {
	n := len(q)
	if n == 0 {
		return 0
	}
	blasgo.Implementation{}.Dgemv(blas.NoTrans, n, n, 1, re.matrix, n, q, 1, 0, re.field, 1)
	var sum float64
	for i, e := range re.field {
		v[i] += e
		sum += e * q[i]
	}
	return sum / 2
}

// slopes writes the derivatives of the energy by the distances and, into dEdb,
// by the Born radii.
func (re *reaction) slopes(p *pairs, radius, q, slope []float64) {
	clear(re.dEdb)
	k := 0
	for i, a := range radius {
		for j, other := range radius[:i] {
			b := math.Sqrt(a * other)
			f, byR, byB := re.kernel(p.r[k], b)
			dEdf := -re.kappa * q[i] * q[j] / (f * f)
			slope[k] = dEdf * byR
			half := 0.5 * dEdf * byB
			re.dEdb[i] += half * other / b
			re.dEdb[j] += half * a / b
			k++
		}
		re.dEdb[i] -= 0.5 * re.kappa * q[i] * q[i] / (a * a)
	}
}
