package thermo

import (
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/floats"

	"torsieve/internal/units"
)

// Two atoms on a spring: omega^2 = k (1/m1 + 1/m2), five motions of the whole.
func TestDiatomic(t *testing.T) {
	x := []float64{0.3, -0.2, 0.1, 1.5, 1.1, -0.8}
	masses := []float64{1836 * 12, 1836 * 16}
	m := mustModes(t, newSprings(x, [][2]int{{0, 1}}, 1.2), x, masses)
	if len(m.Quanta) != 1 || len(m.Rigid) != 5 {
		t.Fatalf("%d vibrations, %d motions of the whole", len(m.Quanta), len(m.Rigid))
	}
	near(t, "quantum", m.Quanta[0], math.Sqrt(1.2*(1/masses[0]+1/masses[1])), 1e-8)
	for _, q := range m.Rigid {
		near(t, "motion of the whole / cm^-1", q/wavenumber, 0, 1)
	}
	// The lighter atom moves by 1, the heavier by the ratio of the masses.
	d := m.Motion(0)
	near(t, "light atom", floats.Norm(d[:3], 2), 1, 1e-12)
	near(t, "heavy atom", floats.Norm(d[3:], 2), 0.75, 1e-9)
}

// A straight molecule O=C=O with two springs, and one between its ends: the
// symmetric stretch has (k + 2 k')/mO, the antisymmetric one k (1/mO + 2/mC), the
// bend, for which no spring is, 0. The first two: G. Herzberg, Infrared and Raman
// Spectra (1945), eqs. II,195 and II,196.
func TestLinear(t *testing.T) {
	const k, ends = 1.0, 0.08
	x := []float64{0, 0, 0, 2.2, 0, 0, -2.2, 0, 0}
	masses := Masses([]int{6, 8, 8}, nil)
	m := mustModes(t, newSprings(x, [][2]int{{0, 1}, {0, 2}, {1, 2}}, k, k, ends), x, masses)
	if len(m.Quanta) != 4 || len(m.Rigid) != 5 {
		t.Fatalf("%d vibrations, %d motions of the whole", len(m.Quanta), len(m.Rigid))
	}
	near(t, "bend / cm^-1", m.Quanta[0]/wavenumber, 0, 3)
	near(t, "bend / cm^-1", m.Quanta[1]/wavenumber, 0, 3)
	near(t, "symmetric", m.Quanta[2], math.Sqrt((k+2*ends)/masses[1]), 1e-8)
	near(t, "antisymmetric", m.Quanta[3], math.Sqrt(k*(1/masses[1]+2/masses[0])), 1e-8)
}

// Turning, moving and renumbering change nothing; the vectors are orthonormal,
// and orthogonal to all translations and rotations.
func TestModesKeepTheLaws(t *testing.T) {
	x, masses, s := tetrahedron()
	m := mustModes(t, s, x, masses)
	if len(m.Quanta) != 6 || len(m.Rigid) != 6 || m.Quanta[0] < 100*wavenumber {
		t.Fatalf("quanta %v, rigid %v", m.Quanta, m.Rigid)
	}
	order := []int{2, 0, 3, 1}
	y, masses2 := make([]float64, 12), make([]float64, 4)
	for i, from := range order {
		v := x[3*from:]
		// A turn by 90 degrees about (1,1,1)'s neighbour: x, y, z to -y, z, -x.
		y[3*i], y[3*i+1], y[3*i+2] = -v[1]+5, v[2]-2, -v[0]+0.7
		masses2[i] = masses[from]
	}
	place := []int{1, 3, 0, 2}
	s2 := &springs{k: s.k, r0: s.r0}
	for _, p := range s.pairs {
		s2.pairs = append(s2.pairs, [2]int{place[p[0]], place[p[1]]})
	}
	m2 := mustModes(t, s2, y, masses2)
	for k, q := range m.Quanta {
		near(t, "quantum", m2.Quanta[k], q, 1e-10)
	}
	f, err := newFrame(x, masses)
	if err != nil {
		t.Fatal(err)
	}
	all := f.rigid(x, masses)
	for k := range m.Quanta {
		all = append(all, m.Vectors[12*k:12*k+12])
	}
	for i, v := range all {
		for j, w := range all {
			want := 0.0
			if i == j {
				want = 1
			}
			near(t, "product of vectors", floats.Dot(v, w), want, 1e-12)
		}
	}
}

// The product rule for isotopes: the product of all frequencies changes with the
// masses of the atoms, of the molecule and its moments alone,
//
//	prod nu'/nu = prod (m/m')^(3/2) (M'/M)^(3/2) (I1'I2'I3'/I1I2I3)^(1/2).
//
// Source: O. Redlich, Z. phys. Chem. B 1935, 28, 371; Herzberg (1945), eq. II,303.
func TestProductRule(t *testing.T) {
	x, masses, s := tetrahedron()
	heavier := Masses([]int{6, 1, 8, 17}, []int{13, 2, 18, 0})
	lhs, rhs := 0.0, 0.0
	for n, m := range [][]float64{masses, heavier} {
		sign := float64(2*n - 1)
		modes := mustModes(t, s, x, m)
		for _, q := range modes.Quanta {
			lhs += sign * math.Log(q)
		}
		b, err := NewBody(x, m)
		if err != nil {
			t.Fatal(err)
		}
		rhs += sign * (1.5*math.Log(b.Mass) + 0.5*math.Log(b.Moments[0]*b.Moments[1]*b.Moments[2]))
		for _, mass := range m {
			rhs -= sign * 1.5 * math.Log(mass)
		}
	}
	near(t, "logarithm of the product of ratios", lhs, rhs, 1e-6)
	if lhs > -0.2 {
		t.Errorf("heavier isotopes changed the logarithm by %g: no test", lhs)
	}
}

// An atom has no vibration; two atoms at one point have no axis; poison is told.
func TestOddMolecules(t *testing.T) {
	m, err := NormalModes(make([]float64, 9), []float64{1, 2, 3}, []float64{7e4})
	if err != nil || len(m.Quanta) != 0 || len(m.Rigid) != 3 {
		t.Errorf("an atom: %v, %v", m, err)
	}
	if _, err := NormalModes(make([]float64, 36), make([]float64, 6), []float64{1, 1}); err == nil {
		t.Error("two atoms at one point are taken for a molecule")
	}
	x, masses, _ := tetrahedron()
	h := make([]float64, 144)
	h[17] = math.NaN()
	if _, err := NormalModes(h, x, masses); err == nil {
		t.Error("NaN in the Hessian is no error")
	}
	x = slices.Clone(x)
	x[4] = math.Inf(1)
	if _, err := NewBody(x, masses); err == nil {
		t.Error("infinity in the geometry is no error")
	}
}

// HCN bent by what a relaxation leaves is linear; bent by ten degrees it is not.
func TestNearlyLinear(t *testing.T) {
	masses := Masses([]int{1, 6, 7}, nil)
	for degrees, axes := range map[float64]int{0: 2, 0.5: 2, 10: 3} {
		sin, cos := math.Sincos(degrees * math.Pi / 180)
		x := []float64{-1.07 * cos, 1.07 * sin, 0, 0, 0, 0, 1.16, 0, 0}
		floats.Scale(units.Angstrom, x)
		b, err := NewBody(x, masses)
		if err != nil || b.Axes != axes {
			t.Errorf("bent by %g degrees: %d axes, want %d (%v)", degrees, b.Axes, axes, err)
		}
		if (b.Moments[0] == 0) != (axes == 2) {
			t.Errorf("bent by %g degrees: moments %v", degrees, b.Moments)
		}
	}
}

// Masses: standard weights, labels, and the mass number where there is no label.
// Deuterium 2.014 as in any table of isotopes.
func TestMasses(t *testing.T) {
	got := Masses([]int{1, 1, 6, 53}, []int{0, 2, 13, 125})
	for i, want := range []float64{1.008, 2.014, 13.003, 125} {
		near(t, "mass", got[i]/units.Dalton, want, 5e-4)
	}
	for label, m := range labels {
		near(t, "mass against mass number", m, float64(label[1]), 0.02)
	}
}

// What is projected out is gone: a v = 0, the curvature along v was v'av, and what
// lies at right angles is as it was.
func TestProject(t *testing.T) {
	b := newBowl(6)
	a := slices.Clone(b.hessian)
	v := []float64{0.5, -0.5, 0.5, 0.5, 0, 0}
	w := []float64{0.5, 0.5, 0, 0, 0.5, 0.5} // at right angles to v
	form := func(a, x, y []float64) float64 {
		var sum float64
		for i := range x {
			sum += x[i] * floats.Dot(a[6*i:6*i+6], y)
		}
		return sum
	}
	near(t, "v'av", project(a, v), form(b.hessian, v, v), 1e-14)
	near(t, "v'av afterwards", form(a, v, v), 0, 1e-14)
	near(t, "w'av afterwards", form(a, w, v), 0, 1e-14)
	near(t, "v'aw afterwards", form(a, v, w), 0, 1e-14)
	near(t, "w'aw", form(a, w, w), form(b.hessian, w, w), 1e-14)
}
