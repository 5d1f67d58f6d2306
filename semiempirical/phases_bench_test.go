package semiempirical

import (
	"fmt"
	"testing"
	"time"
)

// Times of the parts of an energy with gradient in water, each alone: once a
// geometry, once a cycle (of the two ways to solve, one), once a gradient. The
// metric products is as in BenchmarkSurface.
func BenchmarkPhases(b *testing.B) {
	for _, name := range []string{"csd-VIMYUL", "cluster-122", "cluster-200"} {
		m := named(b, name)
		s, err := New(m.numbers(), m.Charge, 1, Options{Solvent: "water"})
		if err != nil {
			b.Fatal(err)
		}
		grad := make([]float64, len(m.X))
		if _, err := s.Gradient(b.Context(), grad, m.coordinates()); err != nil {
			b.Fatal(err)
		}
		for _, p := range phases(s, m.coordinates(), grad) {
			b.Run(fmt.Sprintf("atoms=%d/when=%s/phase=%s", len(m.Elements), p.when, p.name), func(b *testing.B) {
				products := productTimes(nil)
				for b.Loop() {
					if err := p.do(); err != nil {
						b.Fatal(err)
					}
				}
				each := b.Elapsed() / time.Duration(max(1, b.N))
				products = productTimes(products)
				b.ReportMetric(float64(each)/float64(median(products)), "products")
			})
		}
	}
}

// A phase is a part of the work on a surface.
type phase struct {
	when, name string
	do         func() error
}

func phases(s *Surface, x, grad []float64) []phase {
	m, c := s.model, s.cycle
	o := c.orbitals
	near := [2][]float64{shaken(c.fock, o.n, 1e-5), shaken(c.fock, o.n, 2e-5)}
	turn := 0
	plain := func(f func()) func() error { return func() error { f(); return nil } }
	return []phase{
		{"geometry", "distances-and-coordination", func() error { m.cn.update(m.geometry); return m.geometry.set(x) }},
		{"geometry", "integrals-and-h0", plain(func() { m.hamiltonian.update(m.geometry, true) })},
		{"geometry", "cholesky-factor", func() error { return o.overlap(m.hamiltonian.s, false) }},
		{"geometry", "coulomb-matrix", plain(func() { m.coulomb.update(m.geometry) })},
		{"geometry", "multipole-matrices", plain(func() { m.anisotropic.update(m.geometry) })},
		{"geometry", "d4", plain(func() { m.dispersion.Update(x) })},
		{"geometry", "solvent", func() error { return m.solvent.Update(x) }},
		{"cycle", "potentials-of-solute", plain(func() {
			for _, part := range s.parts[:4] {
				part.energy(c.out, c.unused)
			}
		})},
		{"cycle", "potential-of-d4", plain(func() { s.parts[4].energy(c.out, c.unused) })},
		{"cycle", "potential-of-solvent", plain(func() {
			for _, part := range s.parts[5:] {
				part.energy(c.out, c.unused)
			}
		})},
		{"cycle", "fock-matrix", plain(func() { m.hamiltonian.fock(c.fock, c.potential, c.atoms, m.geometry) })},
		{"cycle", "orbitals-in-full", func() error { return o.solve(c.fock, 0) }},
		{"cycle", "orbitals-followed", func() error { turn++; return o.solve(near[turn%2], 1e-8) }},
		{"cycle", "density", plain(func() { o.density(c.density) })},
		{"cycle", "moments", plain(func() { m.hamiltonian.populate(c.out, c.density, m.geometry) })},
		{"gradient", "repulsion", plain(func() { m.repulsion.energy(m.geometry, grad) })},
		{"gradient", "coulomb", plain(func() { m.coulomb.addGradient(m.geometry, c.out, grad) })},
		{"gradient", "multipoles", plain(func() { m.anisotropic.addGradient(c.out, grad, s.dEdCN) })},
		{"gradient", "d4-two-and-three-bodies", plain(func() { m.dispersion.AddGradient(c.out.atom, grad) })},
		{"gradient", "solvent", plain(func() { m.solvent.AddGradient(c.out.atom, grad) })},
		{"gradient", "energy-weighted-density", plain(func() { o.energyDensity(s.energyRho, c.fock) })},
		{"gradient", "integrals-and-h0", plain(func() {
			m.hamiltonian.addElectronic(grad, s.dEdCN, c.density, s.energyRho, c.atoms, m.geometry)
		})},
	}
}
