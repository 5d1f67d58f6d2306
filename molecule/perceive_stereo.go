package molecule

import "math"

// SetStereoFrom states the configuration of all centres and double bonds that
// the positions of the atoms added so far show. x holds three numbers for each
// of them; the unit does not matter. What is flat or halfway between cis and
// trans stays unstated. Amine nitrogens, which invert, stay so as well, and
// C=N-H, whose hydrogen changes sides in amidines and guanidines.
func (b *Builder) SetStereoFrom(x []float64) {
	if len(x) != 3*len(b.atoms) {
		panic("molecule: coordinates and atoms differ in number")
	}
	neighbours := make([][]int, len(b.atoms))
	single := make([]bool, len(b.atoms)) // all bonds single
	for i := range single {
		single[i] = true
	}
	for _, bond := range b.bonds {
		neighbours[bond.A] = append(neighbours[bond.A], bond.B)
		neighbours[bond.B] = append(neighbours[bond.B], bond.A)
		if bond.Order != 1 {
			single[bond.A], single[bond.B] = false, false
		}
	}
	for i := range b.atoms {
		if b.mayBeCentre(i, len(neighbours[i]), single[i]) {
			if p := parityAt(x, i, neighbours[i]); p != 0 {
				b.SetCentre(i, neighbours[i], p)
			}
		}
	}
	for _, bond := range b.bonds {
		if bond.Order == 2 && !b.invertsFreely(bond.A, neighbours) && !b.invertsFreely(bond.B, neighbours) {
			b.setDoubleFrom(x, bond.A, bond.B, neighbours)
		}
	}
}

// mayBeCentre says whether an atom with so many drawn neighbours can hold a
// configuration: four neighbours, or three and a hydrogen to be added or a lone
// pair that does not invert.
func (b *Builder) mayBeCentre(i, drawn int, single bool) bool {
	a := b.atoms[i]
	if drawn == 4 {
		return true
	}
	if drawn != 3 {
		return false
	}
	switch a.Number {
	case 6, 14, 32:
		return single && a.Charge == 0 && a.Radical == 0 && a.Hydrogens != 0
	case 7:
		return single && a.Charge == 1 && a.Hydrogens != 0
	case 15, 16, 33, 34, 52:
		return true
	}
	return false
}

// flat is the signed volume of four unit vectors, or of three, below which a
// centre counts as flat; a regular tetrahedron has 3.08 and 0.77.
const (
	flatFour  = 0.6
	flatThree = 0.2
)

// parityAt returns the parity that the positions give to atom i with respect to
// its neighbours in the given order, 0 where they are nearly in a plane.
func parityAt(x []float64, i int, neighbours []int) Parity {
	var u [4][3]float64
	for n, j := range neighbours {
		u[n] = unitVector(x, i, j)
	}
	limit := flatThree
	if len(neighbours) == 4 {
		limit = flatFour
		for n := range 3 {
			for k := range 3 {
				u[n][k] -= u[3][k]
			}
		}
	}
	switch v := tripleProduct(u[0], u[1], u[2]); {
	case v > limit:
		return 1
	case v < -limit:
		return -1
	}
	return 0
}

// invertsFreely says whether atom i is a nitrogen that holds hydrogen alone
// besides its double bond.
func (b *Builder) invertsFreely(i int, neighbours [][]int) bool {
	if b.atoms[i].Number != 7 || len(neighbours[i]) != 2 {
		return false
	}
	return b.atoms[neighbours[i][0]].Number == 1 || b.atoms[neighbours[i][1]].Number == 1
}

// setDoubleFrom states whether the first substituents at i and j are cis.
func (b *Builder) setDoubleFrom(x []float64, i, j int, neighbours [][]int) {
	axis := unitVector(x, i, j)
	side := func(at, other int) (int, [3]float64, bool) {
		for _, n := range neighbours[at] {
			if n == other {
				continue
			}
			u := unitVector(x, at, n)
			along := dot3(u, axis)
			for k := range u {
				u[k] -= along * axis[k]
			}
			if length := math.Sqrt(dot3(u, u)); length > 0.2 { // not in line with the bond
				for k := range u {
					u[k] /= length
				}
				return n, u, true
			}
		}
		return 0, [3]float64{}, false
	}
	p, u, ok1 := side(i, j)
	q, v, ok2 := side(j, i)
	// Farther than 60 degrees from flat, nothing is said.
	if c := dot3(u, v); ok1 && ok2 && math.Abs(c) > 0.5 {
		b.SetDoubleBond(i, j, p, q, c > 0)
	}
}

// unitVector points from atom i to atom j.
func unitVector(x []float64, i, j int) [3]float64 {
	var u [3]float64
	for k := range u {
		u[k] = x[3*j+k] - x[3*i+k]
	}
	if length := math.Sqrt(dot3(u, u)); length > 0 {
		for k := range u {
			u[k] /= length
		}
	}
	return u
}

func dot3(a, b [3]float64) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }

func tripleProduct(a, b, c [3]float64) float64 {
	return a[0]*(b[1]*c[2]-b[2]*c[1]) + a[1]*(b[2]*c[0]-b[0]*c[2]) + a[2]*(b[0]*c[1]-b[1]*c[0])
}
