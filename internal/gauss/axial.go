package gauss

import (
	"math"
	"slices"
)

// Operators is the number of components of the overlap (1), the dipole (3) and
// the quadrupole (5) that an AxialPair computes together.
const Operators = 9

// maxAxial is the number of functions of a d shell, the largest that an
// AxialPair takes.
const maxAxial = 5

// axialCut is the exponent beyond which a pair of primitives is left out:
// exp(-30) is 1e-13.
const axialCut = 30

// An AxialPair computes the integrals <a| op |b> of two shells, up to d, for
// the overlap, the dipole and the quadrupole with its origin on b's atom:
//
//	op 0     1
//	op 1..3  x, y, z
//	op 4..8  the d harmonics xy, yz, z2, xz, x2-y2; sum_m QuadrupoleTensor[m]
//	         times these five is the traceless quadrupole
//	         (3 x_k x_l - delta_kl r^2)/2
//
// With the z axis along the bond, from b to a, every integral is a sum over
// pairs of primitives of exp(-mu R^2) times a polynomial in R that is even or
// odd, and most are zero or multiples of one another. The polynomials depend
// on the two shells alone and are worked out once. For each bond, Integrals
// gives the few numbers that are left, and Block and Slope make of them what is
// wanted in the molecule's axes, with a Frame.
// (One-dimensional moments of products of Gaussians: T. Helgaker, P. Jorgensen,
// J. Olsen, Molecular Electronic-Structure Theory, 2000, chapter 9.)
//
// An AxialPair is not changed by use: one value serves many goroutines.
type AxialPair struct {
	la, lb    int
	mu        []float64 // alpha beta/(alpha+beta), ascending
	integrals []axialIntegral
	rows      []float64   // coefficients of exp(-mu R^2), len(mu) for each row
	places    axialPlaces // where integrals stand in a block

	// turned says the same of the change of the block per radian when a moves
	// along the bond's x, and y, and the bond turns.
	turned [2]axialPlaces
}

// An axialIntegral is a distinct number in the bond's frame: the sum over t of
// R^(odd+2t) times row first+t of the table.
type axialIntegral struct {
	first, rows int
	odd         int
}

// An axialPlace says that an element of a block holds factor times an integral.
type axialPlace struct {
	factor   float64
	integral uint8
	ab       uint8 // element, maxAxial a + b
	op       uint8
}

// axialPlaces are the places of a block, those of the overlap first, then those
// of the dipole, then those of the quadrupole.
type axialPlaces struct {
	overlap, dipole, quadrupole []axialPlace
}

func (p *axialPlaces) add(at axialPlace) {
	switch operatorL(int(at.op)) {
	case 0:
		p.overlap = append(p.overlap, at)
	case 1:
		p.dipole = append(p.dipole, at)
	default:
		p.quadrupole = append(p.quadrupole, at)
	}
}

func (p *axialPlaces) all() []axialPlace { return slices.Concat(p.overlap, p.dipole, p.quadrupole) }

// NewAxialPair works out the table of two shells. Their atoms do not matter.
// Panics beyond d shells and for Cartesian ones: a caller's mistake.
func NewAxialPair(a, b *Shell) *AxialPair {
	if a.L > 2 || b.L > 2 || a.Cartesian || b.Cartesian {
		panic("gauss: axial pairs go up to spherical d shells")
	}
	p := &AxialPair{la: a.L, lb: b.L}
	prims := primitivePairs(a, b)
	for _, pr := range prims {
		p.mu = append(p.mu, pr.mu)
	}
	poly := make([][]float64, axialPowers)
	for t := range poly {
		poly[t] = make([]float64, len(prims))
	}
	for i, ha := range axialHarmonics[a.L] {
		for j, hb := range axialHarmonics[b.L] {
			for op, ho := range axialOperators {
				axialPolynomials(poly, prims, ha, ho, hb)
				p.place(i, j, op, poly)
			}
		}
	}
	if len(p.integrals) > maxIntegrals || len(prims) > maxPrimitives {
		panic("gauss: shells too large for an axial pair")
	}
	p.turned[0] = p.turn(1, 1)
	p.turned[1] = p.turn(0, -1)
	return p
}

// Reach returns the distance in bohr beyond which all integrals are zero.
func (p *AxialPair) Reach() float64 { return math.Sqrt(axialCut / p.mu[0]) }

// place enters one element of the block: nothing where it vanishes, a new
// integral where it is not a multiple of one that is there already. poly holds
// the coefficients of R^0, R^1, ... for all primitive pairs.
func (p *AxialPair) place(i, j, op int, poly [][]float64) {
	top := len(poly) - 1
	for top >= 0 && maxAbs(poly[top]) < 1e-14 {
		top--
	}
	if top < 0 {
		return
	}
	odd := top % 2
	var rows []float64
	for t := odd; t <= top; t += 2 {
		rows = append(rows, poly[t]...)
	}
	for k, in := range p.integrals {
		if factor, ok := multiple(rows, p.rows[in.first*len(p.mu):(in.first+in.rows)*len(p.mu)]); ok && in.odd == odd {
			p.places.add(axialPlace{factor, uint8(k), uint8(maxAxial*i + j), uint8(op)})
			return
		}
	}
	p.places.add(axialPlace{1, uint8(len(p.integrals)), uint8(maxAxial*i + j), uint8(op)})
	p.integrals = append(p.integrals, axialIntegral{first: len(p.rows) / len(p.mu), rows: len(rows) / len(p.mu), odd: odd})
	p.rows = append(p.rows, rows...)
}

// turn lists how the block changes when the bond is turned about local axis
// n (0: x, 1: y), times sign.
func (p *AxialPair) turn(axis int, sign float64) axialPlaces {
	sums := make([]float64, maxAxial*maxAxial*Operators*len(p.integrals))
	place := func(a, b, op, integral int) int {
		return ((maxAxial*a+b)*Operators+op)*len(p.integrals) + integral
	}
	for _, at := range p.places.all() {
		a, b, op, k := int(at.ab)/maxAxial, int(at.ab)%maxAxial, int(at.op), int(at.integral)
		for m := range 2*p.la + 1 {
			sums[place(m, b, op, k)] += sign * generator(p.la, axis, m, a) * at.factor
		}
		for m := range 2*p.lb + 1 {
			sums[place(a, m, op, k)] += sign * generator(p.lb, axis, m, b) * at.factor
		}
		l := operatorL(op)
		for m := range 2*l + 1 {
			sums[place(a, b, l*l+m, k)] += sign * generator(l, axis, m, op-l*l) * at.factor
		}
	}
	var places axialPlaces
	for at, factor := range sums {
		if math.Abs(factor) > 1e-14 {
			element := at / len(p.integrals)
			places.add(axialPlace{factor, uint8(at % len(p.integrals)), uint8(element / Operators), uint8(element % Operators)})
		}
	}
	return places
}

// operatorL is the angular momentum of an operator's component; l*l is the
// first component of l.
func operatorL(op int) int {
	switch {
	case op == 0:
		return 0
	case op < 4:
		return 1
	}
	return 2
}

// multiple finds the factor with x = factor y, if there is one.
func multiple(x, y []float64) (factor float64, ok bool) {
	if len(x) != len(y) {
		return 0, false
	}
	var xx, xy, yy float64
	for i := range x {
		xx += x[i] * x[i]
		xy += x[i] * y[i]
		yy += y[i] * y[i]
	}
	factor = xy / yy
	for i := range x {
		if math.Abs(x[i]-factor*y[i]) > 1e-13*math.Sqrt(xx/float64(len(x))) {
			return 0, false
		}
	}
	return factor, true
}

func maxAbs(x []float64) float64 {
	var m float64
	for _, v := range x {
		m = max(m, math.Abs(v))
	}
	return m
}
