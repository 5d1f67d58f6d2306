package dispersion

import "math"

// threeBody is the damped triple-dipole term of Axilrod, Teller and Muto.
//
// Source: J. Chem. Phys. 2019, 150, 154122; the geometric
// mean of the pair coefficients stands for the C9 coefficient.
//
// All factors of a triple but the angular polynomial and the damping's
// denominator are products over its three pairs, so they are computed a pair
// at a time.
type threeBody struct {
	scale  float64
	cutoff float64 // bohr, switched as damping's
	width  float64
	r0     []float64 // bohr, damping radii, one a pair

	// One a pair, of the last geometry:
	r2    []float64 // R^2
	inv3  []float64 // R^-3
	ratio []float64 // (R0/R)^(16/3)
	root  []float64 // sqrt|C6| times the switch, 0 beyond the cut-off
	dlog  []float64 // d ln(switch) / d ln R
	slope []float64 // dE / d ln R
	share []float64 // sum of the energies of the triples that the pair belongs to
}

func newThreeBody(scale float64, r0 []float64, cutoff, width float64) *threeBody {
	n := len(r0)
	return &threeBody{
		scale: scale, cutoff: cutoff, width: width, r0: r0,
		r2: make([]float64, n), inv3: make([]float64, n), ratio: make([]float64, n), root: make([]float64, n),
		dlog: make([]float64, n), slope: make([]float64, n), share: make([]float64, n),
	}
}

// setPair takes over distance and coefficient of pair k.
func (t *threeBody) setPair(k int, r, c6 float64) {
	s, ds := switchOff(r, t.cutoff, t.width)
	x := t.r0[k] / r
	t.r2[k] = r * r
	t.inv3[k] = 1 / (r * r * r)
	t.ratio[k] = x * x * x * x * x * math.Cbrt(x)
	t.root[k] = math.Sqrt(math.Abs(c6)) * s
	t.dlog[k] = 0
	if s > 0 {
		t.dlog[k] = ds * r / s
	}
}

// energy sums over all triples of n atoms, in hartree.
func (t *threeBody) energy(n int) float64 {
	sum := 0.0
	for a := range n {
		rowA := a * (a - 1) / 2
		for b := range a {
			ab, rowB := rowA+b, b*(b-1)/2
			if t.root[ab] == 0 {
				continue
			}
			for c := range b {
				ac, bc := rowA+c, rowB+c
				p3 := t.inv3[ab] * t.inv3[ac] * t.inv3[bc]
				f := 1 / (1 + 6*t.ratio[ab]*t.ratio[ac]*t.ratio[bc])
				sum += t.root[ab] * t.root[ac] * t.root[bc] * f * angular(t.r2[ab], t.r2[bc], t.r2[ac], p3)
			}
		}
	}
	return t.scale * sum
}

// angular is the factor (1 + 3 cos cos cos)/P^3 of a triangle with the squared
// sides u, v, w; p3 is P^-3, P the product of the sides.
func angular(u, v, w, p3 float64) float64 {
	return p3 * (1 + 0.375*(u+v-w)*(u-v+w)*(v+w-u)/(u*v*w))
}

// slopes computes slope and share of each pair.
func (t *threeBody) slopes(n int) {
	clear(t.slope)
	clear(t.share)
	for a := range n {
		rowA := a * (a - 1) / 2
		for b := range a {
			ab, rowB := rowA+b, b*(b-1)/2
			if t.root[ab] == 0 {
				continue
			}
			for c := range b {
				t.tripleSlopes(ab, rowB+c, rowA+c)
			}
		}
	}
}

// tripleSlopes adds what one triple has for its pairs i, j, k.
func (t *threeBody) tripleSlopes(i, j, k int) {
	c9 := t.scale * t.root[i] * t.root[j] * t.root[k]
	if c9 == 0 {
		return
	}
	u, v, w := t.r2[i], t.r2[j], t.r2[k]
	p3 := t.inv3[i] * t.inv3[j] * t.inv3[k]
	x := t.ratio[i] * t.ratio[j] * t.ratio[k]
	f := 1 / (1 + 6*x)
	ang := angular(u, v, w, p3)
	energy := c9 * f * ang
	p5 := p3 / (u * v * w)
	damped := 32 * x * f // d ln f / d ln R, the same for each side
	t.slope[i] += c9*f*angularSlope(u, v, w, p5) + energy*(damped+t.dlog[i])
	t.slope[j] += c9*f*angularSlope(v, w, u, p5) + energy*(damped+t.dlog[j])
	t.slope[k] += c9*f*angularSlope(w, u, v, p5) + energy*(damped+t.dlog[k])
	t.share[i] += energy
	t.share[j] += energy
	t.share[k] += energy
}

// angularSlope is the derivative of angular with respect to ln sqrt(u); p5 is
// P^-5.
func angularSlope(u, v, w, p5 float64) float64 {
	d := v - w
	return -0.375 * p5 * (u*u*u + u*u*(v+w) + u*(3*v*v+2*v*w+3*w*w) - 5*d*d*(v+w))
}
