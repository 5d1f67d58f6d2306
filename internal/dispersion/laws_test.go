package dispersion

import (
	"math"
	"slices"
	"testing"
)

// all returns energies of all kinds, charges given.
func all(t *testing.T, numbers []int, x, q []float64, charge float64) []float64 {
	t.Helper()
	d4 := NewD4(numbers)
	d4.Update(x)
	alone, err := NewD4EEQ(numbers).Energy(x, charge, nil)
	if err != nil {
		t.Fatal(err)
	}
	return []float64{
		NewD3(numbers, HF3c).Energy(x, nil),
		d4.EnergyPotential(q, make([]float64, len(q))),
		d4.ThreeBody(),
		alone,
	}
}

// Turning, moving, mirroring or renumbering changes nothing.
func TestInvariance(t *testing.T) {
	m := find(t, "methylimidazolium")
	numbers, x, q := m.numbers(), m.coordinates(), m.Mulliken
	want := all(t, numbers, x, q, m.Charge)

	c, s := math.Cos(1.1), math.Sin(1.1)
	moved := slices.Clone(x)
	for i := 0; i < len(x); i += 3 {
		moved[i], moved[i+1], moved[i+2] = c*x[i]-s*x[i+1]+3, s*x[i]+c*x[i+1]-7, 11-x[i+2]
	}
	near(t, "moved", all(t, numbers, moved, q, m.Charge), want, 1e-13)

	slices.Reverse(numbers)
	slices.Reverse(moved) // x, y, z of every atom are reversed too: a mirror image
	back := slices.Clone(q)
	slices.Reverse(back)
	near(t, "renumbered", all(t, numbers, moved, back, m.Charge), want, 1e-13)
}

// Two molecules far apart have the sum of their energies. EEQ charges would
// flow between them, so D4EEQ is left out.
func TestFarApart(t *testing.T) {
	a, b := find(t, "methane"), find(t, "ammonia")
	xb := b.coordinates()
	for i := range xb {
		xb[i] += 100
	}
	far := all(t, slices.Concat(a.numbers(), b.numbers()), slices.Concat(a.coordinates(), xb), slices.Concat(a.Mulliken, b.Mulliken), 0)
	ea, eb := all(t, a.numbers(), a.coordinates(), a.Mulliken, 0), all(t, b.numbers(), b.coordinates(), b.Mulliken, 0)
	for i := range 3 {
		near(t, "sum", far[i:i+1], []float64{ea[i] + eb[i]}, 1e-13)
	}
}

// Every element works, alone and in a pair, and the energy is attraction.
func TestEveryElement(t *testing.T) {
	for z := 1; z <= MaxZ; z++ {
		one := all(t, []int{z}, []float64{1, 2, 3}, []float64{0.1}, 0)
		near(t, "one atom", one, make([]float64, 4), 0)
		two := all(t, []int{z, 8}, []float64{0, 0, 0, 0, 0, 4.5}, []float64{0, 0}, 0)
		for i, e := range two {
			if i != 2 && !(e < 0 && e > -0.1) {
				t.Errorf("element %d with oxygen: energies %v", z, two)
			}
		}
	}
}

func TestNumbersOutOfRange(t *testing.T) {
	for _, z := range []int{0, -1, MaxZ + 1} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("no panic for element %d", z)
				}
			}()
			NewD3([]int{z}, HF)
		}()
	}
}

// Where no reference has nearly as many neighbours, the one with most stands.
func TestWeightsFarOut(t *testing.T) {
	refs := []reference{{cn: 0, gaussians: 1}, {cn: 2, gaussians: 3}, {cn: 2, gaussians: 1}}
	in := &interpolation{steepness: 6, underflow: 1.5e-154}
	w, dw := make([]float64, 3), make([]float64, 3)
	in.atomWeights(refs, 15, w, dw)
	near(t, "weight", w, []float64{0, 1, 1}, 0)
	near(t, "slope", dw, []float64{0, 0, 0}, 0)
}
