package forcefield

import "math"

// A stretch is the harmonic bond term k/2 (r - r0)^2.
// Source: Rappe et al., J. Am. Chem. Soc. 1992, 114, 10024, eq. 1a.
type stretch struct {
	i, j  int32
	k, r0 float64 // hartree/bohr^2, bohr
}

type stretches []stretch

func (stretches) name() string { return "stretch" }

func (ss stretches) addTo(grad, x []float64) float64 {
	var energy float64
	for _, s := range ss {
		d := arrow(x, s.i, s.j)
		r := math.Sqrt(dot(d, d))
		energy += 0.5 * s.k * (r - s.r0) * (r - s.r0)
		if grad == nil {
			continue
		}
		f := s.k * (r - s.r0) / r
		push(grad, s.i, f, d)
		push(grad, s.j, -f, d)
	}
	return energy
}

func (s *skeleton) stretches() stretches {
	var out stretches
	for _, l := range s.links {
		k := stretchConstant(s.types[l.i], s.types[l.j], l.length)
		out = append(out, stretch{int32(l.i), int32(l.j), k, l.length})
	}
	return out
}
