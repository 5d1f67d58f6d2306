package hf

import (
	"context"
	"math"
)

// A converged field is where the energy is stationary, which may be a saddle. It
// is a minimum for turns of occupied into empty orbitals if the lowest eigenvalue
// of
//
//	H x = (e_a - e_i) x_ia + (J[D] - K[D])_ia,   D = sum of x_ia (c_i c_a^T + c_a c_i^T)
//
// is positive (D carries the electrons of an orbital in J, and one in K). The
// lowest eigenvalue is found by Davidson's method, each step at the price of one or two
// builds, so only narrow gaps are looked at: with wide ones nothing is unstable.
//
// Sources: D. J. Thouless, Nucl. Phys. 1960, 21, 225; R. Seeger, J. A. Pople, J.
// Chem. Phys. 1977, 66, 3045; E. R. Davidson, J. Comput. Phys. 1975, 17, 87.
type stability struct {
	f        *field
	levels   [][]float64
	orbitals [][]float64 // of each spin: rows over functions
	z        [][]float64 // rows over the orthonormal basis
	size     int         // turns
}

const (
	suspicious    = 0.25  // gap, hartree, below which stability is looked at
	unstable      = -1e-3 // eigenvalue, hartree
	davidsonSteps = 14
)

func newStability(f *field) (*stability, error) {
	n, m := f.basis.n, f.basis.rows
	s := &stability{f: f}
	for spin, occupied := range f.occupied {
		z, levels, c := clone(f.out.State[spin*m*m:(spin+1)*m*m]), make([]float64, m), make([]float64, m*n)
		if err := f.eigen.Solve(z, levels, z); err != nil {
			return nil, err
		}
		f.basis.orbitals(c, z, m)
		s.z, s.levels, s.orbitals = append(s.z, z), append(s.levels, levels), append(s.orbitals, c)
		s.size += occupied * (m - occupied)
	}
	return s, nil
}

// each calls do with the blocks of a vector of turns, one a spin: rows occupied
// orbitals, columns empty ones.
func (s *stability) each(x []float64, do func(spin, occupied, empty int, x []float64)) {
	for spin, occupied := range s.f.occupied {
		empty := s.f.basis.rows - occupied
		do(spin, occupied, empty, x[:occupied*empty])
		x = x[occupied*empty:]
	}
}

// diagonal is e_a - e_i for every turn.
func (s *stability) diagonal() []float64 {
	d := make([]float64, s.size)
	s.each(d, func(spin, occupied, empty int, d []float64) {
		for i := range occupied {
			for a := range empty {
				d[i*empty+a] = s.levels[spin][occupied+a] - s.levels[spin][i]
			}
		}
	})
	return d
}

// apply returns H x. The change of the density is the difference of two sums of
// squares: those of (c_i + y_i) and of (c_i - y_i) over root two, y_i = sum_a x_ia c_a.
func (s *stability) apply(ctx context.Context, x, diagonal []float64) ([]float64, error) {
	f, n := s.f, s.f.basis.n
	d := density{each: f.densities.each, total: make([]float64, n*n)}
	var ks [][]float64
	s.each(x, func(spin, occupied, empty int, x []float64) {
		c := s.orbitals[spin]
		y := make([]float64, occupied*n)
		f.work.Gemm(false, false, occupied, n, empty, 1, x, empty, c[occupied*n:], n, 0, y, n)
		for _, sign := range []float64{1, -1} {
			part := factor{rows: occupied, c: make([]float64, occupied*n)}
			for i := range part.c {
				part.c[i] = (c[i] + sign*y[i]) * math.Sqrt2 / 2
			}
			p := make([]float64, n*n)
			f.work.Gemm(true, false, n, n, occupied, 1, part.c, n, part.c, n, 0, p, n)
			for i, v := range p {
				d.total[i] += sign * d.each * v
			}
			d.spins, d.factors, ks = append(d.spins, p), append(d.factors, part), append(ks, make([]float64, n*n))
		}
	})
	j := make([]float64, n*n)
	if err := f.response(ctx, &d, j, ks); err != nil {
		return nil, err
	}
	out := make([]float64, s.size)
	half := make([]float64, n*n)
	s.each(out, func(spin, occupied, empty int, out []float64) {
		c := s.orbitals[spin]
		plus, minus := ks[2*spin], ks[2*spin+1]
		for i := range plus {
			plus[i] = j[i] - (plus[i] - minus[i])
		}
		f.work.Gemm(false, false, occupied, n, n, 1, c, n, plus, n, 0, half, n)
		f.work.Gemm(false, true, occupied, empty, n, 1, half, n, c[occupied*n:], n, 0, out, empty)
	})
	for k, v := range x {
		out[k] += diagonal[k] * v
	}
	return out, nil
}

// response builds the matrices of a change of the density. Factors come in pairs,
// the second of which counts with the opposite sign in the Coulomb matrix.
func (f *field) response(ctx context.Context, d *density, j []float64, ks [][]float64) error {
	f.engine.forget()
	defer f.engine.forget()
	minus := make([]float64, len(j))
	all := density{each: d.each, total: make([]float64, len(j))}
	for sign := range 2 {
		all.spins, all.factors = nil, nil
		var part [][]float64
		for s := sign; s < len(d.spins); s += 2 {
			all.spins, all.factors, part = append(all.spins, d.spins[s]), append(all.factors, d.factors[s]), append(part, ks[s])
		}
		all.sum()
		into := j
		if sign == 1 {
			into = minus
		}
		f.engine.forget()
		if err := f.engine.build(ctx, &all, into, part); err != nil {
			return err
		}
	}
	for i, v := range minus {
		j[i] -= v
	}
	return nil
}

// turn returns densities with the occupied orbitals turned along x by an angle of
// 0.5, both spins together for a closed shell.
func (s *stability) turned(x []float64) []factor {
	var out []factor
	m := s.f.basis.rows
	s.each(x, func(spin, occupied, empty int, x []float64) {
		z := s.z[spin]
		rows := clone(z[:occupied*m])
		s.f.work.Gemm(false, false, occupied, m, empty, 0.5, x, empty, z[occupied*m:], m, 1, rows, m)
		out = append(out, s.f.orthonormal(rows, occupied))
	})
	return out
}

// begin takes factors as the first densities.
func (f *field) begin(factors []factor) {
	n := f.basis.n
	for s, c := range factors {
		f.densities.factors[s] = factor{c.rows, clone(c.c)}
		f.work.Gemm(true, false, n, n, c.rows, 1, c.c, n, c.c, n, 0, f.densities.spins[s], n)
	}
}

// settle looks whether a converged field with a narrow gap is a minimum, and goes
// down from it where it is not: at most twice. It returns the iterations that it took
// and what to tell.
func (f *field) settle(ctx context.Context, accuracy float64) (iterations int, doubt string, err error) {
	for range 2 {
		if f.gap > suspicious || math.IsInf(f.gap, 1) {
			return iterations, doubt, nil
		}
		s, err := newStability(f)
		if err != nil || s.size == 0 {
			return iterations, doubt, err
		}
		value, x, err := s.lowest(ctx)
		if err != nil || value > unstable {
			return iterations, doubt, err
		}
		start, before := s.turned(x), f.out.Energy
		more, err := f.converge(ctx, accuracy, func() { f.begin(start) })
		iterations += more
		if err != nil {
			return iterations, doubt, err
		}
		doubt = "the first solution was no minimum; the one given lies lower, and a lower one yet cannot be ruled out"
		if f.out.Energy > before {
			doubt = "the first solution was no minimum, and none that lies lower was found: the energy is in doubt"
		}
	}
	return iterations, doubt, nil
}

// orthonormal makes rows over the orthonormal basis orthonormal, one after the
// other, and returns them over functions.
func (f *field) orthonormal(z []float64, rows int) factor {
	m := f.basis.rows
	var before [][]float64
	for i := range rows {
		row := z[i*m : (i+1)*m]
		orthonormalise(row, before)
		before = append(before, row)
	}
	c := factor{rows: rows, c: make([]float64, rows*f.basis.n)}
	f.basis.orbitals(c.c, z, rows)
	return c
}
