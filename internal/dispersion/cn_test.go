package dispersion

import (
	"math"
	"testing"
)

func TestCoordinationNumbers(t *testing.T) {
	for _, m := range references(t) {
		p := newPairs(len(m.Symbols))
		p.update(m.coordinates())
		cn := make([]float64, p.n)
		newD3Coordination(m.numbers()).update(&p, cn)
		near(t, m.Name+" D3", cn, m.D3CN, 1e-12)
		newD4Coordination(m.numbers()).update(&p, cn)
		near(t, m.Name+" D4", cn, m.D4CN, 1e-12)
	}
}

// Slopes of the counting functions against central differences.
func TestCountSlopes(t *testing.T) {
	for _, count := range []func(r, rc float64) (float64, float64){expCount, erfCount} {
		for _, r := range []float64{0.5, 1.8, 2.6, 2.9, 4, 8} {
			const rc, h = 2.7, 1e-4
			up, _ := count(r+h, rc)
			down, _ := count(r-h, rc)
			if _, got := count(r, rc); math.Abs(got-(up-down)/(2*h)) > 1e-6 {
				t.Errorf("slope at %g: %g, numeric %g", r, got, (up-down)/(2*h))
			}
		}
	}
}
