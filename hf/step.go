package hf

import (
	"context"
	"math"

	"torsieve/internal/linalg"
	"torsieve/internal/scf"
)

// A field is the self-consistent field problem of one molecule at one geometry:
// closed-shell (one set of orbitals, each occupied twice) or unrestricted (two
// sets). Its state, as internal/scf sees it, are the Fock matrices in an
// orthonormal basis, one spin after the other; the residual their commutators
// with the densities.
//
// Sources: C. C. J. Roothaan, Rev. Mod. Phys. 1951, 23, 69; J. A. Pople,
// R. K. Nesbet, J. Chem. Phys. 1954, 22, 571.
type field struct {
	ctx       context.Context
	engine    engine
	basis     *orthogonal
	core      []float64 // kinetic energy and nuclear attraction
	repulsion float64   // of the nuclei, hartree
	occupied  []int     // orbitals of each spin

	// How the next density is made; see converge.go.
	damping float64 // share of the old density
	shift   float64 // added to empty levels, hartree
	smear   float64 // temperature of the occupations, hartree; 0: the lowest levels are full

	// What the last step found.
	parts    electronic
	residual float64 // largest element of a commutator
	gap      float64 // between occupied and empty levels of the given state, hartree

	densities density
	projector [][]float64 // densities in the orthonormal basis
	started   bool        // there are densities
	coulomb   []float64
	exchange  [][]float64
	levels    []float64
	filled    []float64 // occupations of the levels, 0 to 1
	z, a      []float64
	matrix    []float64
	out       scf.Output
	eigen     *linalg.Eigen
	work      linalg.Workspace
	old       *mixture
}

// electronic holds the parts of the electronic energy, hartree.
type electronic struct {
	core, coulomb, exchange float64
}

func (e electronic) sum() float64 { return e.core + e.coulomb + e.exchange }

func newField(e engine, basis *orthogonal, core []float64, repulsion float64, occupied []int) *field {
	n, m := basis.n, basis.rows
	f := &field{engine: e, basis: basis, core: core, repulsion: repulsion, occupied: occupied}
	matrices := func(size int) (out [][]float64) {
		for range occupied {
			out = append(out, make([]float64, size))
		}
		return out
	}
	f.densities = density{each: 1, total: make([]float64, n*n), spins: matrices(n * n), factors: make([]factor, len(occupied))}
	if len(occupied) == 1 {
		f.densities.each = 2
	}
	f.exchange, f.projector = matrices(n*n), matrices(m*m)
	f.coulomb, f.matrix = make([]float64, n*n), make([]float64, n*n)
	f.levels, f.filled = make([]float64, m), make([]float64, m)
	f.z, f.a = make([]float64, m*m), make([]float64, m*m)
	f.out.State, f.out.Residual = make([]float64, m*m*len(occupied)), make([]float64, m*m*len(occupied))
	f.eigen = linalg.NewEigen(m)
	return f
}

// start makes the first state from the densities in f.densities.
func (f *field) start(ctx context.Context) ([]float64, error) {
	f.started, f.damping, f.shift, f.smear = false, 0, 0, 0
	f.ctx = ctx
	f.engine.forget()
	if err := f.build(); err != nil {
		return nil, err
	}
	return append([]float64(nil), f.out.State...), nil
}

// step is the scf.Step.
func (f *field) step(in []float64) (scf.Output, error) {
	if f.started && f.damping > 0 {
		f.keep()
	}
	if err := f.density(in); err != nil {
		return scf.Output{}, err
	}
	if err := f.build(); err != nil {
		return scf.Output{}, err
	}
	f.commutators()
	return f.out, nil
}

// density fills the lowest levels of the state.
func (f *field) density(in []float64) error {
	m := f.basis.rows
	f.gap = math.Inf(1)
	for s, occupied := range f.occupied {
		q := f.projector[s]
		copy(f.a, in[s*m*m:(s+1)*m*m])
		if f.started && f.shift > 0 && f.smear == 0 { // empty levels move up by the shift
			for i, v := range q {
				f.a[i] -= f.shift * v
			}
			for i := range m {
				f.a[i*m+i] += f.shift
			}
		}
		if err := f.eigen.Solve(f.a, f.levels, f.z); err != nil {
			return err
		}
		if occupied > 0 && occupied < m {
			f.gap = min(f.gap, f.levels[occupied]-f.levels[occupied-1])
		}
		f.fill(s, occupied)
	}
	f.started = true
	return nil
}

// fill makes the density of one spin from the levels and their orbitals f.z, in
// both bases.
func (f *field) fill(spin, electrons int) {
	n, m := f.basis.n, f.basis.rows
	rows := electrons
	if f.smear > 0 {
		scf.Occupy(f.filled, f.levels, float64(electrons), f.smear)
		for rows < m && f.filled[rows] > 1e-12 {
			rows++
		}
		for k, w := range f.filled[:rows] {
			root := math.Sqrt(w)
			for i := range m {
				f.z[k*m+i] *= root
			}
		}
	}
	c := &f.densities.factors[spin]
	c.rows, c.c = rows, resize(c.c, rows*n)
	f.basis.orbitals(c.c, f.z, rows)
	f.work.Gemm(true, false, n, n, rows, 1, c.c, n, c.c, n, 0, f.densities.spins[spin], n)
	f.work.Gemm(true, false, m, m, rows, 1, f.z, m, f.z, m, 0, f.projector[spin], m)
}

// build makes the Fock matrices and the energy of the densities.
func (f *field) build() error {
	m := f.basis.rows
	d := &f.densities
	d.sum()
	if err := f.engine.build(f.ctx, d, f.coulomb, f.exchange); err != nil {
		return err
	}
	f.mix()
	f.parts = electronic{core: inner(d.total, f.core), coulomb: 0.5 * inner(d.total, f.coulomb)}
	for s, k := range f.exchange {
		f.parts.exchange -= 0.5 * d.each * inner(d.spins[s], k)
		for i, h := range f.core {
			f.matrix[i] = h + f.coulomb[i] - k[i]
		}
		f.basis.transform(f.out.State[s*m*m:(s+1)*m*m], f.matrix)
	}
	f.out.Energy = f.repulsion + f.parts.sum()
	return nil
}

// sum makes the total of the spins.
func (d *density) sum() {
	clear(d.total)
	for _, p := range d.spins {
		for i, v := range p {
			d.total[i] += d.each * v
		}
	}
}

// commutators writes F P - P F of each spin into the residual.
func (f *field) commutators() {
	m := f.basis.rows
	f.residual = 0
	for s, q := range f.projector {
		f.work.Gemm(false, false, m, m, m, 1, f.out.State[s*m*m:(s+1)*m*m], m, q, m, 0, f.a, m)
		e := f.out.Residual[s*m*m : (s+1)*m*m]
		for i := range m {
			e[i*m+i] = 0
			for j := range i {
				v := f.a[i*m+j] - f.a[j*m+i]
				e[i*m+j], e[j*m+i] = v, -v
				f.residual = max(f.residual, math.Abs(v))
			}
		}
	}
}

func inner(x, y []float64) float64 {
	sum := 0.0
	for i, v := range x {
		sum += v * y[i]
	}
	return sum
}
