package semiempirical

import (
	"math"

	"torsieve/internal/scf"
)

// A cycle is the self-consistency's step: moments in, moments out. It owns all
// memory that a cycle needs.
type cycle struct {
	geometry      *geometry
	hamiltonian   *hamiltonian
	contributions []contribution
	orbitals      *orbitals

	in, out       *moments
	potential     *potential // of the moments that went in; made the last Fock matrix
	unused        *potential // of those that came out
	atoms         []atomWeights
	fock, density []float64
	residual      []float64

	core  float64   // energy of the core Hamiltonian, hartree
	parts []float64 // energies of the contributions

	tolerance float64 // of the orbitals in the next cycle; 0: solve from the start
}

func newCycle(b *basis, g *geometry, h *hamiltonian, contributions []contribution, o *orbitals) *cycle {
	n := b.functions()
	c := &cycle{
		geometry: g, hamiltonian: h, contributions: contributions, orbitals: o,
		in: newMoments(b), out: newMoments(b), potential: newPotential(b), unused: newPotential(b),
		atoms: make([]atomWeights, b.atoms()),
		fock:  make([]float64, n*n), density: make([]float64, n*n),
		parts: make([]float64, len(contributions)),
	}
	c.residual = make([]float64, len(c.in.vec))
	return c
}

// step is the scf.Step. The energy is that of the density that comes out: all
// terms that depend on it.
func (c *cycle) step(in []float64) (scf.Output, error) {
	c.in.load(in)
	c.potential.clear()
	for _, part := range c.contributions {
		part.energy(c.in, c.potential)
	}
	c.hamiltonian.fock(c.fock, c.potential, c.atoms, c.geometry)
	if err := c.orbitals.solve(c.fock, c.tolerance); err != nil {
		return scf.Output{}, err
	}
	c.orbitals.density(c.density)
	c.core = c.hamiltonian.populate(c.out, c.density, c.geometry)
	energy := c.core + c.orbitals.entropy
	c.unused.clear()
	for i, part := range c.contributions {
		c.parts[i] = part.energy(c.out, c.unused)
		energy += c.parts[i]
	}
	var sum float64
	for i, v := range c.out.vec {
		c.residual[i] = v - c.in.vec[i]
		sum += c.residual[i] * c.residual[i]
	}
	c.setTolerance(math.Sqrt(sum / float64(len(c.residual))))
	return scf.Output{State: c.out.vec, Residual: c.residual, Energy: energy}, nil
}

// setTolerance chooses how exact the next cycle's orbitals are to be, by the
// residual (rms) of this one: so far below what the moments will still change
// that neither the mixing nor the result is touched.
func (c *cycle) setTolerance(residual float64) {
	c.tolerance = 0
	if residual < followBelow {
		c.tolerance = max(1e-3*residual, 1e-13)
	}
}

// followBelow is the residual below which the occupied orbitals are followed
// from cycle to cycle.
const followBelow = 0.1

// firstTolerance is for the first cycle that follows orbitals from another
// geometry, whose residual is not known yet.
const firstTolerance = 1e-6
