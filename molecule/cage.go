package molecule

import "slices"

// A tie couples the configurations of two bridgeheads of a small cage: with
// bridges listed in the same order, one sees them clockwise where the other
// sees them anticlockwise.
type tie struct {
	a, b       int
	bridgeA    [3]int // the neighbours of a on the three bridges
	bridgeB    [3]int
	lengths    [3]int // atoms on each bridge, ascending
	outA, outB int    // fourth neighbours, LonePair where there is none
}

// Sizes up to which bridgeheads have only one arrangement (own choice, from
// known inside-outside isomers: the smallest are bicyclo[4.4.1] systems; of
// trans-fused rings cyclobutane with cyclohexane, cyclopropane with
// cycloheptane).
const (
	maxTiedBridges   = 8 // atoms on three bridges of at least one atom each
	maxTiedWithThree = 6 // ring that is tied cis to a three-membered one
	maxTiedWithFour  = 5 // ring that is tied cis to a four-membered one
)

func tied(lengths [3]int) bool {
	if lengths[0] >= 1 {
		return lengths[0]+lengths[1]+lengths[2] <= maxTiedBridges
	}
	small, large := lengths[1]+2, lengths[2]+2
	return small == 3 && large <= maxTiedWithThree || small == 4 && large <= maxTiedWithFour
}

// ringDegree returns the number of ring bonds at atom i.
func (g *graph) ringDegree(i int) int {
	n := 0
	for _, k := range g.neighbourBonds[i] {
		if g.inRing[k] {
			n++
		}
	}
	return n
}

// isBridgehead says whether atom i is tied to another atom over three bridges
// of at least one atom each.
func (g *graph) isBridgehead(i int) bool {
	if g.ringDegree(i) < 3 {
		return false
	}
	for _, j := range g.nearbyBridgeheads(i) {
		if t, ok := g.tieBetween(i, j); ok && t.lengths[0] >= 1 {
			return true
		}
	}
	return false
}

// nearbyBridgeheads returns the atoms of at least three ring bonds that are
// near enough to i for a tie, ascending.
func (g *graph) nearbyBridgeheads(i int) []int {
	const reach = maxTiedBridges/3 + 1 // bonds on the shortest bridge
	dist := map[int]int{i: 0}
	queue := []int{i}
	var found []int
	for at := 0; at < len(queue); at++ {
		a := queue[at]
		if dist[a] == reach {
			break
		}
		for n, j := range g.neighbours[a] {
			if _, seen := dist[j]; seen || !g.inRing[g.neighbourBonds[a][n]] {
				continue
			}
			dist[j] = dist[a] + 1
			queue = append(queue, j)
			if g.ringDegree(j) >= 3 {
				found = append(found, j)
			}
		}
	}
	slices.Sort(found)
	return found
}

// tieBetween returns the tie between two atoms of ring degree three or more,
// if three short bridges join them.
func (g *graph) tieBetween(a, b int) (tie, bool) {
	if k, ok := g.bondBetween(a, b); ok && g.smallest[k] > 4 {
		return tie{}, false // fused rings of five and more are free
	}
	paths := g.threeBridges(a, b)
	if paths == nil {
		return tie{}, false
	}
	slices.SortStableFunc(paths, func(p, q []int) int { return len(p) - len(q) })
	t := tie{a: a, b: b}
	for i, p := range paths {
		t.bridgeA[i], t.bridgeB[i] = p[1], p[len(p)-2]
		t.lengths[i] = len(p) - 2
	}
	if !tied(t.lengths) {
		return tie{}, false
	}
	t.outA = g.fourthNeighbour(a, t.bridgeA)
	t.outB = g.fourthNeighbour(b, t.bridgeB)
	return t, true
}

func (g *graph) fourthNeighbour(i int, bridge [3]int) int {
	for _, j := range g.neighbours[i] {
		if !slices.Contains(bridge[:], j) {
			return j
		}
	}
	return LonePair
}

// relation returns the product of the parities that centres at the two ends of
// a tie must have, in the neighbour orders given.
func (t tie) relation(a, b [4]int) Parity {
	return -permutationSign(a, [4]int{t.outA, t.bridgeA[0], t.bridgeA[1], t.bridgeA[2]}) *
		permutationSign(b, [4]int{t.outB, t.bridgeB[0], t.bridgeB[1], t.bridgeB[2]})
}

// permutationSign returns the sign of the permutation that brings one order of
// the same four neighbours to another, 0 if they are not the same.
func permutationSign(from, to [4]int) Parity {
	sign := Parity(1)
	for i := range to {
		at := slices.Index(from[i:], to[i])
		if at < 0 {
			return 0
		}
		if at > 0 {
			from[i], from[i+at] = from[i+at], from[i]
			sign = -sign
		}
	}
	return sign
}
