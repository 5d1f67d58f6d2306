package bondorder

import "slices"

// A piece is a set of atoms joined by bonds that may be multiple.
type piece struct {
	atoms []int // in the order of the search
	bonds []int // indices into bonds
}

// pieces cuts the molecule where no bond can be multiple.
func pieces(n int, bonds []Bond, most []int) []piece {
	at := make([][]int, n) // bonds that may be multiple, by atom
	for k, b := range bonds {
		if most[b.A] > 0 && most[b.B] > 0 && maxPi(b.ratio) > 0 {
			at[b.A] = append(at[b.A], k)
			at[b.B] = append(at[b.B], k)
		}
	}
	seen := make([]bool, n)
	var list []piece
	for start := range n {
		if seen[start] {
			continue
		}
		list = append(list, grow(start, bonds, at, seen))
	}
	return list
}

// grow collects a piece, breadth first from its end, so that few atoms are
// under way at a time.
func grow(start int, bonds []Bond, at [][]int, seen []bool) piece {
	first := sweep(start, bonds, at)
	order := sweep(first[len(first)-1], bonds, at) // the farthest atom is an end
	p := piece{atoms: order}
	for _, i := range order {
		seen[i] = true
		for _, k := range at[i] {
			if !slices.Contains(p.bonds, k) {
				p.bonds = append(p.bonds, k)
			}
		}
	}
	return p
}

func sweep(start int, bonds []Bond, at [][]int) []int {
	order := []int{start}
	in := map[int]bool{start: true}
	for done := 0; done < len(order); done++ {
		i := order[done]
		for _, k := range at[i] {
			j := bonds[k].A + bonds[k].B - i
			if !in[j] {
				in[j] = true
				order = append(order, j)
			}
		}
	}
	return order
}

// A partial is a choice for the part of a piece that the search has passed.
type partial struct {
	open     []int // pi bonds so far of the atoms under way
	charge   int
	unpaired int
	cost     float64
	trail    *decision
}

// A decision is one bond's pi count or one atom's state.
type decision struct {
	bond, pi int // bond -1: none
	atom     int
	state    state
	before   *decision
}

const (
	widest    = 20000 // partial choices kept; more only in cages, where the cheapest are kept
	maxCharge = 8     // of a piece, on the way
	tooMuch   = 60.0  // cost above the cheapest that no total charge would make up for
)

// solve returns the cheapest choice of a piece for each charge and number of
// unpaired electrons, in a fixed order.
func solve(p piece, bonds []Bond, choices [][]state, most []int) []partial {
	left := make(map[int]int) // bonds of an atom that are not decided yet
	for _, k := range p.bonds {
		left[bonds[k].A]++
		left[bonds[k].B]++
	}
	var under []int // the atoms under way, parallel to partial.open
	have := []partial{{}}
	entered := make(map[int]bool)
	for _, i := range p.atoms {
		under = append(under, i)
		for n := range have {
			have[n].open = append(slices.Clip(have[n].open), 0)
		}
		entered[i] = true
		for _, k := range p.bonds {
			b := bonds[k]
			other := b.A + b.B - i
			if b.A != i && b.B != i || !entered[other] {
				continue
			}
			have = decideBond(have, k, b, slices.Index(under, i), slices.Index(under, other), most[i], most[other])
			left[i]--
			left[other]--
		}
		for n := 0; n < len(under); {
			if left[under[n]] > 0 {
				n++
				continue
			}
			have = decideAtom(have, n, under[n], choices[under[n]])
			under = slices.Delete(under, n, n+1)
		}
	}
	return have
}

// decideBond branches on the pi count of bond k.
func decideBond(have []partial, k int, b Bond, at, other, most1, most2 int) []partial {
	var next merger
	for _, h := range have {
		for pi := 0; pi <= maxPi(b.ratio); pi++ {
			if h.open[at]+pi > most1 || h.open[other]+pi > most2 {
				break
			}
			n := h
			if pi > 0 {
				n.open = slices.Clone(h.open)
				n.open[at] += pi
				n.open[other] += pi
			}
			n.cost += bondCost(b, pi)
			n.trail = &decision{bond: k, pi: pi, atom: -1, before: h.trail}
			next.add(n)
		}
	}
	return next.result()
}

// decideAtom branches on the states of an atom whose bonds are all decided.
func decideAtom(have []partial, at, atom int, choices []state) []partial {
	var next merger
	for _, h := range have {
		for _, s := range choices {
			if s.pi != h.open[at] {
				continue
			}
			n := h
			n.open = slices.Delete(slices.Clone(h.open), at, at+1)
			n.charge += s.charge
			n.unpaired += s.unpaired
			if n.charge > maxCharge || n.charge < -maxCharge || n.unpaired > maxCharge {
				continue
			}
			n.cost += s.cost
			n.trail = &decision{bond: -1, atom: atom, state: s, before: h.trail}
			next.add(n)
		}
	}
	return next.result()
}

// A merger keeps the cheapest of partial choices that have the same future. Of
// equals the first stays, so that the outcome does not depend on luck.
type merger struct {
	list  []partial
	index map[string]int
}

func (m *merger) add(p partial) {
	if m.index == nil {
		m.index = make(map[string]int)
	}
	key := make([]byte, 0, 32)
	for _, k := range p.open {
		key = append(key, byte(k))
	}
	key = append(key, byte(p.charge+maxCharge), byte(p.unpaired))
	if at, ok := m.index[string(key)]; !ok {
		m.index[string(key)] = len(m.list)
		m.list = append(m.list, p)
	} else if p.cost < m.list[at].cost {
		m.list[at] = p
	}
}

func (m *merger) result() []partial {
	if len(m.list) == 0 {
		return nil
	}
	lowest := slices.MinFunc(m.list, byCost).cost
	list := slices.DeleteFunc(m.list, func(p partial) bool { return p.cost > lowest+tooMuch })
	if len(list) > widest {
		slices.SortStableFunc(list, byCost)
		list = list[:widest]
	}
	return list
}

func byCost(a, b partial) int {
	switch {
	case a.cost < b.cost:
		return -1
	case a.cost > b.cost:
		return 1
	}
	return 0
}
