package semiempirical

import (
	"fmt"

	"torsieve/internal/linalg"
	"torsieve/internal/scf"
)

// orbitals are the solutions of F C = S C e with their occupation. Both spins
// share them.
type orbitals struct {
	n           int
	solver      *linalg.Generalised
	work        linalg.Workspace
	energy      []float64 // hartree, ascending
	c           []float64 // row k is orbital k
	alpha, beta float64   // electrons of each spin
	kT          float64   // hartree

	occAlpha, occBeta []float64 // 0 to 1
	weights           []float64
	entropy           float64 // -T S, hartree
}

func newOrbitals(n int, alpha, beta, kT float64) *orbitals {
	return &orbitals{
		n: n, solver: linalg.NewGeneralised(n),
		energy: make([]float64, n), c: make([]float64, n*n),
		alpha: alpha, beta: beta, kT: kT,
		occAlpha: make([]float64, n), occBeta: make([]float64, n), weights: make([]float64, n),
	}
}

// overlap takes in the overlap matrix of a new geometry.
func (o *orbitals) overlap(s []float64) error {
	if err := o.solver.Factor(s); err != nil {
		return fmt.Errorf("%w (%w)", ErrSingular, err)
	}
	if o.solver.SmallestPivot() < smallestPivot {
		return ErrSingular
	}
	return nil
}

// smallestPivot is the least that a basis function may add to the others;
// below it rounding is enlarged to what would be seen in the energy.
const smallestPivot = 1e-7

// solve finds the orbitals of a Fock matrix and fills them.
func (o *orbitals) solve(f []float64) error {
	if err := o.solver.Solve(f, o.energy, o.c); err != nil {
		return err
	}
	scf.Occupy(o.occAlpha, o.energy, o.alpha, o.kT)
	o.entropy = scf.Entropy(o.occAlpha, o.kT)
	if o.alpha == o.beta {
		copy(o.occBeta, o.occAlpha)
		o.entropy *= 2
		return nil
	}
	scf.Occupy(o.occBeta, o.energy, o.beta, o.kT)
	o.entropy += scf.Entropy(o.occBeta, o.kT)
	return nil
}

// density writes the density matrix of both spins.
func (o *orbitals) density(p []float64) {
	for k := range o.weights {
		o.weights[k] = o.occAlpha[k] + o.occBeta[k]
	}
	o.work.WeightedOuter(p, o.c, o.weights, o.n)
}

// energyDensity writes the density matrix weighted with the orbital energies.
func (o *orbitals) energyDensity(w []float64) {
	for k := range o.weights {
		o.weights[k] = (o.occAlpha[k] + o.occBeta[k]) * o.energy[k]
	}
	o.work.WeightedOuter(w, o.c, o.weights, o.n)
}

// gap returns the energy in hartree between the highest orbital that holds an
// electron at 0 K and the next, and whether there are two such.
func (o *orbitals) gap() (gap float64, ok bool) {
	top := int(o.alpha + 0.5)
	if top < 1 || top >= o.n {
		return 0, false
	}
	return o.energy[top] - o.energy[top-1], true
}
