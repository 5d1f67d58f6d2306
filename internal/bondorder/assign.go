package bondorder

import (
	"fmt"
	"math"
	"slices"
)

// A Result is a Lewis structure.
type Result struct {
	Bonds    []Bond
	Charges  []int   // formal charges, e
	Unpaired []int   // unpaired electrons by atom
	Cost     float64 // what it costs, in the units of costs.go
}

// Assign finds the Lewis structure of atoms at x (bohr) with the given total
// charge. unpaired is the wanted number of unpaired electrons, or -1 where it
// is not known. The error is a *TooClose, or says that nothing fits.
func Assign(numbers []int, x []float64, charge, unpaired int) (Result, error) {
	bonds, err := Connect(numbers, x)
	if err != nil {
		return Result{}, err
	}
	neighbours := make([][]int, len(numbers))
	for _, b := range bonds {
		neighbours[b.A] = append(neighbours[b.A], b.B)
		neighbours[b.B] = append(neighbours[b.B], b.A)
	}
	choices := make([][]state, len(numbers))
	most := make([]int, len(numbers))
	for i, z := range numbers {
		choices[i] = states(z, len(neighbours[i]))
		if z < 10 && isBent(x, i, neighbours[i]) {
			penaliseBent(choices[i])
		}
		for _, s := range choices[i] {
			most[i] = max(most[i], s.pi)
		}
	}
	var solved [][]partial
	for _, p := range pieces(len(numbers), bonds, most) {
		options := solve(p, bonds, choices, most)
		if len(options) == 0 {
			return Result{}, fmt.Errorf("atom %d has %d neighbours: no valence that it may have fits", p.atoms[0]+1, len(neighbours[p.atoms[0]]))
		}
		solved = append(solved, options)
	}
	last, ok := combine(solved, charge, unpaired)
	if !ok {
		want := ""
		if unpaired >= 0 {
			want = fmt.Sprintf(" and %d unpaired electrons", unpaired)
		}
		return Result{}, fmt.Errorf("no bond orders and formal charges fit a total charge of %+d%s", charge, want)
	}
	return result(last, bonds, len(numbers)), nil
}

// isBent says whether atom i has two neighbours at an angle below bent.
func isBent(x []float64, i int, neighbours []int) bool {
	if len(neighbours) != 2 {
		return false
	}
	a, b := neighbours[0], neighbours[1]
	var dot float64
	for k := range 3 {
		dot += (x[3*a+k] - x[3*i+k]) * (x[3*b+k] - x[3*i+k])
	}
	cosine := dot / (distance(x, i, a) * distance(x, i, b))
	return cosine > math.Cos(bent*math.Pi/180)
}

// A total is a choice for all pieces up to one.
type total struct {
	charge, unpaired int
	cost             float64
	option           *partial
	before           *total
}

// maxTotal bounds charges on the way; a molecule's own charge adds to it.
const maxTotal = 24

// combine chooses one option of each piece so that the charges add up.
func combine(solved [][]partial, charge, unpaired int) (*total, bool) {
	have := []*total{{}}
	for _, options := range solved {
		index := make(map[[2]int]int)
		var next []*total
		for _, h := range have {
			for n := range options {
				o := &options[n]
				t := &total{h.charge + o.charge, h.unpaired + o.unpaired, h.cost + o.cost, o, h}
				if t.charge > maxTotal || t.charge < -maxTotal || t.unpaired > maxCharge {
					continue
				}
				key := [2]int{t.charge, t.unpaired}
				if at, ok := index[key]; !ok {
					index[key] = len(next)
					next = append(next, t)
				} else if t.cost < next[at].cost {
					next[at] = t
				}
			}
		}
		have = next
	}
	var best *total
	for _, t := range have {
		fits := t.charge == charge && (unpaired < 0 || t.unpaired == unpaired)
		if fits && (best == nil || t.cost < best.cost) {
			best = t
		}
	}
	return best, best != nil
}

// result follows the decisions back.
func result(last *total, bonds []Bond, n int) Result {
	r := Result{Bonds: slices.Clone(bonds), Charges: make([]int, n), Unpaired: make([]int, n), Cost: last.cost}
	for t := last; t.option != nil; t = t.before {
		for d := t.option.trail; d != nil; d = d.before {
			if d.bond >= 0 {
				r.Bonds[d.bond].Order = 1 + d.pi
			} else {
				r.Charges[d.atom], r.Unpaired[d.atom] = d.state.charge, d.state.unpaired
			}
		}
	}
	return r
}
