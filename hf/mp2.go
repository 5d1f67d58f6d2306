package hf

import (
	"context"
	"errors"
	"fmt"

	"torsieve/hf/basis"
	"torsieve/internal/gauss"
	"torsieve/internal/linalg"
	"torsieve/molecule"
)

// A correlation is second-order perturbation theory on a closed-shell
// determinant, electron repulsion fitted: core orbitals frozen, spin components
// scaled.
//
// Sources: M. Feyereisen, G. Fitzgerald, A. Komornicki, Chem. Phys. Lett. 1993,
// 208, 359; scaled components S. Grimme, J. Chem. Phys. 2003, 118, 9095;
// opposite spins only Y. Jung, R. C. Lochan, A. D. Dutoi, M. Head-Gordon, J.
// Chem. Phys. 2004, 121, 9793.
type correlation struct {
	scaling
	core      int // frozen orbitals
	auxiliary []gauss.Shell
	functions int // of them
	budget    int64
}

// A scaling is a factor on the energy of pairs of electrons of the same, and of
// opposite spin.
type scaling struct{ same, opposite float64 }

var scalings = map[string]scaling{
	"mp2":     {1, 1},
	"scs-mp2": {1.0 / 3, 6.0 / 5},
	"sos-mp2": {0, 1.3},
}

// newCorrelation prepares for a molecule; nil where the method has no
// correlation.
func newCorrelation(numbers, occupied []int, o Options, set *basis.Set) (*correlation, error) {
	s, ok := scalings[o.Method]
	if !ok {
		return nil, nil
	}
	if len(occupied) > 1 {
		return nil, &Unsupported{Reason: "MP2 is there for closed shells only; this molecule has unpaired electrons: use hf-d3 for it"}
	}
	c := &correlation{scaling: s}
	for _, z := range numbers {
		c.core += frozen(z)
	}
	fitting, err := basis.CorrelationFitting(set.Name)
	if err != nil {
		return nil, fmt.Errorf("hf: %w", err)
	}
	if c.auxiliary, err = fitting.Shells(numbers); err != nil {
		return nil, &Unsupported{Reason: "MP2: " + err.Error(), Err: err}
	}
	c.functions = gauss.Offsets(c.auxiliary)[len(c.auxiliary)]
	if occupied[0] <= c.core {
		return nil, &Unsupported{Reason: "MP2 needs valence electrons; this molecule has core electrons only"}
	}
	return c, nil
}

// frozen returns the number of core orbitals of a neutral atom: the filled
// shells below the valence shell, with 3d in the core from gallium on.
func frozen(z int) int {
	switch {
	case z <= 2:
		return 0
	case z <= 10:
		return 1
	case z <= 18:
		return 5
	case z <= 30:
		return 9
	}
	return 14
}

// orbitalShare tightens the convergence of the orbitals: the correlation energy
// answers to them in first order, the energy of the field in second.
const orbitalShare = 0.03

// least returns the bytes of a run that takes two orbitals at a time.
func (c *correlation) least(matrices int64, n, occupied int) int64 {
	return matrices + correlationBytes(n, c.functions, n-occupied, 1, 2)
}

// add puts the correlation energy of a converged field into its parts.
func (c *correlation) add(ctx context.Context, p *molecule.Point, s *Surface, f *field, x []float64) error {
	same, opposite, err := c.energy(ctx, s, f, x)
	if err != nil {
		return err
	}
	if c.same != 0 {
		p.Parts = append(p.Parts, molecule.Part{Name: "same-spin correlation", Energy: c.same * same})
	}
	p.Parts = append(p.Parts, molecule.Part{Name: "opposite-spin correlation", Energy: c.opposite * opposite})
	return nil
}

// energy returns the unscaled parts, hartree.
func (c *correlation) energy(ctx context.Context, s *Surface, f *field, x []float64) (same, opposite float64, err error) {
	n, m, occupied := f.basis.n, f.basis.rows, f.occupied[0]
	if occupied == m {
		return 0, 0, nil // nowhere to go
	}
	levels, z, orbitals := make([]float64, m), clone(f.out.State), make([]float64, m*n)
	if err := linalg.NewEigen(m).Solve(z, levels, z); err != nil {
		return 0, 0, err
	}
	f.basis.orbitals(orbitals, z, m)
	t := newTransformation(s.shells, c, orbitals, occupied, m)
	if err := t.place(x, s.threshold()); err != nil {
		return 0, 0, err
	}
	e := pairEnergies{occupied: levels[c.core:occupied], empty: levels[occupied:], aux: c.functions}
	if gap := levels[occupied] - levels[occupied-1]; !(gap > 1e-3) {
		return 0, 0, errors.New("hf: MP2 makes no sense here: occupied and empty orbitals have the same energy")
	}
	return e.sum(ctx, t)
}

// pairEnergies sums over pairs of occupied orbitals.
type pairEnergies struct {
	occupied, empty []float64 // levels, hartree
	aux             int
	v               []float64
	work            linalg.Workspace
}

// sum goes through blocks of orbitals that the transformation makes: all at
// once, or two blocks at a time.
func (e *pairEnergies) sum(ctx context.Context, t *transformation) (same, opposite float64, err error) {
	o := len(e.occupied)
	v := len(e.empty)
	e.v = make([]float64, v*v)
	one := v * e.aux
	for i0 := 0; i0 < o; i0 += t.block {
		i1 := min(i0+t.block, o)
		bi, err := t.fitted(ctx, 0, i0, i1)
		if err != nil {
			return 0, 0, err
		}
		for j0 := 0; j0 <= i0; j0 += t.block {
			j1, bj := min(j0+t.block, o), bi
			if j0 < i0 {
				if bj, err = t.fitted(ctx, 1, j0, j1); err != nil {
					return 0, 0, err
				}
			}
			for i := i0; i < i1; i++ {
				if err := ctx.Err(); err != nil {
					return 0, 0, err
				}
				for j := j0; j < min(j1, i+1); j++ {
					e.work.Gemm(true, false, v, v, e.aux, 1, bi[(i-i0)*one:], v, bj[(j-j0)*one:], v, 0, e.v, v)
					s, t := e.pair(e.occupied[i] + e.occupied[j])
					if i != j {
						s, t = 2*s, 2*t
					}
					same += s
					opposite += t
				}
			}
		}
	}
	return same, opposite, nil
}

// pair sums (ia|jb) [(ia|jb) - (ib|ja)] / D and (ia|jb)^2 / D over a and b, D
// being the two occupied levels, whose sum is given, less the empty ones.
func (e *pairEnergies) pair(levels float64) (same, opposite float64) {
	n := len(e.empty)
	for a, ea := range e.empty {
		d := levels - ea
		row := e.v[a*n : (a+1)*n]
		for b, eb := range e.empty[:a] {
			x, y := row[b], e.v[b*n+a]
			r := 1 / (d - eb)
			same += (x - y) * (x - y) * r
			opposite += (x*x + y*y) * r
		}
		opposite += row[a] * row[a] / (d - ea)
	}
	return same, opposite
}
