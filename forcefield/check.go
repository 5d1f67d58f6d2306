package forcefield

import "math"

// closest2 is the square of the shortest distance, bohr, at which two atoms
// still count as apart.
const closest2 = 1e-4

// separate returns an error where a coordinate is not finite or two atoms have
// the same place. It looks at all pairs: the bonded terms divide by distances.
func (t *tables) separate(x []float64) error {
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

// coulomb makes the electrostatic term of the given charges: atoms three bonds
// apart count half (own choice), nearer ones not at all.
func (t *tables) coulomb(q []float64) charges {
	n := len(q)
	out := make(charges, 0, len(t.hard))
	for i := range n {
		for j := i + 1; j < n; j++ {
			share := 1.0
			switch t.apart[i*n+j] {
			case 0, 1, 2:
				continue
			case 3:
				share = oneFourShare
			}
			out = append(out, charged{int32(i), int32(j), coulombEnergy * q[i] * q[j] * share})
		}
	}
	return out
}
