package generate

import (
	"slices"

	"torsieve/molecule"
)

// dihedral returns the range of |a-b-c-d| about bond bc that the graph allows.
func (g *bounder) dihedral(a, b, c, d, bc int) (low, high float64) {
	if held, ok := g.cis[bc]; ok {
		same := (a == held.a || d == held.a) == (a == held.b || d == held.b)
		return flat(same == held.cis)
	}
	bond := g.m.Bond(bc)
	size := g.m.SmallestRing(bc)
	stiff := g.h[b] == trigonal && g.h[c] == trigonal && size > 0 && size <= 7
	if stiff && (bond.Aromatic || bond.Order == 2 || size <= 5) {
		low, high = g.planarRing(a, b, c, d)
		if mayBeCurved(g.m, b) || mayBeCurved(g.m, c) {
			return max(0, low-curvature), min(180*degree, high+curvature)
		}
		return low, high
	}
	return g.ringDihedral(a, b, c, d)
}

// curvature is how far a flat ring bond bends in a bowl or a fullerene: about 40
// degrees in C60.
const curvature = 45 * degree

// mayBeCurved says whether an atom lies so deep in a ring system that the rings
// decide whether it is flat: it and its neighbours have three ring bonds each.
func mayBeCurved(m *molecule.Molecule, i int) bool {
	deep := func(j int) bool {
		bonds := m.NeighbourBonds(j)
		return len(bonds) == 3 && !slices.ContainsFunc(bonds, func(k int) bool { return !m.BondInRing(k) })
	}
	return deep(i) && !slices.ContainsFunc(m.Neighbours(i), func(j int) bool { return !deep(j) })
}

func flat(cis bool) (low, high float64) {
	if cis {
		return 0, 10 * degree
	}
	return 170 * degree, 180 * degree
}

// planarRing: about a flat ring bond the ring atoms are cis, and so are the
// substituents; a ring atom and a substituent are trans.
func (g *bounder) planarRing(a, b, c, d int) (low, high float64) {
	for _, r := range g.onRing[b] {
		ring := g.rings[r]
		before, ok1 := neighbourOnRing(ring, b, c)
		after, ok2 := neighbourOnRing(ring, c, b)
		if ok1 && ok2 && len(ring) <= 7 {
			return flat((a == before) == (d == after))
		}
	}
	return 0, 180 * degree
}

// neighbourOnRing returns the ring atom next to j that is not k, where j and k
// are next to each other on the ring.
func neighbourOnRing(ring []int, j, k int) (int, bool) {
	n := len(ring)
	at := slices.Index(ring, j)
	if at < 0 {
		return 0, false
	}
	before, after := ring[(at+n-1)%n], ring[(at+1)%n]
	switch k {
	case before:
		return after, true
	case after:
		return before, true
	}
	return 0, false
}

// ringDihedral bounds the endocyclic dihedrals of small rings.
func (g *bounder) ringDihedral(a, b, c, d int) (low, high float64) {
	for _, r := range g.onRing[b] {
		ring := g.rings[r]
		if before, ok := neighbourOnRing(ring, b, c); !ok || before != a && before != d {
			continue
		}
		if !slices.Contains(ring, a) || !slices.Contains(ring, d) {
			continue
		}
		switch len(ring) {
		case 4:
			return 0, 40 * degree
		case 5:
			return 0, 55 * degree
		case 6:
			return 0, 75 * degree
		case 7:
			return 0, 110 * degree
		}
	}
	return 0, 180 * degree
}
