package solvent

import (
	"errors"
	"math"
	"slices"
	"testing"

	"torsieve/internal/units"
)

// Moving and renumbering change nothing. Turning changes no more than the
// surface, whose directions stay where they are: by 1e-4 hartree at most in a
// hundred random orientations of seven molecules of up to 69 atoms, 1e-5 to
// 3e-5 on average.
func TestRigidMotionAndOrder(t *testing.T) {
	for _, name := range []string{"methylimidazolium", "1gm8", "1t46"} {
		m := find(t, name)
		numbers, x, q := m.numbers(), m.coordinates(), m.solvated["water"].Charges
		want := m.model(t, "water").Parts(q)

		moved, turned := make([]float64, 0, len(x)), make([]float64, 0, len(x))
		order := make([]int, 0, len(q))
		for a := len(q) - 1; a >= 0; a-- {
			order = append(order, a)
			moved = append(moved, x[3*a]+3, x[3*a+1]-7, x[3*a+2]+11)
			c, s := math.Cos(1.1), math.Sin(1.1)
			turned = append(turned, c*x[3*a]-s*x[3*a+1], s*x[3*a]+c*x[3*a+1], x[3*a+2])
		}
		other, charges := make([]int, len(q)), make([]float64, len(q))
		for i, a := range order {
			other[i], charges[i] = numbers[a], q[a]
		}
		model, err := New(other, "water")
		if err != nil {
			t.Fatal(err)
		}
		if err := model.Update(moved); err != nil {
			t.Fatal(err)
		}
		near(t, name+" moved", values(model.Parts(charges)), values(want), 1e-12)
		if err := model.Update(turned); err != nil {
			t.Fatal(err)
		}
		got := model.Parts(charges)
		near(t, name+" turned", []float64{got.Polar}, []float64{want.Polar}, 1e-13)
		near(t, name+" turned", []float64{got.Sum()}, []float64{want.Sum()}, 1e-4)
	}
}

// A quarter turn takes the directions into one another, and changes nothing.
func TestQuarterTurn(t *testing.T) {
	m := find(t, "1yqy")
	x, q := m.coordinates(), m.solvated["water"].Charges
	model := m.model(t, "water")
	want := values(model.Parts(q))
	for i := 0; i < len(x); i += 3 {
		x[i], x[i+1] = -x[i+1], x[i]
	}
	if err := model.Update(x); err != nil {
		t.Fatal(err)
	}
	near(t, "turned", values(model.Parts(q)), want, 1e-12)
}

// Without net force and, but for the surface, without net torque.
func TestForcesBalance(t *testing.T) {
	m := find(t, "methanesulfonate")
	model, x, q := m.model(t, "dmso"), m.coordinates(), m.solvated["dmso"].Charges
	var force, torque [3]float64
	grad := make([]float64, len(x))
	model.addPolar(q, grad)
	for i := 0; i < len(x); i += 3 {
		for k := range torque {
			k1, k2 := (k+1)%3, (k+2)%3
			torque[k] += x[i+k1]*grad[i+k2] - x[i+k2]*grad[i+k1]
		}
	}
	model.addSurface(q, grad)
	for i, g := range grad {
		force[i%3] += g
	}
	near(t, "force", force[:], make([]float64, 3), 1e-14)
	near(t, "torque", torque[:], make([]float64, 3), 1e-14)
}

// One ion: Born's formula -(1 - 1/epsilon) q^2/2R with the scaled radius and the
// shape's part, and the whole sphere as area. Constants as published for water.
func TestOneAtom(t *testing.T) {
	const epsilon, scale, alpha, probe = 80.2, 1.47438678, 0.571412 / 80.2, 1.13409020
	radius := 1.1498 * units.Angstrom // of fluorine
	m, err := New([]int{9}, "water")
	if err != nil {
		t.Fatal(err)
	}
	if err := m.Update([]float64{1, 2, 3}); err != nil {
		t.Fatal(err)
	}
	polar := -0.5 * (1 - 1/epsilon) / (1 + alpha) * (1/scale + alpha) / radius
	p := m.Parts([]float64{-1})
	near(t, "polar", []float64{p.Polar}, []float64{polar}, 1e-15)
	w, sphere := 0.3*units.Angstrom, radius+probe*units.Angstrom
	// The soft border adds w^2/5 to the squared radius: the mean of u^2 over it.
	near(t, "area", m.area.value, []float64{4 * math.Pi * (sphere*sphere + w*w/5)}, 1e-10)
	grad := make([]float64, 3)
	m.AddGradient([]float64{-1}, grad)
	near(t, "gradient", grad, []float64{0, 0, 0}, 1e-18)
}

// Two molecules beyond the cut-off: neither changes the other's radii and areas.
func TestFarApart(t *testing.T) {
	a, b := find(t, "acetic_acid"), find(t, "ammonia")
	x := b.coordinates()
	for i := 0; i < len(x); i += 3 {
		x[i] += 80
	}
	m, err := New(slices.Concat(a.numbers(), b.numbers()), "water")
	if err != nil {
		t.Fatal(err)
	}
	if err := m.Update(slices.Concat(a.coordinates(), x)); err != nil {
		t.Fatal(err)
	}
	inA, inB := a.solvated["water"], b.solvated["water"]
	near(t, "Born radii", m.born.radius, slices.Concat(inA.BornRadii, inB.BornRadii), 5e-11)
	near(t, "areas", m.area.value, slices.Concat(inA.Areas, inB.Areas), 4e-9)
}

// Every element that has parameters has energy and gradient, beside oxygen, in
// every solvent; the others are refused by name.
func TestEveryElement(t *testing.T) {
	refused := 0
	for _, solvent := range Names() {
		for z := 0; z <= MaxZ+1; z++ {
			m, err := New([]int{8, z}, solvent)
			if z < 1 || z > 83 || z >= 57 && z <= 71 {
				var unsupported *Unsupported
				if !errors.As(err, &unsupported) || unsupported.Atom != 1 || unsupported.Z != z {
					t.Errorf("element %d in %s: error %v", z, solvent, err)
				}
				refused++
				continue
			}
			if err != nil {
				t.Fatal(err)
			}
			if err := m.Update([]float64{0, 0, 0, 0, 0, 4}); err != nil {
				t.Fatal(err)
			}
			q, grad := []float64{-0.3, 0.3}, make([]float64, 6)
			m.AddGradient(q, grad)
			p := m.Parts(q)
			if !(p.Polar < 0 && p.Polar > -0.1 && p.HydrogenBonds <= 0 && math.Abs(p.Sum()) < 0.1) || !(math.Abs(grad[5]) < 0.1 && grad[5] != 0) {
				t.Errorf("element %d in %s: %+v, gradient %g", z, solvent, p, grad[5])
			}
		}
	}
	if refused == 0 {
		t.Error("no element was refused")
	}
}
