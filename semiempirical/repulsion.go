package semiempirical

import "math"

// A repulsion is the pairwise repulsion of the cores: Za Zb/R times
// exp(-sqrt(alpha_a alpha_b) R^k), k = 1 between H and He, 3/2 otherwise
// (J. Chem. Theory Comput. 2019, 15, 1652, eq. 9).
type repulsion struct {
	alpha, charge []float64 // of each pair
	linear        []bool    // k = 1
}

// repulsionCutoff in bohr: beyond it the terms are far below rounding.
const repulsionCutoff = 25

func newRepulsion(elements []*element) *repulsion {
	p := &repulsion{}
	for a, ea := range elements {
		for _, eb := range elements[:a] {
			p.alpha = append(p.alpha, math.Sqrt(ea.RepulsionAlpha*eb.RepulsionAlpha))
			p.charge = append(p.charge, ea.RepulsionCharge*eb.RepulsionCharge)
			p.linear = append(p.linear, ea.Z <= 2 && eb.Z <= 2)
		}
	}
	return p
}

// energy returns the energy and, where grad is not nil, adds its gradient.
func (p *repulsion) energy(g *geometry, grad []float64) float64 {
	var sum float64
	k := 0
	for a := range len(g.x) / 3 {
		for b := range a {
			if r := g.r[k]; r < repulsionCutoff {
				power, rk := 1.5, r*math.Sqrt(r)
				if p.linear[k] {
					power, rk = 1, r
				}
				e := p.charge[k] / r * math.Exp(-p.alpha[k]*rk)
				sum += e
				if grad != nil {
					addPair(grad, a, b, -(power*p.alpha[k]*rk+1)*e/(r*r), g.v[k])
				}
			}
			k++
		}
	}
	return sum
}
