package drawing

import (
	"cmp"
	"math"
	"math/cmplx"
	"slices"
)

// assemble puts ring systems and chains together, each fragment from its first
// ring system, or from the end of its chain.
func (s *sketch) assemble() {
	for _, fragment := range s.m.Fragments() {
		start := s.start(fragment)
		if start < 0 {
			continue
		}
		queue := s.put(start, 0, 1)
		for len(queue) > 0 {
			i := queue[0]
			queue = append(queue[1:], s.grow(i)...)
		}
	}
}

// start is an atom of the largest ring system of a fragment, else the end of a
// longest chain.
func (s *sketch) start(fragment []int) int {
	best, size := -1, 0
	for _, i := range fragment {
		if n := s.system[i]; n >= 0 && len(s.m.RingSystems()[n]) > size {
			best, size = i, len(s.m.RingSystems()[n])
		}
	}
	if best >= 0 {
		return best
	}
	far := -1
	for _, i := range fragment {
		if len(s.next[i]) == 0 && !slices.Contains(s.atoms, i) {
			continue
		}
		for _, j := range fragment {
			if d := s.m.TopologicalDistance(i, j); slices.Contains(s.atoms, j) && d > far {
				best, far = i, d
			}
		}
	}
	return best
}

// put places atom i at p, with its ring system if it has one: out is then where
// the rest of the molecule is, seen from i. It returns the atoms that are now on
// paper.
func (s *sketch) put(i int, p, out complex128) []int {
	n := s.system[i]
	if n < 0 {
		s.at[i], s.placed[i] = p, true
		return []int{i}
	}
	atoms := s.m.RingSystems()[n]
	local := s.local[n]
	var spokes []complex128
	outside := 0
	for _, j := range s.next[i] {
		if s.system[j] == n {
			spokes = append(spokes, local[j]-local[i])
		} else {
			outside++
		}
	}
	mine := s.directions(i, spokes, max(outside, 1))[0]
	var best []complex128
	least := math.Inf(1)
	for _, mirrored := range []bool{false, true} {
		try := make([]complex128, len(atoms))
		for k, j := range atoms {
			d, m := local[j]-local[i], mine
			if mirrored {
				d, m = cmplx.Conj(d), cmplx.Conj(m)
			}
			try[k] = p + d*unit(out)/m
		}
		if c := s.crowding(try); c < least-1e-9 {
			best, least = try, c
		}
	}
	for k, j := range atoms {
		s.at[j], s.placed[j] = best[k], true
	}
	return atoms
}

// crowding is how much points overlap with what is on paper.
func (s *sketch) crowding(points []complex128) float64 {
	var sum float64
	for _, j := range s.atoms {
		if !s.placed[j] {
			continue
		}
		for _, p := range points {
			sum += overlap(cmplx.Abs(p - s.at[j]))
		}
	}
	return sum
}

// grow places what is bonded to i and not on paper yet, the largest part first.
func (s *sketch) grow(i int) []int {
	var used []complex128
	var waiting []int
	for _, j := range s.next[i] {
		if s.placed[j] {
			used = append(used, unit(s.at[j]-s.at[i]))
		} else {
			waiting = append(waiting, j)
		}
	}
	if len(waiting) == 0 {
		return nil
	}
	bulk := map[int]int{}
	for _, j := range waiting {
		bulk[j] = s.branch(i, j)
	}
	slices.SortStableFunc(waiting, func(a, b int) int { return cmp.Compare(bulk[b], bulk[a]) })
	var fresh []int
	for k, d := range s.directions(i, used, len(waiting)) {
		j := waiting[k]
		if s.placed[j] {
			continue // came with the ring system of another
		}
		s.turn[j] = bend(used, d)
		fresh = append(fresh, s.put(j, s.at[i]+d, -d)...)
	}
	return fresh
}

// bend is 1 where a chain that came from the only used direction turns left.
func bend(used []complex128, d complex128) float64 {
	if len(used) == 1 && left(-used[0], d) < 0 {
		return -1
	}
	return 1
}

// branch counts the atoms behind the bond i-j, seen from i.
func (s *sketch) branch(i, j int) int {
	seen := map[int]bool{i: true, j: true}
	stack := []int{j}
	for len(stack) > 0 {
		a := stack[len(stack)-1]
		stack = stack[:len(stack)-1]
		for _, b := range s.next[a] {
			if !seen[b] {
				seen[b] = true
				stack = append(stack, b)
			}
		}
	}
	return len(seen) - 1
}

// directions returns n unit vectors for further bonds of i beside the used ones,
// the best one first.
func (s *sketch) directions(i int, used []complex128, n int) []complex128 {
	switch {
	case len(used) == 0:
		return fan(cmplx.Rect(1, math.Pi/6), n)
	case len(used) == 1:
		return s.onward(i, used[0], n)
	}
	return inGap(used, n)
}

// fan spreads n directions about a full turn, two of them as those of a chain.
func fan(first complex128, n int) []complex128 {
	degrees := 120.0
	if n > 2 {
		degrees = 360 / float64(n)
	}
	out := make([]complex128, n)
	for k := range out {
		out[k] = first * cmplx.Rect(1, float64(k)*degrees*math.Pi/180)
	}
	return out
}

// onward continues a chain that came from direction back.
func (s *sketch) onward(i int, back complex128, n int) []complex128 {
	side := -s.turn[i]
	if side == 0 {
		side = 1
	}
	at := func(degrees float64) complex128 { return back * cmplx.Rect(1, degrees*math.Pi/180) }
	switch {
	case n == 1 && s.straight(i):
		return []complex128{-back}
	case n == 1:
		return []complex128{at(-side * 120)}
	case n == 2:
		return []complex128{at(-side * 120), at(side * 120)}
	case n == 3:
		return []complex128{at(180), at(90), at(-90)}
	}
	out := make([]complex128, n)
	for k := range out {
		out[k] = at(360 * float64(k+1) / float64(n+1))
	}
	return out
}

// straight says whether the two bonds of i lie on a line.
func (s *sketch) straight(i int) bool {
	double := 0
	for _, k := range s.m.NeighbourBonds(i) {
		switch s.m.Bond(k).Order {
		case 3:
			return true
		case 2:
			double++
		}
	}
	return double > 1 && len(s.m.Neighbours(i)) == 2
}

// inGap divides the widest gap between the used directions.
func inGap(used []complex128, n int) []complex128 {
	angles := make([]float64, len(used))
	for k, u := range used {
		angles[k] = cmplx.Phase(u)
	}
	slices.Sort(angles)
	from, widest := 0.0, -1.0
	for k, a := range angles {
		next := angles[(k+1)%len(angles)]
		if k == len(angles)-1 {
			next += 2 * math.Pi
		}
		if next-a > widest+1e-6 {
			from, widest = a, next-a
		}
	}
	out := make([]complex128, n)
	for k := range out {
		out[k] = cmplx.Rect(1, from+widest*float64(k+1)/float64(n+1))
	}
	return out
}
