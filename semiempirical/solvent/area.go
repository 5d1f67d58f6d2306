package solvent

import "math"

// An area is the surface of the molecule that the centre of a solvent molecule
// can touch, for each atom: of a sphere of van der Waals and probe radius, what
// is in no other sphere, with soft borders. The derivatives with respect to the
// neighbours are kept.
//
// Source: W. Im, M. S. Lee, C. L. Brooks, J. Comput. Chem. 2003, 24, 1691.
type area struct {
	sphere []float64 // radius with probe, bohr
	weight []float64 // area of a lone sphere: 4 pi times the radial integral, bohr^2
	width  float64   // half the width of a soft border, bohr

	value    []float64  // bohr^2
	start    []int      // of each atom in links, and their end
	links    []link     // neighbours of all atoms
	near     []obstacle // of the atom at hand
	crossing []crossing // of the point at hand
}

// A link is a neighbour's effect on an atom's area.
type link struct {
	atom  int
	slope [3]float64 // derivative of the area by the neighbour's place, bohr
}

// An obstacle is a neighbour of the atom at hand. The point in direction n on
// the atom's sphere is covered wholly for n.v <= inner, and not for
// n.v >= outer.
type obstacle struct {
	v            [3]float64 // from the neighbour to the atom, bohr
	inner, outer float64    // bohr
	radius       float64    // of the neighbour's sphere, bohr
	squares      float64    // of v and of the atom's own radius, bohr^2
}

// A crossing is an obstacle in whose soft border a point lies.
type crossing struct {
	place int     // in near
	t     float64 // n.v
	slope float64 // S'/S over the distance from the obstacle
}

// reserve is how many neighbours an atom of an ordinary molecule has at most,
// on average; a denser one makes the list grow once.
const reserve = 64

func newArea(numbers []int, t *table, f *fit) *area {
	n := len(numbers)
	ar := &area{
		sphere: column(numbers, t.Radii), weight: make([]float64, n), width: t.Smoothing,
		value: make([]float64, n), start: make([]int, n+1), links: make([]link, 0, n*min(n, reserve)),
		near: make([]obstacle, n), crossing: make([]crossing, n),
	}
	for a := range ar.sphere {
		ar.sphere[a] += f.Probe
		ar.weight[a] = 4 * math.Pi * radial(ar.sphere[a], ar.width)
	}
	return ar
}

// radial is the integral of r^2 over the soft border of a sphere with radius p:
// of r^2 times the derivative of the switching function.
func radial(p, w float64) float64 {
	at := func(t float64) float64 {
		h := -1 / (4 * w * w * w)
		return (1/(4*w) + 3*h*(t*t/5-t*p/2+p*p/3)) * t * t * t
	}
	return at(p+w) - at(p-w)
}

// update computes all areas and their derivatives.
func (ar *area) update(p *pairs) {
	ar.links = ar.links[:0]
	for a := range ar.value {
		ar.start[a] = len(ar.links)
		ar.findNeighbours(p, a)
		ar.value[a] = ar.measure(ar.sphere[a], ar.weight[a], ar.links[ar.start[a]:])
	}
	ar.start[p.n] = len(ar.links)
}

// findNeighbours appends to links, and sets in near, the atoms whose spheres
// reach atom a's.
func (ar *area) findNeighbours(p *pairs, a int) {
	radius, first := ar.sphere[a], len(ar.links)
	for b, other := range ar.sphere {
		if b == a {
			continue
		}
		v := p.vector(a, b)
		r2, reach := dot(v, v), radius+other+ar.width
		if r2 >= reach*reach {
			continue
		}
		in, out := other-ar.width, other+ar.width
		ar.near[len(ar.links)-first] = obstacle{
			v:      v,
			inner:  (in*in - r2 - radius*radius) / (2 * radius),
			outer:  (out*out - r2 - radius*radius) / (2 * radius),
			radius: other, squares: r2 + radius*radius,
		}
		ar.links = append(ar.links, link{atom: b})
	}
}

// kept is the share from which on a point counts. It is part of the model; what
// is dropped is of the order of 1e-6 bohr^2.
const kept = 1e-6

// measure returns one atom's area and fills in the slopes of its links, which
// go with near.
func (ar *area) measure(radius, weight float64, links []link) float64 {
	near := ar.near[:len(links)]
	var sum float64
	cover := 0 // the obstacle that covered the last point, likely to cover this one
	for _, d := range directions() {
		if cover < len(near) && dot(d.n, near[cover].v) <= near[cover].inner {
			continue
		}
		crossings, by := ar.look(d.n, near)
		if by >= 0 {
			cover = by
			continue
		}
		share := ar.pass(radius, near, crossings)
		if share <= kept {
			continue
		}
		part := weight * d.weight * share
		sum += part
		for _, c := range crossings {
			f, v, l := part*c.slope, &near[c.place].v, &links[c.place]
			l.slope[0] -= f * (v[0] + radius*d.n[0])
			l.slope[1] -= f * (v[1] + radius*d.n[1])
			l.slope[2] -= f * (v[2] + radius*d.n[2])
		}
	}
	return sum
}

// look returns the soft borders in which the point in direction n lies, or an
// obstacle that covers it (-1: none does).
func (ar *area) look(n [3]float64, near []obstacle) (crossings []crossing, by int) {
	count := 0
	for i := range near {
		o := &near[i]
		t := n[0]*o.v[0] + n[1]*o.v[1] + n[2]*o.v[2]
		if t >= o.outer {
			continue
		}
		if t <= o.inner {
			return nil, i
		}
		ar.crossing[count] = crossing{place: i, t: t}
		count++
	}
	return ar.crossing[:count], -1
}

// pass returns the share of a point that all the borders let through, and sets
// their slopes. A border lets through S = 1/2 + 3u/4 - u^3/4, where u is the
// distance from its middle over half its width.
func (ar *area) pass(radius float64, near []obstacle, crossings []crossing) float64 {
	share := 1.0
	for i := range crossings {
		c := &crossings[i]
		o := &near[c.place]
		distance := math.Sqrt(o.squares + 2*radius*c.t)
		u := (distance - o.radius) / ar.width
		s := 0.5 + 0.75*u - 0.25*u*u*u
		c.slope = 0.75 * (1 - u*u) / (ar.width * s * distance)
		share *= s
	}
	return share
}

// addGradient adds to grad the gradient of the sum of areas times their
// weights c, hartree/bohr^2.
func (ar *area) addGradient(c, grad []float64) {
	for a, w := range c {
		for _, l := range ar.links[ar.start[a]:ar.start[a+1]] {
			for k, s := range l.slope {
				grad[3*l.atom+k] += w * s
				grad[3*a+k] -= w * s
			}
		}
	}
}
