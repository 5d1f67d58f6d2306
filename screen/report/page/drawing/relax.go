package drawing

import (
	"math"
	"math/cmplx"
)

// A spring wants two atoms at a distance; a one-sided one only keeps them from
// coming nearer.
type spring struct {
	i, j     int
	length   float64
	strength float64
	oneSided bool
}

// relaxRings mends a system in which small rings are parts of a large one: they
// become regular again, bonds have one length, and nothing else comes near.
func (s *sketch) relaxRings(atoms []int, rings [][]int, at []complex128) {
	springs := s.ringSprings(atoms, rings)
	force := make([]complex128, len(at))
	for range 1500 {
		clear(force)
		for _, sp := range springs {
			d := at[sp.j] - at[sp.i]
			r := math.Max(cmplx.Abs(d), 1e-3)
			if sp.oneSided && r > sp.length {
				continue
			}
			f := d * complex(sp.strength*(r-sp.length)/r, 0)
			force[sp.i] += f
			force[sp.j] -= f
		}
		for _, i := range atoms {
			at[i] += force[i] * 0.1
		}
	}
}

func (s *sketch) ringSprings(atoms []int, rings [][]int) []spring {
	var springs []spring
	rigid := map[[2]int]bool{}
	for _, ring := range rings {
		if n := len(ring); n <= largestRigid {
			for a := range ring {
				for b := range a {
					length := math.Sin(math.Pi*float64(a-b)/float64(n)) / math.Sin(math.Pi/float64(n))
					springs = append(springs, spring{i: ring[a], j: ring[b], length: length, strength: 1})
					rigid[[2]int{ring[a], ring[b]}], rigid[[2]int{ring[b], ring[a]}] = true, true
				}
			}
		}
	}
	for n, i := range atoms {
		for _, j := range atoms[:n] {
			switch _, bonded := s.m.BondBetween(i, j); {
			case rigid[[2]int{i, j}]:
			case bonded:
				springs = append(springs, spring{i: i, j: j, length: 1, strength: 1})
			case s.m.TopologicalDistance(i, j) == 2:
				springs = append(springs, spring{i: i, j: j, length: math.Sqrt(3), strength: 0.3})
			default:
				springs = append(springs, spring{i: i, j: j, length: 2, strength: 0.3, oneSided: true})
			}
		}
	}
	return springs
}
