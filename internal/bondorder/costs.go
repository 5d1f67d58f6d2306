package bondorder

import (
	"math"

	"torsieve/internal/element"
)

// A state is one way for an atom to use its electrons, given its neighbours.
type state struct {
	pi       int // bonds beyond the first to each neighbour
	charge   int
	unpaired int
	cost     float64
}

// Costs, in units of their own. A missing electron pair of an octet is worst, an
// unpaired electron bad, charges by element as below; a pair beyond the octet
// of a heavy element costs little.
const (
	costDeficiency = 12.0
	costUnpaired   = 8.0
	costBeyond     = 0.25
	costLoneBeyond = 2.0 // beyond the octet with a lone pair, as in SF4
	costSecond     = 4.0 // for a second charge on one atom
	costBent       = 8.0 // two double bonds or a triple bond at a bent atom
	maxUnpaired    = 2
)

// bent is the angle in degrees below which an atom with two neighbours is none
// of an allene or alkyne; those of rings are bent to 140 at times.
const bent = 135

// costNegative and costPositive are those of one charge.
var costNegative = map[int]float64{5: 0.5, 6: 6, 7: 2, 8: 1.5, 9: 1, 14: 6, 15: 4, 16: 1.5, 17: 1, 34: 1.5, 35: 1, 53: 1}
var costPositive = map[int]float64{1: 3, 6: 3, 7: 2.5, 8: 4.5, 9: 9, 14: 3, 15: 1.5, 16: 2.5, 17: 5, 34: 2.5, 35: 4, 53: 3}

const costOther = 4.0

// states lists how an atom of element z with degree neighbours may be bound, by
// pi bonds. Electrons that are in no bond stand in pairs but for the unpaired.
func states(z, degree int) []state {
	if element.IsMetal(z) {
		return metalStates(z, degree)
	}
	valence := valenceElectrons(z)
	var list []state
	for pi := 0; pi <= 3; pi++ {
		for charge := -2; charge <= 3; charge++ {
			for unpaired := 0; unpaired <= maxUnpaired; unpaired++ {
				rest := valence - charge - degree - pi - unpaired
				if rest < 0 || rest%2 != 0 {
					continue
				}
				pairs := degree + pi + unpaired + rest/2
				cost, ok := pairCost(z, pairs)
				if !ok || charge > 1 && degree > 0 && z <= 10 {
					continue
				}
				if pairs > 4 && rest > 0 && element.Group(z) < 17 {
					cost += costLoneBeyond
				}
				cost += costUnpaired*float64(unpaired) + chargeCost(z, charge)
				list = append(list, state{pi, charge, unpaired, cost})
			}
		}
	}
	return list
}

func valenceElectrons(z int) int {
	switch g := element.Group(z); {
	case z == 2:
		return 2
	case g > 10:
		return g - 10
	default:
		return g
	}
}

// pairCost judges the number of orbitals in use: four, one for H and He, and
// more than four only from the third period on.
func pairCost(z, pairs int) (float64, bool) {
	octet := 4
	if z <= 2 {
		octet = 1
	}
	switch {
	case pairs < octet && (z == 1 || z == 5 && pairs == 3):
		return 0, true // a proton; boron with three bonds
	case pairs <= octet:
		return costDeficiency * float64(octet-pairs), true
	case element.Period(z) >= 3 && pairs <= 6 || element.Group(z) == 17 && z > 9 && pairs == 7:
		return costBeyond * float64(pairs-octet), true
	}
	return 0, false
}

func chargeCost(z, charge int) float64 {
	table := costPositive
	if charge < 0 {
		table, charge = costNegative, -charge
	}
	if charge == 0 {
		return 0
	}
	one, ok := table[z]
	if !ok {
		one = costOther
	}
	return one*float64(charge) + costSecond*float64(charge-1)
}

// metalStates: a bare ion in its usual charge; a bonded metal takes single
// bonds and any charge, none the cheapest.
func metalStates(z, degree int) []state {
	usual := 0
	if degree == 0 {
		switch g := element.Group(z); {
		case g == 1 || g == 11:
			usual = 1
		case g == 13 || g == 3 || g == 0:
			usual = 3
		default:
			usual = 2
		}
	}
	var list []state
	for charge := -maxCharge; charge <= 7; charge++ {
		list = append(list, state{charge: charge, cost: math.Abs(float64(charge - usual))})
	}
	return list
}

// Lengths of double and triple bonds over those of single bonds, from the usual
// lengths of C-C, C-N, C-O, N-N and S-O bonds (each within 0.03).
var orderRatio = [3]float64{1, 0.87, 0.79}

// ringBonus is what a pi bond inside of a five- or six-membered ring is worth:
// of two resonance forms, that with the aromatic ring is drawn.
const ringBonus = 1.0

// bondCost says how badly a bond's length fits an order, less the bonus.
func bondCost(b Bond, pi int) float64 {
	off := (b.ratio - orderRatio[pi]) / 0.06
	cost := min(0.3*off*off, 1.5)
	if b.inRing {
		cost -= ringBonus * float64(pi)
	}
	return cost
}

// maxPi is the largest number of pi bonds for a length ratio.
func maxPi(ratio float64) int {
	switch {
	case ratio < 0.90:
		return 2
	case ratio < 1.10:
		return 1
	}
	return 0
}

// penaliseBent adds the cost of two pi bonds at an atom whose two neighbours
// stand at an angle.
func penaliseBent(list []state) {
	for n := range list {
		if list[n].pi == 2 {
			list[n].cost += costBent
		}
	}
}
