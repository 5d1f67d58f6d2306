package relax

import (
	"math"

	"torsieve/internal/element"
	"torsieve/internal/geom"
)

// A scheme is the internal coordinates of a molecule, chosen from a geometry
// alone: all stretches, bends and torsions of the net of bonds, the pyramids of
// atoms with three neighbours, and the stretches of hydrogen bonds. They are
// more than the molecule has degrees of freedom, lest one be missing.
// Source: P. Pulay, G. Fogarasi, J. Chem. Phys. 1992, 96, 2856; the choice as in
// V. Bakken, T. Helgaker, J. Chem. Phys. 2002, 117, 9160.
type scheme struct {
	coords    []coordinate
	stiffness []float64 // first guess of the curvature, hartree per square of the coordinate
	weight    []float64 // share in the length of a step
	bonds     *net
	numbers   []int
}

const (
	straightBend = 165 * math.Pi / 180 // from here on a bend has two directions and no torsion
	nearlyZero   = 175 * math.Pi / 180 // no bend may come so close to straight
	nearlyBent   = 150 * math.Pi / 180 // nor a straight row fold so far
)

// choose makes the scheme for molecules near x.
func (s *scheme) choose(x []float64, numbers []int) {
	s.numbers = numbers
	s.coords, s.stiffness, s.weight = s.coords[:0], s.stiffness[:0], s.weight[:0]
	s.bonds.find(x, numbers)
	for j, near := range s.bonds.near {
		s.around(x, j, near)
		for _, next := range near {
			if next < j {
				s.add(stretch, [4]int{next, j, next, next}, s.stretchGuess(x, next, j))
			}
			before, k := s.straightOn(x, j, next)
			if j < k {
				s.torsions(x, j, next, before, k)
			}
		}
	}
	s.hydrogenBonds(x)
}

func (s *scheme) add(k kind, atoms [4]int, stiffness float64) {
	s.coords = append(s.coords, coordinate{kind: k, atoms: atoms})
	s.stiffness = append(s.stiffness, stiffness)
	s.weight = append(s.weight, 1)
}

// around adds the bends at j and its pyramid.
func (s *scheme) around(x []float64, j int, near []int) {
	for a, i := range near {
		for _, k := range near[:a] {
			f := s.bendGuess(x, i, j, k)
			atoms := [4]int{i, j, k, i}
			if geom.Angle(x, i, j, k) < straightBend {
				s.add(bend, atoms, f)
				continue
			}
			line, _ := arrow(x, i, k)
			one, two := perpendicular(line)
			for _, axis := range [2][3]float64{one, two} {
				s.add(sideways, atoms, f)
				s.coords[len(s.coords)-1].axis = axis
			}
		}
	}
	if len(near) == 3 {
		s.add(pyramid, [4]int{j, near[0], near[1], near[2]}, pyramidConstant)
	}
}

// straightOn follows the bond from j to next as long as it runs straight, and
// returns the last bond: of ethyne's neighbours one turns against the other.
func (s *scheme) straightOn(x []float64, j, next int) (before, k int) {
	before, k = j, next
	for len(s.bonds.near[k]) == 2 {
		far := s.bonds.near[k][0]
		if far == before {
			far = s.bonds.near[k][1]
		}
		if far == j || geom.Angle(x, before, k, far) < straightBend {
			break
		}
		before, k = k, far
	}
	return before, k
}

// torsions adds the dihedrals about j and k; the way from j to k begins with
// next and ends with before. Together they weigh as much as one coordinate.
func (s *scheme) torsions(x []float64, j, next, before, k int) {
	begin := len(s.coords)
	for _, i := range s.bonds.near[j] {
		if i == next || i == k || geom.Angle(x, i, j, k) > straightBend {
			continue
		}
		for _, l := range s.bonds.near[k] {
			if l != before && l != j && l != i && geom.Angle(x, j, k, l) < straightBend {
				s.add(torsion, [4]int{i, j, k, l}, 0)
			}
		}
	}
	n := float64(len(s.coords) - begin)
	for c := begin; c < len(s.coords); c++ {
		s.weight[c] = 1 / n
		s.stiffness[c] = s.torsionGuess(x, j, k) / n
	}
}

// hydrogenBonds adds the stretches from hydrogens on N, O, F, S and Cl to other
// such atoms in touch.
func (s *scheme) hydrogenBonds(x []float64) {
	for h, z := range s.numbers {
		if z != 1 || len(s.bonds.near[h]) != 1 || !polar(s.numbers[s.bonds.near[h][0]]) {
			continue
		}
		donor := s.bonds.near[h][0]
		for a, za := range s.numbers {
			if polar(za) && a != donor && geom.Angle(x, donor, h, a) > math.Pi/2 &&
				geom.Distance(x, h, a) < element.VdwRadius(1)+element.VdwRadius(za) {
				s.add(stretch, [4]int{h, a, h, h}, s.stretchGuess(x, h, a))
			}
		}
	}
}

func polar(z int) bool { return z >= 7 && z <= 9 || z == 16 || z == 17 }

// places adds the Cartesian coordinates, for a molecule with motions that the
// internal ones do not have: out of the plane of four neighbours, for one.
func (s *scheme) places() {
	for i := range s.numbers {
		for d := range 3 {
			s.add(place, [4]int{i, i, i, i}, placeConstant)
			s.coords[len(s.coords)-1].axis[d] = 1
		}
	}
}

// outgrown says whether a coordinate is about to lose its meaning at x.
func (s *scheme) outgrown(x []float64) bool {
	for i := range s.coords {
		a := &s.coords[i].atoms
		switch s.coords[i].kind {
		case bend:
			if geom.Angle(x, a[0], a[1], a[2]) > nearlyZero {
				return true
			}
		case sideways:
			if geom.Angle(x, a[0], a[1], a[2]) < nearlyBent {
				return true
			}
		case torsion:
			if geom.Angle(x, a[0], a[1], a[2]) > nearlyZero || geom.Angle(x, a[1], a[2], a[3]) > nearlyZero {
				return true
			}
		}
	}
	return false
}
