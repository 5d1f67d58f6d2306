package molecule

import "slices"

// centreCandidate returns the neighbours of atom i if it can hold a tetrahedral
// configuration that does not invert by itself: four neighbours, or three and a
// lone pair (last). Whether the neighbours differ is not looked at, but that
// not two of them are hydrogens.
//
// Left out, because they change hands quickly: nitrogen that carries hydrogen
// or a lone pair (unless it is held in an aziridine or at a bridgehead; these
// count where stated), and acids of P and S whose proton hops from O to O.
func (g *graph) centreCandidate(i int, stated bool) (neighbours [4]int, ok bool) {
	a := g.atoms[i]
	degree := len(g.neighbours[i])
	if a.Aromatic || a.Radical != 0 || degree < 3 || degree > 4 || g.hydrogenCount(i) > 1 {
		return neighbours, false
	}
	copy(neighbours[:], g.neighbours[i])
	if degree == 3 {
		neighbours[3] = LonePair
		return neighbours, g.holdsLonePair(i, stated)
	}
	switch a.Number {
	case 6, 14, 32, 50:
		return neighbours, a.Charge == 0 && g.valenceSum(i) == 4
	case 5:
		return neighbours, a.Charge == -1
	case 7:
		return neighbours, a.Charge == 1 && !g.carriesH(i)
	case 15, 16, 33, 34, 52:
		return neighbours, !g.hasMobileProton(i)
	}
	return neighbours, false
}

// holdsLonePair says whether three neighbours and a lone pair at i make a
// centre that keeps its configuration.
func (g *graph) holdsLonePair(i int, stated bool) bool {
	a, sum := g.atoms[i], g.valenceSum(i)
	switch a.Number {
	case 16, 34, 52:
		return (a.Charge == 0 && sum == 4 || a.Charge == 1 && sum == 3) && !g.hasMobileProton(i)
	case 15, 33:
		return a.Charge == 0 && sum == 3
	case 7:
		return stated && a.Charge == 0 && sum == 3 && (g.inThreeRing(i) || g.isBridgehead(i))
	}
	return false
}

func (g *graph) carriesH(i int) bool {
	for _, j := range g.neighbours[i] {
		if g.atoms[j].Number == 1 {
			return true
		}
	}
	return false
}

// hasMobileProton says whether i carries both =O (or =S) and -OH (or -SH).
func (g *graph) hasMobileProton(i int) bool {
	double, acid := false, false
	for at, j := range g.neighbours[i] {
		if z := g.atoms[j].Number; z != 8 && z != 16 {
			continue
		}
		if g.bonds[g.neighbourBonds[i][at]].Order == 2 {
			double = true
		}
		acid = acid || g.carriesH(j)
	}
	return double && acid
}

func (g *graph) inThreeRing(i int) bool {
	for _, k := range g.neighbourBonds[i] {
		if g.smallest[k] == 3 {
			return true
		}
	}
	return false
}

// minStereoRing is the smallest ring in which a double bond can be trans.
const minStereoRing = 8

// doubleCandidate returns bond k as a stereo bond, its configuration not
// stated, if it can have two: a double bond between C or N that is in no small
// ring and does not turn by itself.
func (g *graph) doubleCandidate(k int) (StereoBond, bool) {
	b := g.bonds[k]
	s := StereoBond{Bond: k, J: b.A, K: b.B}
	if b.Order != 2 || b.Aromatic || g.inRing[k] && g.ringHoldsCis(k) || g.flexibleImine(k) {
		return s, false
	}
	for end, pair := range [2][2]int{{b.A, b.B}, {b.B, b.A}} {
		ref, ok := g.planarEnd(pair[0], pair[1])
		if !ok {
			return s, false
		}
		if end == 0 {
			s.A = ref
		} else {
			s.B = ref
		}
	}
	return s, true
}

// ringHoldsCis says whether a ring is too tight for double bond k to be trans:
// up to seven atoms, and eight with three or more unsaturated bonds
// (cyclooctatetraene, dibenzocyclooctenes).
func (g *graph) ringHoldsCis(k int) bool {
	if g.smallest[k] != minStereoRing {
		return g.smallest[k] < minStereoRing
	}
	for _, ring := range g.ringBonds {
		if len(ring) != minStereoRing || !slices.Contains(ring, k) {
			continue
		}
		unsaturated := 0
		for _, j := range ring {
			if g.bonds[j].Order > 1 || g.bonds[j].Aromatic {
				unsaturated++
			}
		}
		if unsaturated > 2 {
			return true
		}
	}
	return false
}

// planarEnd returns the reference substituent at end i of a double bond to j:
// the first that is no hydrogen, else a hydrogen. Two hydrogens are none.
func (g *graph) planarEnd(i, j int) (ref int, ok bool) {
	a := g.atoms[i]
	degree := len(g.neighbours[i])
	switch {
	case a.Number == 6 && degree == 3 && a.Charge == 0:
	case a.Number == 7 && degree == 2 && a.Charge == 0:
	case a.Number == 7 && degree == 3 && a.Charge == 1:
	default:
		return 0, false
	}
	ref = -1
	plain := 0
	for _, n := range g.neighbours[i] {
		switch {
		case n == j:
		case g.terminalH(n):
			plain++
			if ref < 0 {
				ref = n
			}
		case ref < 0 || g.terminalH(ref):
			ref = n
		}
	}
	return ref, plain < 2
}

// flexibleImine says whether C=N bond k changes its configuration by itself: in
// a delocalised ion it is a single bond as much as a double one, and where the
// proton of =NH or of a neighbouring N-H (amidine, guanidine) can hop, it does.
// Marks at such bonds are dropped, and the bond is a rotor.
func (g *graph) flexibleImine(k int) bool {
	if g.shared.delocalised.bond[k] {
		return true
	}
	b := g.bonds[k]
	c, n := b.A, b.B
	if g.atoms[c].Number == 7 {
		c, n = n, c
	}
	if g.atoms[c].Number != 6 || g.atoms[n].Number != 7 || g.atoms[n].Charge != 0 {
		return false
	}
	if g.carriesH(n) {
		return true
	}
	for _, j := range g.neighbours[c] {
		if j != n && g.atoms[j].Number == 7 && g.atoms[j].Charge == 0 && g.carriesH(j) {
			return true
		}
	}
	return false
}
