package forcefield

import "math"

// A torsion is v [1 - s cos(n phi)] on the dihedral i-j-k-l, faded out where
// one of its angles is nearly straight.
// Source: Rappe et al., J. Am. Chem. Soc. 1992, 114, 10024, eq. 15; gradient
// after A. Blondel, M. Karplus, J. Comput. Chem. 1996, 17, 1132. The paper sets
// the term to zero at straight angles; the fading is ours.
type torsion struct {
	i, j, k, l int32
	n          int32
	v, sign    float64 // half of the barrier per path, hartree; cos(n phi0), 1 or -1
}

type torsions []torsion

func (torsions) name() string { return "torsion" }

// straight2 is sin^2 of 10 degrees: nearer to a line a torsion fades.
var straight2 = math.Pow(math.Sin(10*math.Pi/180), 2)

func (ts torsions) addTo(grad, x []float64) float64 {
	var energy float64
	for m := range ts {
		t := &ts[m]
		f, g, h := arrow(x, t.i, t.j), arrow(x, t.j, t.k), arrow(x, t.l, t.k)
		a, b := cross(f, g), cross(h, g)
		aa, bb, gg := dot(a, a), dot(b, b), dot(g, g)
		ff, hh := dot(f, f), dot(h, h)
		if aa < straight2*ff*gg || bb < straight2*hh*gg {
			energy += t.faded(grad, f, g, h)
			continue
		}
		gl := math.Sqrt(gg)
		ab := 1 / math.Sqrt(aa*bb)
		cn, sn := multiple(t.n, dot(a, b)*ab, dot(cross(b, a), g)*ab/gl)
		energy += t.v * (1 - t.sign*cn)
		if grad == nil {
			continue
		}
		t.pushAngle(grad, t.v*t.sign*float64(t.n)*sn, f, g, h, a, b)
	}
	return energy
}

// multiple returns cos(n phi) and sin(n phi) from cos(phi) and sin(phi).
func multiple(n int32, c, s float64) (cn, sn float64) {
	cn, sn = c, s
	for range n - 1 {
		cn, sn = cn*c-sn*s, sn*c+cn*s
	}
	return cn, sn
}

// pushAngle adds slope times the derivative of the dihedral.
func (t *torsion) pushAngle(grad []float64, slope float64, f, g, h, a, b vec) {
	gl := math.Sqrt(dot(g, g))
	pa, pb := slope/dot(a, a), slope/dot(b, b)
	fg, hg := dot(f, g)/gl, dot(h, g)/gl
	push(grad, t.i, -pa*gl, a)
	push(grad, t.l, pb*gl, b)
	push(grad, t.j, 1, combine(pa*(gl+fg), a, -pb*hg, b))
	push(grad, t.k, 1, combine(-pa*fg, a, pb*(hg-gl), b))
}

// faded is the term where an angle is within 10 degrees of straight: times
// q^2 (3 - 2q) for each of the two angles, q = (1 - |cos|)/(1 - cos 10 deg).
func (t *torsion) faded(grad []float64, f, g, h vec) float64 {
	a, b := cross(f, g), cross(h, g)
	aa, bb := dot(a, a), dot(b, b)
	if aa == 0 || bb == 0 {
		return 0
	}
	c1, c2 := cosine(f, g), cosine(h, g)
	s1, d1 := fade(c1)
	s2, d2 := fade(c2)
	gl := math.Sqrt(dot(g, g))
	ab := 1 / math.Sqrt(aa*bb)
	cn, sn := multiple(t.n, dot(a, b)*ab, dot(cross(b, a), g)*ab/gl)
	e := t.v * (1 - t.sign*cn)
	if grad == nil {
		return e * s1 * s2
	}
	t.pushAngle(grad, s1*s2*t.v*t.sign*float64(t.n)*sn, f, g, h, a, b)
	t.pushCosine(grad, t.i, t.j, e*s2*d1, c1, f, g)
	t.pushCosine(grad, t.l, t.k, e*s1*d2, c2, h, g)
	return e * s1 * s2
}

// pushCosine adds slope times the derivative of the cosine between u, the bond
// from inner to outer, and g, the axis from k to j.
func (t *torsion) pushCosine(grad []float64, outer, inner int32, slope, c float64, u, g vec) {
	uu, gg := dot(u, u), dot(g, g)
	ug := 1 / math.Sqrt(uu*gg)
	du := combine(slope*ug, g, -slope*c/uu, u)
	dg := combine(slope*ug, u, -slope*c/gg, g)
	push(grad, outer, 1, du)
	push(grad, inner, -1, du)
	push(grad, t.j, 1, dg)
	push(grad, t.k, -1, dg)
}

func cosine(u, v vec) float64 { return dot(u, v) / math.Sqrt(dot(u, u)*dot(v, v)) }

// fade returns the factor for an angle with cosine c, and its derivative.
func fade(c float64) (s, ds float64) {
	width := 1 - math.Sqrt(1-straight2)
	q := (1 - math.Abs(c)) / width
	if q >= 1 {
		return 1, 0
	}
	return q * q * (3 - 2*q), -6 * q * (1 - q) / width * math.Copysign(1, c)
}

// torsions adds one term a path about every bond that has a rule; scale, where
// not nil, multiplies the barrier of a bond.
func (s *skeleton) torsions(scale func(n int) float64) torsions {
	var out torsions
	for n, l := range s.links {
		r := torsionRule(s.types[l.i], s.types[l.j], l.order, s.flatNeighbour(l.i, l.j), s.flatNeighbour(l.j, l.i))
		if r.barrier == 0 {
			continue
		}
		if scale != nil {
			r.barrier *= scale(n)
		}
		first := len(out)
		s.paths(l.i, l.j, func(i, k int) {
			out = append(out, torsion{int32(i), int32(l.i), int32(l.j), int32(k), r.n, 0, r.sign})
		})
		for m := first; m < len(out); m++ {
			out[m].v = r.barrier / 2 / float64(len(out)-first)
		}
	}
	return out
}
