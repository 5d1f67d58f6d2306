package semiempirical

import (
	"math"

	"gonum.org/v1/gonum/blas/gonum"
)

// A coulomb is the isotropic electrostatics of shell charges, 1/2 sum q_i q_j
// gamma_ij with gamma = (R^2 + eta^-2)^(-1/2), eta the mean of the two shells'
// hardnesses (J. Chem. Theory Comput. 2019, 15, 1652, eqs. 20-22).
type coulomb struct {
	atomShell []int
	hardness  []float64 // of each shell
	gamma     []float64 // shells x shells
	field     []float64 // gamma times charges
}

var _ contribution = (*coulomb)(nil)

func newCoulomb(b *basis) *coulomb {
	n := len(b.shells)
	c := &coulomb{atomShell: b.atomShell, gamma: make([]float64, n*n), field: make([]float64, n)}
	for i, s := range b.shells {
		c.hardness = append(c.hardness, b.elements[b.shellAtom[i]].Hardness*(1+s.Kappa))
	}
	for a := range b.atoms() {
		for i := c.atomShell[a]; i < c.atomShell[a+1]; i++ {
			for j := c.atomShell[a]; j < c.atomShell[a+1]; j++ {
				c.gamma[i*n+j] = (c.hardness[i] + c.hardness[j]) / 2
			}
		}
	}
	return c
}

func (*coulomb) name() string { return "second-order electrostatics" }

func (c *coulomb) update(g *geometry) {
	n, k := len(c.hardness), 0
	for a := range len(c.atomShell) - 1 {
		for b := range a {
			r2 := g.r[k] * g.r[k]
			for i := c.atomShell[a]; i < c.atomShell[a+1]; i++ {
				for j := c.atomShell[b]; j < c.atomShell[b+1]; j++ {
					softness := 2 / (c.hardness[i] + c.hardness[j])
					gamma := 1 / math.Sqrt(r2+softness*softness)
					c.gamma[i*n+j], c.gamma[j*n+i] = gamma, gamma
				}
			}
			k++
		}
	}
}

func (c *coulomb) energy(m *moments, v *potential) float64 {
	n := len(c.hardness)
	var lin gonum.Implementation
	lin.Dgemv(noTrans, n, n, 1, c.gamma, n, m.shell, 1, 0, c.field, 1)
	var sum float64
	for i, f := range c.field {
		v.shell[i] += f
		sum += f * m.shell[i]
	}
	return sum / 2
}

// addGradient adds the gradient at fixed charges; d gamma/dR = -gamma^3 R.
func (c *coulomb) addGradient(g *geometry, m *moments, grad []float64) {
	n, k := len(c.hardness), 0
	for a := range len(c.atomShell) - 1 {
		for b := range a {
			var f float64
			for i := c.atomShell[a]; i < c.atomShell[a+1]; i++ {
				for j := c.atomShell[b]; j < c.atomShell[b+1]; j++ {
					gamma := c.gamma[i*n+j]
					f -= m.shell[i] * m.shell[j] * gamma * gamma * gamma
				}
			}
			addPair(grad, a, b, f, g.v[k])
			k++
		}
	}
}

func dot(x, y []float64) float64 {
	var sum float64
	y = y[:len(x)]
	for i, v := range x {
		sum += v * y[i]
	}
	return sum
}
