package hf

import (
	"fmt"

	"torsieve/internal/element"
)

// mulliken returns Z_A - sum over functions m of A of (P S)_mm.
//
// Source: R. S. Mulliken, J. Chem. Phys. 1955, 23, 1833, doi:10.1063/1.1740588.
func (s *Surface) mulliken(p, overlap []float64) []float64 {
	q := append([]float64(nil), s.nuclei...)
	n := s.offsets[len(s.shells)]
	for i := range s.shells {
		sh := &s.shells[i]
		for m := s.offsets[i]; m < s.offsets[i+1]; m++ {
			q[sh.Atom] -= inner(p[m*n:(m+1)*n], overlap[m*n:])
		}
	}
	return q
}

// dipole returns the dipole moment in e bohr, of ions about the centre of mass.
func (s *Surface) dipole(p []float64, integrals [3][]float64, x []float64) []float64 {
	mu := make([]float64, 3)
	mass := 0.0
	var centre [3]float64
	for a, z := range s.numbers {
		m := element.Mass(z)
		mass += m
		for k := range 3 {
			mu[k] += float64(z) * x[3*a+k]
			centre[k] += m * x[3*a+k]
		}
	}
	for k := range mu {
		mu[k] -= inner(p, integrals[k])
		mu[k] -= float64(s.charge) * centre[k] / mass
	}
	return mu
}

// doubts lists what a chemist should know about a result.
func (s *Surface) doubts(r *result, kinetic float64) []string {
	var out []string
	f := r.field
	if s.charge != 0 {
		out = append(out, "the dipole moment of an ion depends on the origin: given about the centre of mass")
	}
	if r.doubt != "" {
		out = append(out, r.doubt)
	}
	if f.gap < 0.05 {
		out = append(out, fmt.Sprintf("the gap between occupied and empty orbitals is only %.3f hartree: other states may lie near", f.gap))
	}
	if left := f.basis.n - f.basis.rows; left > 0 {
		out = append(out, fmt.Sprintf("%d functions of the basis are linearly dependent and were left out (smallest overlap eigenvalue %.1e)", left, f.basis.smallest))
	}
	total := f.repulsion + f.parts.sum()
	if ratio := (kinetic - total) / kinetic; ratio < 1.9 || ratio > 2.1 {
		out = append(out, fmt.Sprintf("the virial ratio is %.2f, far from 2: atoms may be too close", ratio))
	}
	return out
}
