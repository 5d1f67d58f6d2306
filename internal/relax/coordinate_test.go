package relax

import (
	"math"
	"testing"
)

// TestDerivativesOfCoordinates compares each kind with central differences.
func TestDerivativesOfCoordinates(t *testing.T) {
	bent := []float64{0.1, 0.2, -0.1, 1.9, 0.3, 0.2, 2.6, 2.1, 0.4, 0.2, 2.5, 1.9}
	straight := []float64{-2, 0.1, 0, 0, 0, 0.05, 2.1, 0, 0, 0, 2, 2}
	for _, c := range []struct {
		name string
		coordinate
		x []float64
	}{
		{"stretch", coordinate{kind: stretch, atoms: [4]int{2, 0, 2, 2}}, bent},
		{"bend", coordinate{kind: bend, atoms: [4]int{0, 1, 2, 0}}, bent},
		{"torsion", coordinate{kind: torsion, atoms: [4]int{0, 1, 2, 3}}, bent},
		{"pyramid", coordinate{kind: pyramid, atoms: [4]int{1, 0, 2, 3}}, bent},
		{"sideways", coordinate{kind: sideways, atoms: [4]int{0, 1, 2, 0}, axis: [3]float64{0, 0.6, 0.8}}, straight},
		{"place", coordinate{kind: place, atoms: [4]int{3, 3, 3, 3}, axis: [3]float64{0, 1, 0}}, bent},
	} {
		t.Run(c.name, func(t *testing.T) {
			var row [12]float64
			c.derivative(&row, c.x)
			want := make([]float64, len(c.x))
			for k, a := range c.depends() {
				for d := range 3 {
					want[3*a+d] += row[3*k+d]
				}
			}
			const h = 1e-5
			for i := range c.x {
				y := append([]float64(nil), c.x...)
				y[i] += h
				up := c.value(y)
				y[i] -= 2 * h
				if got := c.change(c.value(y), up) / (2 * h); math.Abs(got-want[i]) > 1e-8 {
					t.Errorf("component %d: %g, by differences %g", i, want[i], got)
				}
			}
		})
	}
}

func TestTorsionsChangeTheShortWay(t *testing.T) {
	c := coordinate{kind: torsion}
	if got := c.change(3.1, -3.1); math.Abs(got-(2*math.Pi-6.2)) > 1e-12 {
		t.Errorf("from 3.1 to -3.1 rad it is %g", got)
	}
}
