package ensemble

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"torsieve/internal/linalg"
	"torsieve/internal/units"
)

// Shared returns the correlation of the errors of two shapes whose RMSD over heavy
// atoms and polar hydrogens is given in bohr:
//
//	0.78 exp(-r/0.05 A) + 0.22 exp(-(r/1.5 A)^2).
//
// Measured on 150 molecules of Folmsbee and Hutchison (2021), GFN2-xTB, PBEh-3c,
// B3LYP-D3(BJ)/def2-SVP and GFN-FF against DLPNO-CCSD(T): over pairs of conformers
// closer than 0.05 A the errors' correlation is about 0.6, at 0.1 to 0.2 A only
// 0.25, and it fades to nothing at 2 A. The form is our own.
func Shared(rmsd float64) float64 {
	r := rmsd / units.Angstrom
	return 0.78*math.Exp(-r/0.05) + 0.22*math.Exp(-r*r/(1.5*1.5))
}

// usuallyShared is the mean of Shared over the pairs of conformers of the
// molecules that scatters were fitted on (0.168). What errors share within a
// molecule does not show in their deviation about its mean, which is what a
// Scatter states: the errors themselves are larger.
const usuallyShared = 0.168

// manyShared bounds the states whose errors are drawn together; the lowest come
// first. Those beyond weigh little and have errors of their own.
const manyShared = 400

// A sharing turns independent numbers into correlated ones.
type sharing struct {
	which  []int     // the states that share, lowest first
	factor []float64 // n*n: rows of length one, row i . row j the correlation
	buffer []float64
}

// newSharing returns nil for nil distances.
func newSharing(states []State, distances [][]float64) *sharing {
	if distances == nil {
		return nil
	}
	checkDistances(distances, len(states))
	s := &sharing{which: make([]int, len(states))}
	for i := range s.which {
		s.which[i] = i
	}
	slices.SortStableFunc(s.which, func(a, b int) int { return cmp.Compare(states[a].Energy, states[b].Energy) })
	s.which = s.which[:min(len(s.which), manyShared)]
	n := len(s.which)
	s.buffer = make([]float64, n)
	kernel := make([]float64, n*n)
	for a, i := range s.which {
		for b, j := range s.which {
			kernel[a*n+b] = Shared(distances[i][j])
		}
	}
	s.factor = root(kernel, n)
	return s
}

func checkDistances(d [][]float64, n int) {
	if len(d) != n {
		panic(fmt.Sprintf("ensemble: distances of %d states, want %d", len(d), n))
	}
	for _, row := range d {
		if len(row) != n {
			panic(fmt.Sprintf("ensemble: distances to %d states, want %d", len(row), n))
		}
		for _, v := range row {
			if !(v >= 0) || math.IsInf(v, 0) {
				panic(fmt.Sprintf("ensemble: distance %g", v))
			}
		}
	}
}

// root returns F with F F^T = kernel. The smallest RMSD over relabellings is no
// metric, so that the kernel may have negative eigenvalues: they are cut off, and
// the rows brought back to length one, which keeps the variances.
func root(kernel []float64, n int) []float64 {
	values := make([]float64, n)
	if err := linalg.NewEigen(n).Solve(kernel, values, kernel); err != nil {
		panic("ensemble: correlation of errors: " + err.Error()) // finite numbers of 0 to 1 do not come here
	}
	factor := make([]float64, n*n)
	for i := range n {
		row := factor[i*n : (i+1)*n]
		var square float64
		for k := range n {
			row[k] = kernel[k*n+i] * math.Sqrt(math.Max(values[k], 0))
			square += row[k] * row[k]
		}
		for k := range row {
			row[k] /= math.Sqrt(square)
		}
	}
	return factor
}

// mix replaces independent standard normal numbers, one per state, by correlated
// ones of variance 1/(1-usuallyShared).
func (s *sharing) mix(z []float64) {
	if s == nil {
		return
	}
	n := len(s.which)
	larger := 1 / math.Sqrt(1-usuallyShared)
	for i := range z {
		z[i] *= larger
	}
	for a, i := range s.which {
		s.buffer[a] = z[i]
	}
	for a, i := range s.which {
		row := s.factor[a*n : (a+1)*n]
		var sum float64
		for k, v := range row {
			sum += v * s.buffer[k]
		}
		z[i] = sum
	}
}
