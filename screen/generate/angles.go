package generate

import "slices"

// angle returns the range of the angle i-j-k that the graph allows.
func (g *bounder) angle(i, j, k int) (low, high float64) {
	middle, slack := g.usualAngle(i, j, k)
	return max(40*degree, middle-slack), min(180*degree, middle+slack)
}

func (g *bounder) usualAngle(i, j, k int) (middle, slack float64) {
	ringBonds := g.ringBonds(j)
	if size := g.ringOf(i, j, k); size > 0 {
		middle, slack = g.ringAngle(j, size), 3*degree
		if ringBonds > 2 && g.h[j] != trigonal {
			slack = 9 * degree // bridges and fused corners bend where they must
		}
		return middle, slack
	}
	switch g.h[j] {
	case linear:
		return 180 * degree, 0
	case trigonal:
		return g.trigonalAngle(i, j, k)
	case other:
		if len(g.m.Neighbours(j)) > 6 {
			return 120 * degree, 60 * degree
		}
		return 130 * degree, 50 * degree
	}
	if g.inSmallRing(j) {
		return 116 * degree, 9 * degree
	}
	switch n := g.m.Atom(j).Number; {
	case n == 8 || n == 7:
		middle, slack = 110*degree, 5*degree
	case n == 16 && len(g.m.Neighbours(j)) == 2, n == 34:
		middle, slack = 101*degree, 5*degree
	case n > 10:
		middle, slack = 109*degree, 10*degree
	default:
		middle, slack = 110.5*degree, 4*degree
	}
	if ringBonds > 2 {
		slack = 10 * degree
	}
	return middle, slack
}

// trigonalAngle shares the rest of the full turn where the third angle lies in
// a ring.
func (g *bounder) trigonalAngle(i, j, k int) (middle, slack float64) {
	near := g.m.Neighbours(j)
	if len(near) != 3 {
		return 120 * degree, 4 * degree
	}
	third := near[0] + near[1] + near[2] - i - k
	inside, rings := 0.0, 0
	for _, other := range [2]int{i, k} {
		if size := g.ringOf(other, j, third); size > 0 {
			inside += g.ringAngle(j, size)
			rings++
		}
	}
	switch rings {
	case 0:
		return 120 * degree, 4 * degree
	case 1:
		return (360*degree - inside) / 2, 5 * degree
	}
	return 360*degree - inside, 5 * degree
}

// ringAngle is the usual angle at j inside a ring of some size.
func (g *bounder) ringAngle(j, size int) float64 {
	flat := g.h[j] == trigonal
	pick := func(sp2, sp3 float64) float64 {
		if flat {
			return sp2 * degree
		}
		return sp3 * degree
	}
	if g.m.Atom(j).Number == 16 && size <= 6 && size > 3 {
		return pick(93, 94)
	}
	switch size {
	case 3:
		return 60 * degree
	case 4:
		return pick(91, 88)
	case 5:
		return pick(108, 104)
	case 6:
		return pick(120, 111)
	case 7:
		return pick(127, 114)
	}
	if g.h[j] == linear {
		return 175 * degree
	}
	return pick(122, 114)
}

// ringOf returns the size of the smallest ring in which i, j and k follow each
// other, 0 if there is none. Beyond eight atoms a ring does not shape angles.
func (g *bounder) ringOf(i, j, k int) int {
	for _, r := range g.onRing[j] {
		ring := g.rings[r]
		if len(ring) > 8 {
			break
		}
		at := slices.Index(ring, j)
		before, after := ring[(at+len(ring)-1)%len(ring)], ring[(at+1)%len(ring)]
		if before == i && after == k || before == k && after == i {
			return len(ring)
		}
	}
	return 0
}

func (g *bounder) ringBonds(j int) int {
	count := 0
	for _, k := range g.m.NeighbourBonds(j) {
		if g.m.BondInRing(k) {
			count++
		}
	}
	return count
}

func (g *bounder) inSmallRing(j int) bool {
	for _, r := range g.onRing[j] {
		if len(g.rings[r]) <= 4 {
			return true
		}
	}
	return false
}
