// Package bondorder finds bonds, bond orders and formal charges of a molecule
// that is known by its nuclei and its total charge alone.
//
// Which atoms are bonded follows from covalent radii. Orders and charges are
// the cheapest choice that gives every atom a valence it may have and adds up
// to the total charge: an exact search over all choices, piece by piece of
// conjugation. What "cheap" means (costs.go) is our own choice, made so that
// octets, few charges and the observed bond lengths win, in this order.
package bondorder

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"torsieve/internal/element"
	"torsieve/internal/units"
)

// A Bond joins atoms A < B.
type Bond struct {
	A, B   int
	Order  int
	ratio  float64 // length over the sum of covalent radii
	inRing bool    // of five or six atoms
}

const (
	// longest is the largest length of a bond in sums of covalent radii
	// (Cordero et al. 2008 give radii; the factor is our own choice).
	longest = 1.25
	// shortest, in the same measure: nothing bonds at less. Triple bonds are
	// at 0.77, the shortest of all (H2, 0.74 angstrom) is over 1.
	shortest = 0.55
	// loose bonds are dropped where both atoms hold on to a third: the far
	// corners of a four-membered ring may be no farther apart than that.
	loose = 1.12
)

// A TooClose error names two atoms that no molecule has so near each other.
type TooClose struct {
	A, B     int     // indices from 0
	Distance float64 // bohr
	numbers  [2]int
}

func (e *TooClose) Error() string {
	return fmt.Sprintf("atoms %d (%s) and %d (%s) are %.3f angstrom apart, closer than any bond",
		e.A+1, element.Symbol(e.numbers[0]), e.B+1, element.Symbol(e.numbers[1]), e.Distance/units.Angstrom)
}

// Connect returns the bonds between atoms at x (bohr, 3N), all of order 1,
// sorted by A, then B. A hydrogen has one bond at most. The error is a
// *TooClose.
func Connect(numbers []int, x []float64) ([]Bond, error) {
	if len(x) != 3*len(numbers) {
		panic("bondorder: coordinates and atomic numbers differ in length")
	}
	near, err := candidates(numbers, x)
	if err != nil {
		return nil, err
	}
	near = openBridges(numbers, near)
	// From the tightest on: whoever is full takes no more.
	slices.SortStableFunc(near, func(a, b Bond) int { return cmp.Compare(a.ratio, b.ratio) })
	degree := make([]int, len(numbers))
	neighbours := make([][]int, len(numbers))
	bonds := near[:0]
	for _, b := range near {
		full := degree[b.A] >= maxDegree(numbers[b.A]) || degree[b.B] >= maxDegree(numbers[b.B])
		if full || b.ratio > loose && share(neighbours[b.A], neighbours[b.B]) {
			continue
		}
		degree[b.A]++
		degree[b.B]++
		neighbours[b.A] = append(neighbours[b.A], b.B)
		neighbours[b.B] = append(neighbours[b.B], b.A)
		bonds = append(bonds, b)
	}
	slices.SortFunc(bonds, func(a, b Bond) int { return cmp.Or(a.A-b.A, a.B-b.B) })
	for k, b := range bonds {
		back := stepsBack(b, neighbours)
		bonds[k].inRing = back == 4 || back == 5
	}
	return bonds, nil
}

// openBridges drops what two bonds per pair cannot show of boranes: boron pairs
// with hydrogen between them, and of the hydrogen's two bonds the one to the
// boron that has the more hydrogens already. Diborane becomes two BH3.
func openBridges(numbers []int, near []Bond) []Bond {
	boron := make(map[int][]int) // of a hydrogen
	hydrogens := make(map[int]int)
	for _, b := range near {
		switch h, other := b.A, b.B; {
		case numbers[h] == 5 && numbers[other] == 1:
			boron[other] = append(boron[other], h)
		case numbers[h] == 1 && numbers[other] == 5:
			boron[h] = append(boron[h], other)
		}
	}
	for h := range numbers { // in order, not as the map has it
		if len(boron[h]) == 1 {
			hydrogens[boron[h][0]]++
		}
	}
	dropped := make(map[[2]int]bool)
	for h := range numbers {
		if len(boron[h]) != 2 {
			continue
		}
		i, j := boron[h][0], boron[h][1]
		dropped[[2]int{min(i, j), max(i, j)}] = true
		if hydrogens[i] > hydrogens[j] {
			i, j = j, i
		}
		hydrogens[i]++
		dropped[[2]int{min(h, j), max(h, j)}] = true
	}
	return slices.DeleteFunc(near, func(b Bond) bool { return dropped[[2]int{b.A, b.B}] })
}

// candidates are all pairs near enough for a bond.
func candidates(numbers []int, x []float64) ([]Bond, error) {
	var near []Bond
	for i := range numbers {
		for j := i + 1; j < len(numbers); j++ {
			reach := element.CovalentRadius(numbers[i]) + element.CovalentRadius(numbers[j])
			d := distance(x, i, j)
			switch {
			case d < shortest*reach || d == 0:
				return nil, &TooClose{A: i, B: j, Distance: d, numbers: [2]int{numbers[i], numbers[j]}}
			case d < longest*reach:
				near = append(near, Bond{A: i, B: j, Order: 1, ratio: d / reach})
			}
		}
	}
	return near, nil
}

func distance(x []float64, i, j int) float64 {
	dx, dy, dz := x[3*i]-x[3*j], x[3*i+1]-x[3*j+1], x[3*i+2]-x[3*j+2]
	return math.Sqrt(dx*dx + dy*dy + dz*dz)
}

func share(a, b []int) bool {
	for _, i := range a {
		if slices.Contains(b, i) {
			return true
		}
	}
	return false
}

// maxDegree is the largest number of neighbours of an element.
func maxDegree(z int) int {
	switch {
	case z == 1 || z == 9:
		return 1
	case z == 2 || z == 10 || z == 18:
		return 0
	case z == 8:
		return 3
	case z <= 10:
		return 4
	case element.IsMetal(z):
		return 12
	}
	return 6
}

// stepsBack returns over how many other bonds one end of a bond is reached from
// the other, or 0 if it takes more than five.
func stepsBack(b Bond, neighbours [][]int) int {
	seen := map[int]bool{b.A: true}
	front := []int{b.A}
	for steps := 1; steps <= 5; steps++ {
		var next []int
		for _, i := range front {
			for _, j := range neighbours[i] {
				if seen[j] || i == b.A && j == b.B {
					continue
				}
				if j == b.B {
					return steps
				}
				seen[j] = true
				next = append(next, j)
			}
		}
		front = next
	}
	return 0
}
