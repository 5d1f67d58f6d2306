package forcefield

import "math"

// closest2 is the square of the shortest distance, bohr, at which two atoms
// still count as apart.
const closest2 = 1e-4

// separate returns an error where a coordinate is not finite or two atoms have
// the same place. It looks at all pairs: the bonded terms divide by distances.
func separate(x []float64) error {
	var sum float64
	for _, v := range x {
		sum += v
	}
	if math.IsNaN(sum) || math.IsInf(sum, 0) {
		return ErrNotFinite
	}
	for i := 0; i < len(x); i += 3 {
		a0, a1, a2 := x[i], x[i+1], x[i+2]
		for j := 0; j < i; j += 3 {
			d0 := x[j] - a0
			if d0*d0 >= closest2 {
				continue
			}
			d1, d2 := x[j+1]-a1, x[j+2]-a2
			if d0*d0+d1*d1+d2*d2 < closest2 {
				return ErrCoincident
			}
		}
	}
	return nil
}

// finite returns an error where the energy or a gradient component is not.
func finite(energy float64, grad []float64) error {
	sum := energy
	for _, g := range grad {
		sum += math.Abs(g)
	}
	if math.IsNaN(sum) || math.IsInf(sum, 0) {
		return ErrNotFinite
	}
	return nil
}
