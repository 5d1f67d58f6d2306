package dispersion

import "math"

// coordination is one definition of the coordination number: for each atom,
// the sum over all others of a smooth count of the pair that falls from weight
// to 0 around the distance rc.
type coordination struct {
	count  func(r, rc float64) (count, slope float64)
	cutoff float64   // bohr; pairs beyond it do not count
	rc     []float64 // bohr, one a pair
	weight []float64 // one a pair
	slope  []float64 // d count / d distance of the last update, one a pair
}

// newD3Coordination counts as D3 does (J. Chem. Phys. 2010, 132, 154104).
func newD3Coordination(numbers []int) *coordination {
	return newCoordination(numbers, expCount, 40, plainWeight)
}

// newD4Coordination counts bonds in a fraction that falls with the difference
// of electronegativities (J. Chem. Phys. 2019, 150, 154122).
func newD4Coordination(numbers []int) *coordination {
	return newCoordination(numbers, erfCount, 30, covalentWeight)
}

// newEEQCoordination is D4's without the electronegativities.
func newEEQCoordination(numbers []int) *coordination {
	return newCoordination(numbers, erfCount, 25, plainWeight)
}

func newCoordination(numbers []int, count func(r, rc float64) (float64, float64), cutoff float64, weight func(za, zb int) float64) *coordination {
	n := len(numbers) * (len(numbers) - 1) / 2
	c := &coordination{count: count, cutoff: cutoff, slope: make([]float64, n)}
	radius := &atomicTable().radius
	for a, za := range numbers {
		for _, zb := range numbers[:a] {
			c.rc = append(c.rc, radius[za]+radius[zb])
			c.weight = append(c.weight, weight(za, zb))
		}
	}
	return c
}

func plainWeight(int, int) float64 { return 1 }

// covalentWeight is the share of a bond that D4 counts.
func covalentWeight(za, zb int) float64 {
	en := &atomicTable().electronegativity
	d := math.Abs(en[za]-en[zb]) + 19.08857
	return 4.10451 * math.Exp(-d*d/(2*11.28174*11.28174))
}

// expCount is D3's counting function with its steepness 16.
func expCount(r, rc float64) (count, slope float64) {
	e := math.Exp(-16 * (rc/r - 1))
	count = 1 / (1 + e)
	return count, -16 * rc / (r * r) * e * count * count
}

// erfCount is the counting function of D4 and EEQ with its steepness 7.5.
func erfCount(r, rc float64) (count, slope float64) {
	u := 7.5 * (r - rc) / rc
	return 0.5 * (1 + math.Erf(-u)), -7.5 / (math.SqrtPi * rc) * math.Exp(-u*u)
}

// update writes the coordination numbers into cn and keeps the slopes.
func (c *coordination) update(p *pairs, cn []float64) {
	clear(cn)
	k := 0
	for a := range p.n {
		for b := range a {
			c.slope[k] = 0
			if p.r[k] <= c.cutoff {
				count, slope := c.count(p.r[k], c.rc[k])
				cn[a] += c.weight[k] * count
				cn[b] += c.weight[k] * count
				c.slope[k] = c.weight[k] * slope
			}
			k++
		}
	}
}

// addSlopes adds to slope, one a pair, the derivatives of an energy with
// respect to the distances, given those with respect to the coordination
// numbers.
func (c *coordination) addSlopes(dEdCN, slope []float64) {
	k := 0
	for a := range dEdCN {
		for b := range a {
			slope[k] += (dEdCN[a] + dEdCN[b]) * c.slope[k]
			k++
		}
	}
}
