package semiempirical

import "torsieve/internal/dispersion"

// A d4 is the pairwise D4 dispersion, whose coefficients follow the charges of
// the atoms. The three-body term, which does not, is asked for apart.
type d4 struct {
	model *dispersion.D4
}

var _ contribution = d4{}

func (d4) name() string { return "two-body dispersion" }

func (d d4) update(g *geometry) { d.model.Update(g.x) }

func (d d4) energy(m *moments, v *potential) float64 {
	return d.model.EnergyPotential(m.atom, v.atom)
}
