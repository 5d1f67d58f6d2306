package forcefield

import (
	"math"

	"torsieve/internal/units"
)

// An inversion is k (C0 + C1 cos w + C2 cos 2w), w the angle between the bond
// c-l and the plane c, i, j. A centre has three of them.
// Source: Rappe et al., J. Am. Chem. Soc. 1992, 114, 10024, eq. 18.
type inversion struct {
	c, i, j, l    int32
	k, c0, c1, c2 float64 // hartree; no unit
}

type inversions []inversion

func (inversions) name() string { return "inversion" }

func (vs inversions) addTo(grad, x []float64) float64 {
	var energy float64
	for n := range vs {
		v := &vs[n]
		a, b, d := arrow(x, v.i, v.c), arrow(x, v.j, v.c), arrow(x, v.l, v.c)
		normal := cross(a, b)
		nn, dd := math.Sqrt(dot(normal, normal)), math.Sqrt(dot(d, d))
		if nn == 0 { // i, c, j on a line: no plane
			continue
		}
		sw := dot(normal, d) / (nn * dd)
		cw := math.Max(1e-8, math.Sqrt(math.Max(0, 1-sw*sw)))
		energy += v.k * (v.c0 + v.c1*cw + v.c2*(1-2*sw*sw))
		if grad == nil {
			continue
		}
		f := -v.k * sw * (v.c1/cw + 4*v.c2)
		gl := combine(f/(nn*dd), normal, -f*sw/(dd*dd), d)
		t := combine(f/(nn*dd), d, -f*sw/(nn*nn), normal)
		gi, gj := cross(b, t), cross(t, a)
		push(grad, v.l, 1, gl)
		push(grad, v.i, 1, gi)
		push(grad, v.j, 1, gj)
		push(grad, v.c, -1, gl)
		push(grad, v.c, -1, gi)
		push(grad, v.c, -1, gj)
	}
	return energy
}

// planarInversion keeps a centre flat: 1 - cos w, shared by three terms.
func planarInversion(k float64) inversion { return inversion{k: k / 3, c0: 1, c1: -1} }

// pyramidInversion has its minimum at w0 and 22 kcal/mol at the plane, shared
// by three terms.
func pyramidInversion(w0 float64) inversion {
	const barrier = 22 * units.KcalPerMol
	c := math.Cos(w0)
	k := barrier / (2 * (1 - c) * (1 - c))
	return inversion{k: k / 3, c0: 2*c*c + 1, c1: -4 * c, c2: 1}
}

// inversions adds the three terms of each centre with three neighbours that
// has a rule; nitrogen is the barrier of sp2 nitrogen, 0 in the paper.
func (s *skeleton) inversions(nitrogen float64) inversions {
	var out inversions
	for c, arms := range s.arms {
		if len(arms) != 3 {
			continue
		}
		v, ok := s.inversionRule(c, nitrogen)
		if !ok {
			continue
		}
		for n := range 3 {
			v.c, v.i, v.j, v.l = int32(c), int32(arms[(n+1)%3].atom), int32(arms[(n+2)%3].atom), int32(arms[n].atom)
			out = append(out, v)
		}
	}
	return out
}

func (s *skeleton) inversionRule(c int, nitrogen float64) (inversion, bool) {
	const degree = math.Pi / 180
	switch s.types[c].Name {
	case "C_2", "C_R":
		for _, a := range s.arms[c] {
			if s.types[a.atom].Name == "O_2" {
				return planarInversion(50 * units.KcalPerMol), true
			}
		}
		return planarInversion(6 * units.KcalPerMol), true
	case "N_2", "N_R":
		return planarInversion(nitrogen), nitrogen != 0
	case "P_3+3":
		return pyramidInversion(84.4339 * degree), true
	case "As3+3":
		return pyramidInversion(86.9735 * degree), true
	case "Sb3+3":
		return pyramidInversion(87.7047 * degree), true
	case "Bi3+3":
		return pyramidInversion(90 * degree), true
	}
	return inversion{}, false
}
