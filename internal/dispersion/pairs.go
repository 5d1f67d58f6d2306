// Package dispersion computes London dispersion energies and what belongs to
// them: D3(BJ) for Hartree-Fock, D4 with self-consistent charges for GFN2-xTB,
// D4 with equilibrated charges, and those charges (EEQ) for the force field.
//
// Everything is in atomic units. Coordinates are flat, 3N numbers in bohr. A
// value of one of the types serves one goroutine at a time: it owns its
// scratch memory, and nothing is allocated after the constructor. Two atoms at
// one place give NaN; callers look at a geometry first, and only EEQ does so
// itself.
//
// D3: S. Grimme, J. Antony, S. Ehrlich, H. Krieg, J. Chem. Phys. 2010, 132,
// 154104, with the damping of S. Grimme, S. Ehrlich, L. Goerigk, J. Comput.
// Chem. 2011, 32, 1456. D4 and EEQ: E. Caldeweyher et al., J. Chem. Phys. 2019,
// 150, 154122. Elements: Z = 1 to 86.
package dispersion

import "math"

// pairs holds the distances of all pairs of atoms; pair (a, b) with b < a has
// the place a(a-1)/2 + b.
type pairs struct {
	n int
	x []float64 // bohr, 3n: where update was
	r []float64 // bohr
}

func newPairs(n int) pairs {
	return pairs{n: n, x: make([]float64, 3*n), r: make([]float64, n*(n-1)/2)}
}

// update computes the distances at x.
func (p *pairs) update(x []float64) {
	if len(x) != 3*p.n {
		panic("dispersion: coordinates of the wrong length")
	}
	copy(p.x, x)
	k := 0
	for a := range p.n {
		for b := range a {
			dx, dy, dz := x[3*a]-x[3*b], x[3*a+1]-x[3*b+1], x[3*a+2]-x[3*b+2]
			p.r[k] = math.Sqrt(dx*dx + dy*dy + dz*dz)
			k++
		}
	}
}

// addGradient adds to grad the gradient of an energy of which slope holds the
// derivatives with respect to each distance.
func (p *pairs) addGradient(slope, grad []float64) {
	if len(grad) != 3*p.n {
		panic("dispersion: gradient of the wrong length")
	}
	k := 0
	for a := range p.n {
		for b := range a {
			s := slope[k] / p.r[k]
			for c := range 3 {
				g := s * (p.x[3*a+c] - p.x[3*b+c])
				grad[3*a+c] += g
				grad[3*b+c] -= g
			}
			k++
		}
	}
}
