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
