package forcefield

import "math"

// A bend is an angle term as a polynomial in the cosine of the angle i-j-k at
// j. All forms of the paper are such polynomials, and the gradient of the
// cosine is finite where that of the angle is not.
// Source: Rappe et al., J. Am. Chem. Soc. 1992, 114, 10024, eqs. 10 to 12.
type bend struct {
	i, j, k int32
	p       [5]float64 // hartree, coefficients of cos^0 .. cos^4
}

type bends []bend

func (bends) name() string { return "bend" }

func (bs bends) addTo(grad, x []float64) float64 {
	var energy float64
	for n := range bs {
		b := &bs[n]
		u, v := arrow(x, b.i, b.j), arrow(x, b.k, b.j)
		uu, vv := dot(u, u), dot(v, v)
		uv := 1 / math.Sqrt(uu*vv)
		c := dot(u, v) * uv
		energy += b.p[0] + c*(b.p[1]+c*(b.p[2]+c*(b.p[3]+c*b.p[4])))
		if grad == nil {
			continue
		}
		f := b.p[1] + c*(2*b.p[2]+c*(3*b.p[3]+c*4*b.p[4]))
		gi := combine(f*uv, v, -f*c/uu, u)
		gk := combine(f*uv, u, -f*c/vv, v)
		push(grad, b.i, 1, gi)
		push(grad, b.k, 1, gk)
		push(grad, b.j, -1, gi)
		push(grad, b.j, -1, gk)
	}
	return energy
}

// Shapes of an angle term, each with curvature k (hartree/rad^2) at its minimum.

// linearBend is k (1 + cos t), with its minimum at 180 degrees. Eq. 10 as
// printed, with a minus sign, has it at 0.
func linearBend(k float64) [5]float64 { return [5]float64{k, k} }

// trigonalBend is k/9 (1 - cos 3t).
func trigonalBend(k float64) [5]float64 { return [5]float64{k / 9, k / 3, 0, -4 * k / 9} }

// squareBend is k/16 (1 - cos 4t): minima at 90 and 180 degrees.
func squareBend(k float64) [5]float64 { return [5]float64{0, 0, k / 2, 0, -k / 2} }

// rightBend is k/4 (1 + cos 2t): a minimum at 90 degrees only.
func rightBend(k float64) [5]float64 { return [5]float64{0, 0, k / 2} }

// generalBend is k (C0 + C1 cos t + C2 cos 2t) with its minimum, 0, where
// cos t = c0.
func generalBend(k, c0 float64) [5]float64 {
	c2 := 1 / (4 * (1 - c0*c0))
	return [5]float64{k * c2 * 2 * c0 * c0, -4 * k * c2 * c0, 2 * k * c2}
}

// crowdedBend is k/16 (1 + cos t)^4, which only drives the arms apart: for five
// or seven neighbours, where no single natural angle exists. The paper has no
// form for them; this one makes a trigonal bipyramid of five. Own choice.
func crowdedBend(k float64) [5]float64 {
	return [5]float64{k / 16, k / 4, 3 * k / 8, k / 4, k / 16}
}

// trigonalAngle is the 120 degrees of the table. Tabulated whole fractions of a
// turn are exact after conversion, see atomType.
const trigonalAngle = 2 * math.Pi / 3

// An angleRule replaces the natural angle of one bend, or returns 0.
type angleRule func(i, j, k int) float64

// With open set, trigonal centres take the general form: theirs vanishes at 0
// degrees too, where starting structures would collapse.
func (s *skeleton) bends(special angleRule, open bool) bends {
	var out bends
	for j, arms := range s.arms {
		for n, a := range arms {
			for _, b := range arms[n+1:] {
				angle := 0.0
				if special != nil {
					angle = special(a.atom, j, b.atom)
				}
				if t := s.types[j]; open && angle == 0 && t.Angle == trigonalAngle {
					angle = trigonalAngle
				}
				out = append(out, bend{int32(a.atom), int32(j), int32(b.atom), s.bendShape(a, j, b, angle)})
			}
		}
	}
	return out
}

// bendShape chooses the form by the centre's natural angle and its number of
// neighbours; angle, where not 0, replaces the natural one.
func (s *skeleton) bendShape(a arm, j int, b arm, angle float64) [5]float64 {
	t, neighbours := s.types[j], len(s.arms[j])
	crowded := t.MainGroup && t.digit() == '3' && neighbours > 4
	natural := t.Angle
	switch {
	case angle != 0:
		natural = angle
	case crowded:
		natural = math.Pi / 2
	}
	c0 := math.Cos(natural)
	k := bendConstant(s.types[a.atom], s.types[b.atom], s.links[a.link].length, s.links[b.link].length, c0)
	switch {
	case angle != 0:
		return generalBend(k, c0)
	case crowded && neighbours != 6:
		return crowdedBend(k)
	case crowded:
		return squareBend(k)
	}
	switch {
	case natural == math.Pi:
		return linearBend(k)
	case natural == trigonalAngle:
		return trigonalBend(k)
	case natural == math.Pi/2 && (t.digit() == '4' || t.digit() == '6'):
		return squareBend(k)
	case natural == math.Pi/2:
		return rightBend(k)
	}
	return generalBend(k, c0)
}
