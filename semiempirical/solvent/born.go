package solvent

import (
	"math"

	"torsieve/internal/units"
)

// A born computes Born radii: how far from the solvent an atom's charge is, in
// a molecule made of spheres.
//
// Source: A. Onufriev, D. Bashford, D. A. Case, Proteins 2004, 55, 383 (the
// tanh of a cubic), with the integral of r^-4 over a sphere of G. D. Hawkins,
// C. J. Cramer, D. G. Truhlar, J. Phys. Chem. 1996, 100, 19824.
type born struct {
	sphere     []float64  // van der Waals radius, bohr
	descreener []float64  // radius with which the atom displaces solvent, bohr
	scale      float64    // on the radius
	polynomial [3]float64 // of the argument of tanh, signs plus, minus, plus

	radius   []float64 // bohr
	psi      []float64 // 1/bohr: twice the sum of what the other atoms displace
	response []float64 // d radius / d psi
	slope    []float64 // for each pair twice: d psi_a / dr, d psi_b / dr
}

// bornCutoff is the distance in bohr from which on atoms do not count. It is
// part of the model; at this distance 1e-5 of a radius is at stake.
const bornCutoff = 35 * units.Angstrom

func newBorn(numbers []int, t *table, f *fit) *born {
	n := len(numbers)
	b := &born{
		sphere: column(numbers, t.Radii), descreener: column(numbers, f.Descreening),
		scale: f.BornScale, polynomial: t.BornPolynomial,
		radius: make([]float64, n), psi: make([]float64, n), response: make([]float64, n),
		slope: make([]float64, n*(n-1)),
	}
	for a, r := range b.sphere {
		b.descreener[a] *= r
	}
	return b
}

// update computes radii and their derivatives. Error: *GeometryError for an
// atom buried so deep that its radius is no number.
func (b *born) update(p *pairs) error {
	clear(b.psi)
	k := 0
	for i := range p.n {
		for j := range i {
			var onI, onJ, slopeI, slopeJ float64
			if r := p.r[k]; r <= bornCutoff {
				onI, slopeI = displaced(r, b.descreener[j], b.sphere[i])
				onJ, slopeJ = displaced(r, b.descreener[i], b.sphere[j])
			}
			b.psi[i] += onI
			b.psi[j] += onJ
			b.slope[2*k], b.slope[2*k+1] = slopeI, slopeJ
			k++
		}
	}
	for i := range b.radius {
		b.fromPsi(i)
		if math.IsInf(b.radius[i], 0) || math.IsInf(b.response[i], 0) || math.IsNaN(b.response[i]) {
			return &GeometryError{Atom: i, Msg: "the others crowd it so that it has no Born radius"}
		}
	}
	return nil
}

// fromPsi turns the sum into the radius scale / (1/R - tanh(x)/R), where x is
// the polynomial of p = psi R/2.
func (b *born) fromPsi(i int) {
	c, r := b.polynomial, b.sphere[i]
	p := b.psi[i] * r / 2
	tanh := math.Tanh(p * (c[0] - p*(c[1]-p*c[2])))
	inverse := (1 - tanh) / r
	b.radius[i] = b.scale / inverse
	slope := c[0] - p*(2*c[1]-3*p*c[2])
	b.response[i] = b.scale * 0.5 * slope * (1 - tanh*tanh) / (inverse * inverse)
}

// displaced returns what a sphere of radius rho at distance r displaces from
// around an atom of radius R, 1/(2 pi) of the integral of |x|^-4 over the part
// of it that is outside of R, and the derivative by r.
func displaced(r, rho, radius float64) (g, slope float64) {
	u := r + rho
	switch {
	case r >= radius+rho:
		between := r*r - rho*rho
		l := math.Log((r-rho)/u) / (2 * r)
		return rho/between + l, (rho/between-l)/r - 2*r*rho/(between*between)
	case u > radius:
		y := u / radius
		l := math.Log(y)
		inverse := 1/u - u/(radius*radius)
		g = 1/radius - 1/u + (0.5*(r-rho)*inverse-l)/(2*r)
		slope = (1-(r-rho)/(4*r)*(1+y*y))/(u*u) + rho/(4*r*r)*inverse + (l/r-1/u)/(2*r)
		return g, slope
	default:
		return 0, 0
	}
}

// addSlopes adds to slope (by pair) the derivative with respect to distances
// of an energy whose derivatives by the radii are known.
func (b *born) addSlopes(dEdRadius, slope []float64) {
	k := 0
	for i, e := range dEdRadius {
		onI := e * b.response[i]
		for j := range i {
			slope[k] += onI*b.slope[2*k] + dEdRadius[j]*b.response[j]*b.slope[2*k+1]
			k++
		}
	}
}
