package sdf

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"torsieve/molecule"
)

// setStereo tells the builder what the drawing or the coordinates say, and
// returns what they leave open.
func (t *table) setStereo(b *molecule.Builder, form shape) []note {
	switch form {
	case space:
		x := make([]float64, 0, 3*len(t.atoms))
		for _, a := range t.atoms {
			x = append(x, a.x[:]...)
		}
		b.SetStereoFrom(x)
		return nil
	case drawing:
		neighbours := t.neighbours()
		return append(t.setCentres(b, neighbours), t.setDoubleBonds(b, neighbours)...)
	}
	return nil
}

func (t *table) neighbours() [][]int {
	list := make([][]int, len(t.atoms))
	for _, b := range t.bonds {
		list[b.a] = append(list[b.a], b.b)
		list[b.b] = append(list[b.b], b.a)
	}
	return list
}

// setCentres reads wedges and hashes whose narrow end is at an atom.
func (t *table) setCentres(b *molecule.Builder, neighbours [][]int) (notes []note) {
	narrow := make([]bool, len(t.atoms))
	for _, bond := range t.bonds {
		if bond.mark == wedge || bond.mark == hash {
			narrow[bond.a] = true
		}
	}
	for i := range t.atoms {
		if !narrow[i] {
			continue
		}
		p, problem := t.wedgeParity(i, neighbours[i])
		if p != 0 {
			b.SetCentre(i, neighbours[i], p)
		} else if problem != "" {
			notes = append(notes, note{i, -1, fmt.Sprintf("the wedges at atom %d can be read in two ways (%s): its configuration is taken as not stated", i+1, problem)})
		}
	}
	return notes
}

// wedgeParity returns the parity that the drawing gives atom i with respect to
// its neighbours in the given order; with three of them, the fourth place is a
// hydrogen or lone pair that is not drawn. Parity 0: nothing is stated, or it is
// ambiguous, and then problem says why.
//
// Each bond is a unit vector on paper, lifted to the viewer by a wedge and
// away by a hash. Readings that depend on taste are left alone, after
// J. Brecher, Pure Appl. Chem. 2006, 78, 1897 (graphical representation of
// configuration), who calls them not acceptable.
func (t *table) wedgeParity(i int, neighbours []int) (p molecule.Parity, problem string) {
	if len(neighbours) != 3 && len(neighbours) != 4 {
		return 0, ""
	}
	u := make([][3]float64, len(neighbours))
	up, down := 0, 0
	for n, j := range neighbours {
		dx, dy := t.atoms[j].x[0]-t.atoms[i].x[0], t.atoms[j].x[1]-t.atoms[i].x[1]
		length := math.Hypot(dx, dy)
		if length < flatness {
			return 0, "a neighbour is drawn on top of it"
		}
		z := 0.0
		switch t.markFrom(i, j) {
		case wedge:
			z = 1
			up++
		case hash:
			z = -1
			down++
		case wavy:
			return 0, ""
		}
		u[n] = [3]float64{dx / length, dy / length, z}
	}
	switch {
	case up+down == 0:
		return 0, ""
	case len(u) == 4:
		return parityOfFour(u)
	case up > 0 && down > 0:
		return 0, "three bonds, one up and one down"
	case up+down == 3:
		return 0, "all bonds alike"
	}
	return parityOfThree(u, up > 0)
}

// markFrom returns the mark of the bond i-j if its narrow end is i.
func (t *table) markFrom(i, j int) mark {
	for _, b := range t.bonds {
		if b.a == i && b.b == j {
			return b.mark
		}
	}
	return plain
}

// parityOfFour takes the sign of the signed volume.
func parityOfFour(u [][3]float64) (molecule.Parity, string) {
	var d [3][3]float64
	for n := range d {
		for k := range 3 {
			d[n][k] = u[n][k] - u[3][k]
		}
	}
	a, b, c := d[0], d[1], d[2]
	v := a[0]*(b[1]*c[2]-b[2]*c[1]) + a[1]*(b[2]*c[0]-b[0]*c[2]) + a[2]*(b[0]*c[1]-b[1]*c[0])
	switch {
	case v > 0.2:
		return 1, ""
	case v < -0.2:
		return -1, ""
	}
	return 0, "the bonds up and down cancel"
}

// widestGap is the angle between two neighbouring bonds, in radians, beyond
// which the third is squeezed between them on the other side (190 degrees).
const widestGap = 190 * math.Pi / 180

// parityOfThree looks at the sense in which three bonds run round the atom. The
// fourth neighbour is on the far side of the marked bonds.
func parityOfThree(u [][3]float64, up bool) (molecule.Parity, string) {
	order := []int{0, 1, 2} // anticlockwise
	angle := func(n int) float64 { return math.Atan2(u[n][1], u[n][0]) }
	slices.SortFunc(order, func(a, b int) int { return cmp.Compare(angle(a), angle(b)) })
	for n := range order {
		from, to, between := order[n], order[(n+1)%3], order[(n+2)%3]
		gap := angle(to) - angle(from)
		if gap < 0 {
			gap += 2 * math.Pi
		}
		if gap < 0.09 { // five degrees
			return 0, "two bonds are drawn in one direction"
		}
		if gap > widestGap && u[between][2] != 0 {
			return 0, "the marked bond lies between two others that are less than 180 degrees apart"
		}
	}
	p := permutationSign([]int{0, 1, 2}, order)
	if !up {
		p = -p
	}
	return p, ""
}

// setDoubleBonds reads cis and trans from the drawing.
func (t *table) setDoubleBonds(b *molecule.Builder, neighbours [][]int) (notes []note) {
	open := make([]bool, len(t.atoms)) // a wavy bond begins here
	for _, bond := range t.bonds {
		if bond.mark == wavy {
			open[bond.a] = true
			open[bond.b] = open[bond.b] || len(neighbours[bond.b]) > 1
		}
	}
	for _, bond := range t.bonds {
		if bond.kind != 2 || bond.mark == either || open[bond.a] || open[bond.b] {
			continue
		}
		p, side1 := t.side(bond.a, bond.b, neighbours[bond.a])
		q, side2 := t.side(bond.b, bond.a, neighbours[bond.b])
		switch {
		case p < 0 || q < 0 || t.invertsFreely(bond.a, p) || t.invertsFreely(bond.b, q):
		case side1 == 0 || side2 == 0:
			notes = append(notes, note{bond.a, bond.b, fmt.Sprintf("the double bond of atoms %d and %d is drawn in one line with its substituent: cis or trans is taken as not stated", bond.a+1, bond.b+1)})
		default:
			b.SetDoubleBond(bond.a, bond.b, p, q, side1 == side2)
		}
	}
	return notes
}

// invertsFreely says whether atom i is a nitrogen whose substituent is hydrogen:
// where it is drawn means nothing (see molecule.Builder.SetStereoFrom).
func (t *table) invertsFreely(i, substituent int) bool {
	return t.atoms[i].number == 7 && t.atoms[substituent].number == 1
}

// side returns a substituent of i and on which side of the line i-j it is drawn,
// 0 where it lies in line; -1 where there is no substituent.
func (t *table) side(i, j int, neighbours []int) (substituent, side int) {
	const inLine = 0.09 // sine of five degrees
	substituent = -1
	at, to := t.atoms[i].x, t.atoms[j].x
	ax, ay := to[0]-at[0], to[1]-at[1]
	if i > j { // one line for both ends
		ax, ay = -ax, -ay
	}
	for _, n := range neighbours {
		if n == j {
			continue
		}
		substituent = n
		bx, by := t.atoms[n].x[0]-at[0], t.atoms[n].x[1]-at[1]
		lengths := math.Hypot(ax, ay) * math.Hypot(bx, by)
		switch s := ax*by - ay*bx; {
		case s > inLine*lengths:
			return n, 1
		case s < -inLine*lengths:
			return n, -1
		}
	}
	return substituent, 0
}
