package semiempirical

import (
	"context"
	"fmt"
	"math"
	"slices"
	"testing"

	"torsieve/internal/gradcheck"
	"torsieve/molecule"
)

func mustGradient(t *testing.T, s *Surface, grad, x []float64) molecule.Point {
	t.Helper()
	p, err := s.Gradient(t.Context(), grad, x)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// Turning, moving and renumbering the atoms changes neither energy nor
// charges, and turns dipole and gradient.
func TestRigidMotionAndOrder(t *testing.T) {
	for _, name := range []string{"glycine", "TiCl4", "HOO-radical", "CH3I"} {
		t.Run(name, func(t *testing.T) {
			m := named(t, name)
			x := m.coordinates()
			n := len(m.Elements)
			grad := make([]float64, len(x))
			p := mustGradient(t, m.surface(t, 1e-4), grad, x)

			other := *m
			other.Elements = nil
			moved, order := make([]float64, len(x)), make([]int, n)
			for i := range order {
				order[i] = (3*i + 1) % n
				if n%3 == 0 {
					order[i] = n - 1 - i
				}
			}
			for i, from := range order {
				other.Elements = append(other.Elements, m.Elements[from])
				v := turned(x[3*from:])
				for k, shift := range [3]float64{-4, 0.3, 11} {
					moved[3*i+k] = v[k] + shift
				}
			}
			g2 := make([]float64, len(x))
			p2 := mustGradient(t, other.surface(t, 1e-4), g2, moved)
			near(t, "energy", p2.Energy, p.Energy, 1e-10)
			d := turned(p.Dipole)
			allNear(t, "dipole", p2.Dipole, d[:], 1e-7)
			for i, from := range order {
				near(t, "charge", p2.Charges[i], p.Charges[from], 1e-8)
				want := turned(grad[3*from:])
				allNear(t, "gradient", g2[3*i:3*i+3], want[:], 1e-8)
			}
		})
	}
}

// turned turns a vector by 1.1 about z and then by 0.7 about x.
func turned(v []float64) [3]float64 {
	c, s := math.Cos(1.1), math.Sin(1.1)
	x, y, z := c*v[0]-s*v[1], s*v[0]+c*v[1], v[2]
	c, s = math.Cos(0.7), math.Sin(0.7)
	return [3]float64{x, c*y - s*z, s*y + c*z}
}

// The gradient is the slope of the energy, for s, p and d shells in both
// orders, for ions and open shells.
func TestGradientIsSlope(t *testing.T) {
	for _, name := range []string{"CH3OH", "SO2", "HOO-radical", "fluoride-water-anion", "ZnCl2", "LaF3", "CH3I"} {
		m := named(t, name)
		s := m.surface(t, 1e-6)
		x := m.coordinates()
		for i := range x { // bent and strained
			x[i] += 0.15 * math.Sin(float64(7*i))
		}
		t.Run(name, func(t *testing.T) {
			gradcheck.Run(t, x, 2e-3, 1e-8, func(x, grad []float64) float64 {
				g := make([]float64, len(x))
				p := mustGradient(t, s, g, x)
				if grad != nil {
					copy(grad, g)
				}
				return p.Energy
			})
		})
	}
}

// No net force and no net torque.
func TestForcesBalance(t *testing.T) {
	for _, name := range []string{"glycine", "pdb-1pa9", "LaF3"} {
		m := named(t, name)
		x, g := m.coordinates(), make([]float64, len(m.X))
		mustGradient(t, m.surface(t, 1e-6), g, x)
		var force, torque [3]float64
		for i := range m.Elements {
			for k := range 3 {
				k1, k2 := (k+1)%3, (k+2)%3
				force[k] += g[3*i+k]
				torque[k] += x[3*i+k1]*g[3*i+k2] - x[3*i+k2]*g[3*i+k1]
			}
		}
		allNear(t, name+" force", force[:], make([]float64, 3), 1e-12)
		allNear(t, name+" torque", torque[:], make([]float64, 3), 1e-9)
	}
}

// Two neutral molecules far apart have the energies of each alone. (At 300 bohr
// 1e-9 hartree are left: the softened 1/R of shell charges falls off with R^-3.)
func TestFarApart(t *testing.T) {
	a, b := named(t, "CH4"), named(t, "SiH4")
	both := referenceMolecule{Elements: slices.Concat(a.Elements, b.Elements)}
	x := slices.Concat(a.coordinates(), b.coordinates())
	for i := len(a.X); i < len(x); i += 3 {
		x[i] += 3000
	}
	p, err := both.surface(t, 1e-4).Energy(t.Context(), x)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "energy", p.Energy, a.Energy+b.Energy, 1e-9)
	allNear(t, "charges", p.Charges, slices.Concat(a.Charges, b.Charges), 1e-7)
}

// A start from other charges ends at the same energy; a reset start in the
// same bits; parts sum to the energy and charges to the total.
func TestWarmAndColdStarts(t *testing.T) {
	m := named(t, "glycineH-cation")
	s := m.surface(t, 0.1)
	x := m.coordinates()
	elsewhere := slices.Clone(x)
	for i := range elsewhere {
		elsewhere[i] += 0.2 * math.Cos(float64(5*i))
	}
	grad, again := make([]float64, len(x)), make([]float64, len(x))
	first := mustGradient(t, s, grad, x)
	mustGradient(t, s, again, elsewhere)
	warm := mustGradient(t, s, again, x)
	near(t, "warm energy", warm.Energy, first.Energy, 1e-8)
	s.Reset()
	cold := mustGradient(t, s, again, x)
	if cold.Energy != first.Energy || !slices.Equal(grad, again) || !slices.Equal(cold.Charges, first.Charges) {
		t.Error("the same start gives other bits")
	}
	fast := mustGradient(t, s, again, x)
	if fast.Iterations >= cold.Iterations {
		t.Errorf("%d cycles from converged charges, %d from none", fast.Iterations, cold.Iterations)
	}
	var charge, energy float64
	for _, q := range first.Charges {
		charge += q
	}
	for _, part := range first.Parts {
		energy += part.Energy
	}
	near(t, "sum of charges", charge, 1, 1e-10)
	near(t, "sum of parts", energy, first.Energy, 1e-12)
}

// Orbitals that are followed from one geometry to the next, over small steps and
// one that is too large for it, give what a start from none gives; some of the
// geometries need no full solution.
func TestOrbitalsAreCarried(t *testing.T) {
	for _, name := range []string{"pdb-1pa9", "csd-VIMYUL"} {
		m := named(t, name)
		warm, cold, followed := m.surface(t, 1e-5), m.surface(t, 1e-5), 0
		x := m.coordinates()
		grad, want := make([]float64, len(x)), make([]float64, len(x))
		mustGradient(t, warm, grad, x)
		for k, step := range []float64{0.02, 0.05, 0.03, 0.4, 0.02} {
			for i := range x {
				x[i] += step * math.Sin(float64(7*i+11*k))
			}
			p := mustGradient(t, warm, grad, x)
			if !warm.cycle.orbitals.factored {
				followed++
			}
			cold.Reset()
			q := mustGradient(t, cold, want, x)
			near(t, name+" energy", p.Energy, q.Energy, 2e-10)
			allNear(t, name+" gradient", grad, want, 1e-8)
			allNear(t, name+" charges", p.Charges, q.Charges, 1e-8)
		}
		if followed < 2 {
			t.Errorf("%s: orbitals were carried to %d of 5 geometries", name, followed)
		}
	}
}

// A start that is of no use is given up for the neutral guess.
func TestUselessStart(t *testing.T) {
	m := named(t, "glycine")
	s := m.surface(t, 1e-4)
	if _, err := s.Energy(t.Context(), m.coordinates()); err != nil {
		t.Fatal(err)
	}
	for i := range s.start {
		s.start[i] = math.NaN()
	}
	p, err := s.Energy(t.Context(), m.coordinates())
	if err != nil {
		t.Fatal(err)
	}
	near(t, "energy", p.Energy, m.Energy, 2e-10)
}

// Atoms alone, where all orbitals of a spin are full or none: hydrogen has the
// energy of the reference library, whose search for the Fermi level ends up to
// 1.5e-8 electrons short.
func TestFullAndEmptySpins(t *testing.T) {
	for _, tc := range []struct {
		z, charge, multiplicity int
		energy                  float64 // hartree; 0: not known
	}{{1, 0, 2, -0.393482759}, {1, -1, 1, 0}, {9, -1, 1, 0}, {2, 0, 1, 0}} {
		s, err := New([]int{tc.z}, tc.charge, tc.multiplicity, Options{Accuracy: 1e-4})
		if err != nil {
			t.Fatal(err)
		}
		grad := make([]float64, 3)
		p := mustGradient(t, s, grad, []float64{1, -2, 3})
		near(t, "charge", p.Charges[0], float64(tc.charge), 1e-12)
		allNear(t, "gradient", grad, []float64{0, 0, 0}, 1e-14)
		if tc.energy != 0 {
			near(t, "energy", p.Energy, tc.energy, 5e-9)
		}
	}
}

// What is left in scratch memory does not matter, and a cycle allocates
// nothing.
func TestScratchMemory(t *testing.T) {
	m := named(t, "CH3I")
	x := m.coordinates()
	s := m.surface(t, 1)
	want, got := make([]float64, len(x)), make([]float64, len(x))
	mustGradient(t, s, want, x)
	h, c := s.model.hamiltonian, s.cycle
	for _, scratch := range [][]float64{h.data[:cap(h.data)], h.s, h.h, c.fock, c.density, c.residual, s.energyRho, s.dEdCN, c.out.vec, c.potential.atom, s.model.cn.slope, got} {
		for i := range scratch {
			scratch[i] = math.NaN()
		}
	}
	s.Reset()
	mustGradient(t, s, got, x)
	if !slices.Equal(got, want) {
		t.Error("the gradient depends on what was in scratch memory before")
	}
	if n := testing.AllocsPerRun(20, func() {
		if _, err := c.step(s.start); err != nil {
			t.Fatal(err)
		}
	}); n != 0 {
		t.Errorf("%g allocations a cycle, want none", n)
	}
}

// Water; the reference library has -5.070325 hartree and -0.5633 for oxygen here.
func ExampleSurface_Energy() {
	x := []float64{0, 0.124534, 0, -1.4276, -0.988422, 0, 1.4276, -0.988422, 0} // bohr
	s, err := New([]int{8, 1, 1}, 0, 1, Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	p, err := s.Energy(context.Background(), x)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.6f hartree, charge of oxygen %.4f\n", p.Energy, p.Charges[0])
	// Output: -5.070325 hartree, charge of oxygen -0.5633
}
