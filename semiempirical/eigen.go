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

	s        []float64 // overlap matrix of the geometry
	factored bool      // solver knows it

	near   *subspace // for Fock matrices close to the one that was solved last; nil where spins differ
	solved bool      // near may be used
	isNear bool      // near, not c, holds the occupied orbitals
}

func newOrbitals(n int, alpha, beta, kT float64) *orbitals {
	o := &orbitals{
		n: n, solver: linalg.NewGeneralised(n),
		energy: make([]float64, n), c: make([]float64, n*n),
		alpha: alpha, beta: beta, kT: kT,
		occAlpha: make([]float64, n), occBeta: make([]float64, n), weights: make([]float64, n),
	}
	if occ := int(alpha); alpha == beta && occ < n && n >= followFrom {
		o.near = newSubspace(n, occ)
	}
	return o
}

// followFrom is the number of functions from which on following the occupied
// orbitals costs less than a solution from the start.
const followFrom = 64

// overlap takes in the overlap matrix of a new geometry, which must stay as it
// is until the next. warm says that the geometry is close to the last, so that
// the occupied orbitals may be followed from there.
func (o *orbitals) overlap(s []float64, warm bool) error {
	o.s, o.factored = s, false
	if warm && o.solved && o.near.carry(o, s) {
		return nil
	}
	o.solved = false
	return o.factor()
}

// factor prepares for full solutions, once a geometry.
func (o *orbitals) factor() error {
	if o.factored {
		return nil
	}
	if err := o.solver.Factor(o.s); err != nil {
		return fmt.Errorf("%w (%w)", ErrSingular, err)
	}
	if o.solver.SmallestPivot() < smallestPivot {
		return ErrSingular
	}
	o.factored = true
	return nil
}

// smallestPivot is the least that a basis function may add to the others;
// below it rounding is enlarged to what would be seen in the energy.
const smallestPivot = 1e-7

// solve finds the orbitals of a Fock matrix and fills them. Where a closed
// shell with a gap was solved before at this geometry, only the occupied space
// is followed, to within tol (0: never); then energy and c are still those of the
// last full solution.
func (o *orbitals) solve(f []float64, tol float64) error {
	if o.solved && tol > 0 {
		if steps, ok := o.near.solve(o, f, tol); ok {
			o.isNear = true
			o.entropy = 0
			o.solved = steps < tiresome
			return nil
		}
	}
	if err := o.factor(); err != nil {
		return err
	}
	if err := o.solver.Solve(f, o.energy, o.c); err != nil {
		return err
	}
	o.fill()
	o.isNear = false
	if o.solved = o.near != nil; o.solved {
		o.near.start()
	}
	return nil
}

// tiresome is the number of steps from which on a full solution is due in the
// next cycle.
const tiresome = 5

// fill occupies the orbitals.
func (o *orbitals) fill() {
	scf.Occupy(o.occAlpha, o.energy, o.alpha, o.kT)
	o.entropy = scf.Entropy(o.occAlpha, o.kT)
	if o.alpha == o.beta {
		copy(o.occBeta, o.occAlpha)
		o.entropy *= 2
		return
	}
	scf.Occupy(o.occBeta, o.energy, o.beta, o.kT)
	o.entropy += scf.Entropy(o.occBeta, o.kT)
}

// density writes the density matrix of both spins.
func (o *orbitals) density(p []float64) {
	if o.isNear {
		weights := o.weights[:o.near.occupied]
		for k := range weights {
			weights[k] = 2
		}
		o.work.WeightedOuter(p, o.near.c, weights, o.n)
		return
	}
	for k := range o.weights {
		o.weights[k] = o.occAlpha[k] + o.occBeta[k]
	}
	o.work.WeightedOuter(p, o.c, o.weights, o.n)
}

// energyDensity writes the density matrix weighted with the orbital energies
// of the Fock matrix f, which was solved last.
func (o *orbitals) energyDensity(w, f []float64) {
	if o.isNear {
		o.near.energyDensity(o, w, f)
		return
	}
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
	if o.isNear {
		filled, empty := edges(o.near.level, o.near.occupied)
		return empty - filled, true
	}
	return o.energy[top] - o.energy[top-1], true
}
