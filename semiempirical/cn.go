package semiempirical

import "math"

// A coordination counts each atom's neighbours; levels and multipole radii
// depend on it.
type coordination struct {
	numbers []float64
	slope   []float64 // d count/dR of each pair
	radius  []float64 // scaled sum of radii of each pair, bohr
}

const (
	cnSteep       = 10
	cnSteeper     = 20
	cnOffset      = 2 // bohr
	cnCutoff      = 25
	cnRadiusScale = 4.0 / 3
)

func newCoordination(elements []*element) *coordination {
	c := &coordination{numbers: make([]float64, len(elements))}
	for a, ea := range elements {
		for _, eb := range elements[:a] {
			c.radius = append(c.radius, cnRadiusScale*(ea.CNRadius+eb.CNRadius))
		}
	}
	c.slope = make([]float64, len(c.radius))
	return c
}

// update counts by the product of two logistic functions, of the sum of radii
// and of 2 bohr more.
func (c *coordination) update(g *geometry) {
	clear(c.numbers)
	k := 0
	for a := range c.numbers {
		for b := range a {
			c.slope[k] = 0
			if r := g.r[k]; r < cnCutoff {
				f1, d1 := logistic(r, cnSteep, c.radius[k])
				f2, d2 := logistic(r, cnSteeper, c.radius[k]+cnOffset)
				c.numbers[a] += f1 * f2
				c.numbers[b] += f1 * f2
				c.slope[k] = d1*f2 + f1*d2
			}
			k++
		}
	}
}

// logistic is 1/(1+exp(-k(r0/r-1))) and its derivative.
func logistic(r, k, r0 float64) (f, slope float64) {
	f = 1 / (1 + math.Exp(-k*(r0/r-1)))
	return f, -k * r0 / (r * r) * f * (1 - f)
}

// addGradient adds the gradient of an energy through the coordination numbers.
func (c *coordination) addGradient(g *geometry, grad, dEdCN []float64) {
	k := 0
	for a := range c.numbers {
		for b := range a {
			if c.slope[k] != 0 {
				addPair(grad, a, b, (dEdCN[a]+dEdCN[b])*c.slope[k]/g.r[k], g.v[k])
			}
			k++
		}
	}
}
