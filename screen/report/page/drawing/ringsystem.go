package drawing

import (
	"cmp"
	"math"
	"math/cmplx"
	"slices"
)

// placeRingSystems gives every ring system a layout of its own, ring by ring.
func (s *sketch) placeRingSystems() {
	for n, atoms := range s.m.RingSystems() {
		for _, i := range atoms {
			s.system[i] = n
		}
		s.local = append(s.local, s.layOut(atoms))
	}
}

// layOut places the atoms of a ring system. Large rings come first, as polygons
// that the small ones are then built onto; what that bends is relaxed.
func (s *sketch) layOut(atoms []int) []complex128 {
	at := make([]complex128, s.m.NumAtoms())
	placed := make([]bool, s.m.NumAtoms())
	rings := s.ringsOf(atoms)
	polygon(rings[0], at, placed)
	for waiting := rings[1:]; len(waiting) > 0; {
		k := mostPlaced(waiting, placed)
		s.addRing(waiting[k], at, placed)
		waiting = slices.Delete(waiting, k, k+1)
	}
	if len(rings) > 1 && len(rings[0]) > largestRigid {
		s.relaxRings(atoms, rings, at)
	}
	return at
}

// ringsOf lists the rings of a system, the one to begin with first: the largest
// of a system with a macrocycle, else the one with the most neighbours.
func (s *sketch) ringsOf(atoms []int) [][]int {
	var rings [][]int
	for _, ring := range s.m.Rings() {
		if slices.Contains(atoms, ring[0]) {
			rings = append(rings, ring)
		}
	}
	shared := func(ring []int) int {
		n := 0
		for _, other := range rings {
			for _, i := range ring {
				if slices.Contains(other, i) {
					n++
				}
			}
		}
		return n
	}
	first := slices.MaxFunc(rings, func(a, b []int) int {
		if c := cmp.Compare(max(len(a), largestRigid), max(len(b), largestRigid)); c != 0 {
			return c
		}
		return cmp.Compare(shared(a), shared(b))
	})
	k := slices.IndexFunc(rings, func(r []int) bool { return &r[0] == &first[0] })
	return append([][]int{first}, slices.Delete(rings, k, k+1)...)
}

// largestRigid is the size of the largest ring that is always drawn as a regular
// polygon.
const largestRigid = 8

// mostPlaced finds the ring with the most atoms on paper; of equals the first.
func mostPlaced(rings [][]int, placed []bool) int {
	best, most := 0, -1
	for k, ring := range rings {
		n := 0
		for _, i := range ring {
			if placed[i] {
				n++
			}
		}
		if n > most {
			best, most = k, n
		}
	}
	return best
}

// polygon places a ring as a regular polygon with an edge at the bottom.
func polygon(ring []int, at []complex128, placed []bool) {
	n := float64(len(ring))
	r := 0.5 / math.Sin(math.Pi/n)
	for k, i := range ring {
		at[i] = cmplx.Rect(r, -math.Pi/2+math.Pi/n+2*math.Pi*float64(k)/n)
		placed[i] = true
	}
}

// addRing completes a ring of which some atoms are on paper: each run of missing
// ones becomes an arc between its ends.
func (s *sketch) addRing(ring []int, at []complex128, placed []bool) {
	start := slices.IndexFunc(ring, func(i int) bool { return placed[i] })
	n := len(ring)
	turned := append(slices.Clone(ring[start:]), ring[:start]...)
	if !slices.ContainsFunc(turned[1:], func(i int) bool { return placed[i] }) {
		s.spiro(turned, at, placed)
		return
	}
	for k := 1; k < n; k++ {
		if placed[turned[k]] {
			continue
		}
		end := k
		for end < n && !placed[turned[end%n]] {
			end++
		}
		s.arc(turned[k-1], turned[end%n], turned[k:end], at, placed)
		k = end
	}
}

// spiro places a ring that shares its first atom alone, on the far side of what
// is bonded to it.
func (s *sketch) spiro(ring []int, at []complex128, placed []bool) {
	hub := ring[0]
	var toward complex128
	for _, j := range s.m.Neighbours(hub) {
		if placed[j] {
			toward += at[j] - at[hub]
		}
	}
	away := unit(-toward)
	n := float64(len(ring))
	r := 0.5 / math.Sin(math.Pi/n)
	centre := at[hub] + away*complex(r, 0)
	for k, i := range ring[1:] {
		at[i] = centre - away*cmplx.Rect(r, 2*math.Pi*float64(k+1)/n)
		placed[i] = true
	}
}

// arc places a run of atoms between two on paper: outside what is there, or, if
// that place is taken, across it.
func (s *sketch) arc(from, to int, run []int, at []complex128, placed []bool) {
	var others []complex128
	var middle complex128
	for i, p := range placed {
		if p {
			others = append(others, at[i])
			middle += at[i]
		}
	}
	middle /= complex(float64(len(others)), 0)
	a, b := at[from], at[to]
	side := 1.0
	if left(b-a, middle-a) > 0 {
		side = -1
	}
	var best []complex128
	room := -1.0
	for _, try := range [][]complex128{onCircle(a, b, len(run), side), across(a, b, len(run), -side*0.3), across(a, b, len(run), side*0.3)} {
		if r := math.Min(nearest(try, others), 0.6); r > room+1e-9 {
			best, room = try, r
		}
	}
	for k, i := range run {
		at[i], placed[i] = best[k], true
	}
}

// onCircle returns n points between a and b that make n+1 bonds of length one on
// an arc to the left (side 1) or right of a-b.
//
// With the angle t that a bond spans, the chord is sin((n+1)t/2)/sin(t/2).
func onCircle(a, b complex128, n int, side float64) []complex128 {
	bonds := float64(n + 1)
	chord := cmplx.Abs(b - a)
	low, high := 1e-6, 2*math.Pi/bonds
	for range 60 {
		t := (low + high) / 2
		if math.Sin(bonds*t/2)/math.Sin(t/2) > chord {
			low = t
		} else {
			high = t
		}
	}
	t := (low + high) / 2
	step := unit(b-a) * cmplx.Rect(1, side*(bonds-1)*t/2)
	points := make([]complex128, n)
	p := a
	for k := range points {
		p += step
		points[k] = p
		step *= cmplx.Rect(1, -side*t)
	}
	return points
}

// across returns n points on the way from a to b, off the straight line.
func across(a, b complex128, n int, off float64) []complex128 {
	points := make([]complex128, n)
	for k := range points {
		points[k] = a + (b-a)*complex(float64(k+1)/float64(n+1), 0) + unit(b-a)*complex(0, off)
	}
	return points
}

// nearest is the smallest distance between a point and the others, their ends
// left aside.
func nearest(points, others []complex128) float64 {
	least := math.Inf(1)
	for _, p := range points {
		for _, q := range others {
			least = math.Min(least, cmplx.Abs(p-q))
		}
	}
	return least
}

func unit(z complex128) complex128 {
	if r := cmplx.Abs(z); r > 1e-9 {
		return z / complex(r, 0)
	}
	return 1
}

// left is positive where b lies to the left of the direction a.
func left(a, b complex128) float64 { return real(a)*imag(b) - imag(a)*real(b) }
