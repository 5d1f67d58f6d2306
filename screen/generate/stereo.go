package generate

import (
	"math"

	"torsieve/molecule"
	"torsieve/screen/generate/embed"
)

// A handedness is a signed volume to hold: four points about a centre.
type handedness struct {
	centre int
	points [4]int // the centre itself stands for a lone pair
	sign   float64
}

// handednesses lists what must be held: the stated centres of m and, by an
// arbitrary choice, the atoms that carry two equivalent acyclic branches. The
// choice only says which of the two is called first, and spares the search for
// shapes that differ in nothing but these names.
func handednesses(m *molecule.Molecule) []handedness {
	var list []handedness
	known := make([]bool, m.NumAtoms())
	for _, c := range m.Centres() {
		known[c.Atom] = true
		if c.Parity == 0 {
			continue
		}
		h := handedness{centre: c.Atom, points: c.Neighbours, sign: float64(c.Parity)}
		for k, p := range h.points {
			if p < 0 {
				h.points[k] = c.Atom
			}
		}
		list = append(list, h)
	}
	for i := range m.Atoms() {
		if near := m.Neighbours(i); len(near) == 4 && !known[i] && twins(m, i) {
			list = append(list, handedness{centre: i, points: [4]int(near), sign: 1})
		}
	}
	return list
}

// twins says whether two equivalent branches hang on atom i by acyclic bonds.
func twins(m *molecule.Molecule, i int) bool {
	classes := m.Classes()
	near, bonds := m.Neighbours(i), m.NeighbourBonds(i)
	for p := range near {
		for q := range p {
			if classes[near[p]] == classes[near[q]] && !m.BondInRing(bonds[p]) && !m.BondInRing(bonds[q]) {
				return true
			}
		}
	}
	return false
}

// heldBonds lists the stated double bonds of m by their index.
func heldBonds(m *molecule.Molecule) map[int]doubleBond {
	held := make(map[int]doubleBond)
	for _, b := range m.StereoBonds() {
		if b.Known {
			held[b.Bond] = doubleBond{j: b.J, k: b.K, a: b.A, b: b.B, cis: b.Cis}
		}
	}
	return held
}

// volume turns a handedness into a range of signed volumes. A regular
// tetrahedron with arms r has 3.079 r^3 between its four corners, and 0.770 r^3
// between three corners and the centre.
func (h handedness) volume(m *molecule.Molecule, length func(i, j int) float64) embed.Volume {
	product, count, size := 1.0, 0, 3.079
	for _, p := range h.points {
		if p == h.centre {
			size = 0.770
			continue
		}
		product *= length(h.centre, p)
		count++
	}
	v := size * math.Pow(product, 3/float64(count))
	low, high := 0.55*v, 1.25*v
	for _, k := range m.NeighbourBonds(h.centre) {
		if s := m.SmallestRing(k); s == 3 || s == 4 {
			low = 0.25 * v
		}
	}
	if h.sign < 0 {
		low, high = -high, -low
	}
	return embed.Volume{P: h.points, Low: low, High: high}
}

// planes lists what should be flat: trigonal atoms with three neighbours, and
// the two ends of each double bond with respect to each other, but for what a
// ring system may bend.
func planes(m *molecule.Molecule, h []hybrid) []embed.Volume {
	var list []embed.Volume
	for i := range m.Atoms() {
		if near := m.Neighbours(i); h[i] == trigonal && len(near) == 3 && !mayBeCurved(m, i) {
			list = append(list, embed.Volume{P: [4]int{near[0], near[1], near[2], i}})
		}
	}
	for k, b := range m.Bonds() {
		flat := h[b.A] == trigonal && h[b.B] == trigonal && (b.Order == 2 || b.Aromatic)
		if !flat || m.SmallestRing(k) > 7 || mayBeCurved(m, b.A) || mayBeCurved(m, b.B) {
			continue
		}
		for _, i := range m.Neighbours(b.A) {
			for _, j := range m.Neighbours(b.B) {
				if i != b.B && j != b.A && i != j {
					list = append(list, embed.Volume{P: [4]int{i, b.A, b.B, j}})
				}
			}
		}
	}
	return list
}
