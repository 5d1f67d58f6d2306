package semiempirical

import "testing"

// A gradient inside a relaxation allocates what it hands back and nothing else:
// the same number of times for 20 atoms and for 50, in the gas and in water.
func TestWarmGradientAllocates(t *testing.T) {
	for _, around := range []string{"none", "water"} {
		for _, name := range []string{"pdb-1pa9", "csd-VIMYUL"} {
			m := named(t, name)
			s, err := New(m.numbers(), m.Charge, 1, Options{Accuracy: 0.1, Solvent: around})
			if err != nil {
				t.Fatal(err)
			}
			x, grad := m.coordinates(), make([]float64, len(m.X))
			move := 0.0
			gradient := func() { // to and fro between two shapes
				move = 0.01 - move
				x[4] += 2*move - 0.01
				mustGradient(t, s, grad, x)
			}
			for range 60 { // until the mixing's memory is as long as it gets
				gradient()
			}
			// parts, charges and dipole of the point; step and limits of the loop
			if n := testing.AllocsPerRun(20, gradient); n > 5 {
				t.Errorf("%s in %s: %g allocations a gradient, want at most 5", name, around, n)
			}
		}
	}
}
