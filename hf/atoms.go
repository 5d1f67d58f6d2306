package hf

import (
	"context"
	"fmt"
	"math"
	"sync"

	"torsieve/hf/basis"
	"torsieve/internal/element"
	"torsieve/internal/gauss"
	"torsieve/internal/linalg"
	"torsieve/internal/scf"
)

// A molecule's first density is the sum of those of its neutral atoms, each
// with its electrons spread evenly over the directions of its subshells.
//
// Source: J. H. Van Lenthe, R. Zwaans, H. J. J. Van Dam, M. F. Guest, J. Comput.
// Chem. 2006, 27, 926, doi:10.1002/jcc.20393.

type atomKey struct {
	basis string
	z     int
}

// atomDensities keeps what atomDensity made: the same for all molecules.
var atomDensities sync.Map // atomKey to func() (*start, error)

// atomDensity returns the density matrix of one spherical atom in the set, row
// by row over the functions of the atom, both spins together.
func atomDensity(set *basis.Set, z int) (*start, error) {
	once, _ := atomDensities.LoadOrStore(atomKey{set.Name, z}, sync.OnceValues(func() (*start, error) {
		shells, err := set.Shells([]int{z})
		if err != nil {
			return nil, err
		}
		p, err := sphericalAtom(shells, z)
		if err != nil {
			return nil, fmt.Errorf("hf: atom %s in %s: %w", element.Symbol(z), set.Name, err)
		}
		f, err := factorise(p, gauss.Offsets(shells)[len(shells)])
		return &start{p, f}, err
	}))
	return once.(func() (*start, error))()
}

// subshells lists n and l in the order in which atoms fill them.
var subshells = []struct{ n, l int }{{1, 0}, {2, 0}, {2, 1}, {3, 0}, {3, 1}, {4, 0}, {3, 2}, {4, 1}, {5, 0}, {4, 2}, {5, 1}}

// occupations returns the electrons in the successive orbitals of each l for a
// neutral atom: [l][k].
func occupations(z int) (occ [3][]float64) {
	left := z
	for _, s := range subshells {
		n := min(left, 4*s.l+2)
		if s.n == 4 && s.l == 0 && (z == 24 || z == 29) { // Cr, Cu: 4s1
			n = 1
		}
		if n == 0 {
			break
		}
		left -= n
		occ[s.l] = append(occ[s.l], float64(n))
	}
	return occ
}

// An atom is the self-consistent field of one spherical atom. Its functions are
// harmonics even where the basis has Cartesian ones; densities are turned back.
type atom struct {
	shells   []gauss.Shell
	offsets  []int
	n        int
	occ      [3][]float64
	fock     *fockBuilder
	overlap  []float64
	core     []float64
	p, half  []float64
	j, k, f  []float64
	out      scf.Output
	work     linalg.Workspace
	ofDegree [][]int // shells of each l
}

func sphericalAtom(shells []gauss.Shell, z int) ([]float64, error) {
	a, err := newAtom(shells, z)
	if err != nil {
		return nil, err
	}
	loop := scf.Loop{Step: a.step, Mixer: scf.NewDIIS(a.n*a.n, diisKeep), MaxIter: 100, Done: scf.Within(1e-5, 1e-4)}
	if _, _, err := loop.Solve(context.Background(), a.core); err != nil {
		return nil, err
	}
	return cartesianDensity(shells, a.offsets, a.p), nil
}

func newAtom(shells []gauss.Shell, z int) (*atom, error) {
	a := &atom{occ: occupations(z)}
	for _, s := range shells {
		s.Cartesian = false
		a.shells = append(a.shells, s)
		for len(a.ofDegree) <= s.L {
			a.ofDegree = append(a.ofDegree, nil)
		}
		a.ofDegree[s.L] = append(a.ofDegree[s.L], len(a.shells)-1)
	}
	for l, occ := range a.occ {
		if len(occ) > 0 && (l >= len(a.ofDegree) || len(a.ofDegree[l]) < len(occ)) {
			return nil, fmt.Errorf("too few functions of l = %d", l)
		}
	}
	a.offsets = gauss.Offsets(a.shells)
	a.n = a.offsets[len(a.shells)]
	x := []float64{0, 0, 0}
	one := gauss.NewOneElectron(a.shells, x)
	a.overlap, a.core = one.Overlap, make([]float64, a.n*a.n)
	if err := gauss.Nuclear(context.Background(), a.core, a.shells, x, x, []float64{float64(z)}); err != nil {
		return nil, err
	}
	for i, t := range one.Kinetic {
		a.core[i] += t
	}
	a.fock = newFockBuilder(a.shells, math.MaxInt64)
	if err := a.fock.place(context.Background(), x, 1e-10); err != nil {
		return nil, err
	}
	m := func() []float64 { return make([]float64, a.n*a.n) }
	a.p, a.half, a.j, a.k, a.f = m(), m(), m(), m(), m()
	a.out = scf.Output{State: m(), Residual: m()}
	return a, nil
}

// step is the scf.Step: Fock matrix in, Fock matrix out.
func (a *atom) step(in []float64) (scf.Output, error) {
	clear(a.p)
	for l, occ := range a.occ {
		if err := a.fill(l, occ, in); err != nil {
			return scf.Output{}, err
		}
	}
	for i, v := range a.p {
		a.half[i] = v / 2
	}
	if err := a.fock.build(context.Background(), a.p, [][]float64{a.half}, a.j, [][]float64{a.k}); err != nil {
		return scf.Output{}, err
	}
	n := a.n
	f := a.out.State
	for i, h := range a.core {
		f[i] = h + a.j[i] - a.k[i]
	}
	a.out.Energy = 0.5 * (inner(a.p, a.core) + inner(a.p, f))
	a.work.Gemm(false, false, n, n, n, 1, f, n, a.p, n, 0, a.f, n)
	a.work.Gemm(false, false, n, n, n, 1, a.f, n, a.overlap, n, 0, a.j, n)
	for i := range n {
		for j := range n {
			a.out.Residual[i*n+j] = a.j[i*n+j] - a.j[j*n+i]
		}
	}
	return a.out, nil
}

// fill puts the electrons of one l into the lowest radial orbitals of the
// matrix f, averaged over the directions m.
func (a *atom) fill(l int, occ, f []float64) error {
	if len(occ) == 0 {
		return nil
	}
	shells, size := a.ofDegree[l], 2*l+1
	k := len(shells)
	fl, sl := make([]float64, k*k), make([]float64, k*k)
	for i, si := range shells {
		for j, sj := range shells {
			for m := range size {
				at := (a.offsets[si]+m)*a.n + a.offsets[sj] + m
				fl[i*k+j] += f[at] / float64(size)
				sl[i*k+j] += a.overlap[at] / float64(size)
			}
		}
	}
	solver, levels, c := linalg.NewGeneralised(k), make([]float64, k), make([]float64, k*k)
	if err := solver.Factor(sl); err != nil {
		return err
	}
	if err := solver.Solve(fl, levels, c); err != nil {
		return err
	}
	for orbital, electrons := range occ {
		row := c[orbital*k : (orbital+1)*k]
		for i, si := range shells {
			for j, sj := range shells {
				v := electrons / float64(size) * row[i] * row[j]
				for m := range size {
					a.p[(a.offsets[si]+m)*a.n+a.offsets[sj]+m] += v
				}
			}
		}
	}
	return nil
}

// cartesianDensity writes a density over harmonics as one over the functions
// that the shells have.
func cartesianDensity(shells []gauss.Shell, from []int, p []float64) []float64 {
	to := gauss.Offsets(shells)
	n, m := from[len(shells)], to[len(shells)]
	t := make([]float64, n*m) // harmonics as combinations of the shells' functions
	for s := range shells {
		for i := range from[s+1] - from[s] {
			row := t[(from[s]+i)*m+to[s]:]
			if shells[s].Cartesian {
				copy(row, gauss.Harmonics(shells[s].L)[i])
			} else {
				row[i] = 1
			}
		}
	}
	half, out := make([]float64, n*m), make([]float64, m*m)
	linalg.Gemm(false, false, n, m, n, 1, p, n, t, m, 0, half, m)
	linalg.Gemm(true, false, m, m, n, 1, t, m, half, m, 0, out, m)
	return out
}
