package forcefield

import "math"

// angles returns the rule for natural angles that differ from the table's:
// those of three- and four-membered rings, and of ammonium. Own choices: the
// paper's form for trigonal centres lets an angle below 60 degrees collapse,
// and its tetrahedral one gives long bonds in cyclopropane.
func (t *typing) angles(o Options) angleRule {
	if !o.SmallRings && !o.Ammonium {
		return nil
	}
	const degree = math.Pi / 180
	return func(i, j, k int) float64 {
		if o.Ammonium && t.names[j] == "N_3" && len(t.m.Neighbours(j)) == 4 && !t.joined(i, k) {
			return math.Acos(-1. / 3)
		}
		if !o.SmallRings {
			return 0
		}
		flat := t.flatCentre(j)
		switch {
		case t.joined(i, k):
			return 60 * degree
		case flat && t.across(i, j, k):
			return 90 * degree
		case !flat || len(t.m.Neighbours(j)) != 3:
			return 0
		}
		// Outside a small ring, unless the two arms share a larger one.
		if t.inSmallRing(i, j, 3) != t.inSmallRing(k, j, 3) && !t.sharesRing(i, j, k) {
			return 150 * degree
		}
		if t.inSmallRing(i, j, 4) != t.inSmallRing(k, j, 4) && !t.sharesRing(i, j, k) {
			return 135 * degree
		}
		return 0
	}
}

func (t *typing) flatCentre(j int) bool {
	switch t.names[j] {
	case "C_2", "C_R", "N_R", "N_2":
		return true
	}
	return false
}

func (t *typing) joined(i, k int) bool {
	_, ok := t.m.BondBetween(i, k)
	return ok
}

// across reports that i, j, k are part of a ring of four.
func (t *typing) across(i, j, k int) bool {
	for _, l := range t.m.Neighbours(i) {
		if l != j && l != k && t.joined(l, k) {
			return true
		}
	}
	return false
}

// inSmallRing reports that the bond i-j is part of a ring of the given size.
func (t *typing) inSmallRing(i, j, size int) bool {
	k, _ := t.m.BondBetween(i, j)
	return t.m.SmallestRing(k) == size
}

// sharesRing reports that i, j, k follow one another in a ring.
func (t *typing) sharesRing(i, j, k int) bool {
	for _, ring := range t.m.Rings() {
		for n, atom := range ring {
			before, after := ring[(n+len(ring)-1)%len(ring)], ring[(n+1)%len(ring)]
			if atom == j && (before == i && after == k || before == k && after == i) {
				return true
			}
		}
	}
	return false
}
