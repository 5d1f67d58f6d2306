package molecule

import (
	"fmt"
	"slices"
)

// perceiveAromaticity sets the aromatic flags of atoms and bonds.
//
// A set of fused rings (one, two or three relevant rings that share bonds) is
// aromatic if each of its atoms can take part and their pi electrons number
// 4n+2 (E. Hueckel, Z. Phys. 1931, 70, 204). Single rings are tried until
// nothing changes, then pairs and triples with them, so that the answer does
// not depend on the Kekule form. In the few ring systems where it still does
// (biphenylene), the form that gives most aromatic atoms counts (forms.go).
//
// Atoms and bonds that the input wrote as aromatic keep the flag even where
// the rule does not confirm it; a warning names them.
func (g *graph) perceiveAromaticity(writtenAtoms, writtenBonds []bool) []string {
	p := newHueckel(g)
	p.run()
	p.tryOtherForms()
	for i, is := range p.atom {
		g.atoms[i].Aromatic = is
	}
	for k, is := range p.bond {
		g.bonds[k].Aromatic = is
	}
	for i, a := range g.atoms[:len(writtenAtoms)] {
		writtenAtoms[i] = writtenAtoms[i] && canBeAromatic(a.Number)
	}
	var kept []int
	for k, is := range writtenBonds {
		if b := &g.bonds[k]; is && writtenAtoms[b.A] && writtenAtoms[b.B] && (!p.atom[b.A] || !p.atom[b.B]) {
			b.Aromatic = true
		}
	}
	for i, is := range writtenAtoms {
		if is && !g.atoms[i].Aromatic {
			g.atoms[i].Aromatic = true
			kept = append(kept, i+1)
		}
	}
	if len(kept) > 0 {
		return []string{fmt.Sprintf("written as aromatic, though the electron count does not confirm it: atoms %v", kept)}
	}
	return nil
}

// canBeAromatic says whether an element has a lower-case symbol in SMILES.
func canBeAromatic(number int) bool {
	switch number {
	case 5, 6, 7, 8, 15, 16, 33, 34, 52:
		return true
	}
	return false
}

// A hueckel holds one perception at work.
type hueckel struct {
	g          *graph
	atom, bond []bool
	unions     []ringUnion // pairs and triples
	double     []int       // by atom: its double bond, -1 without, -2 if it is no candidate
}

// A ringUnion is the atoms and bonds of one, two or three rings.
type ringUnion struct{ atoms, bonds []int }

func newHueckel(g *graph) *hueckel {
	p := &hueckel{g: g, atom: make([]bool, len(g.atoms)), bond: make([]bool, len(g.bonds)), double: make([]int, len(g.atoms))}
	p.findDoubleBonds()
	p.findUnions()
	return p
}

func (p *hueckel) findDoubleBonds() {
	for i := range p.g.atoms {
		p.double[i] = -1
		for _, k := range p.g.neighbourBonds[i] {
			switch order := p.g.bonds[k].Order; {
			case order == 3 || order == 2 && p.double[i] != -1:
				p.double[i] = -2
			case order == 2:
				p.double[i] = k
			}
		}
	}
}

// possible says whether atom i may be part of an aromatic ring in some Kekule
// form: it saves work with rings that never can.
func (p *hueckel) possible(i int) bool {
	if p.double[i] == -2 || len(p.g.neighbours[i]) > 3 {
		return false
	}
	if p.double[i] >= 0 {
		return true
	}
	_, ok := p.lonePair(i)
	return ok
}

// findUnions lists the pairs and connected triples of edge-sharing rings whose
// atoms can all take part.
func (p *hueckel) findUnions() {
	g := p.g
	byBond := make([][]int, len(g.bonds))
	var good []int
	for r, ring := range g.rings {
		if slices.ContainsFunc(ring, func(i int) bool { return !p.possible(i) }) {
			continue
		}
		good = append(good, r)
		for _, k := range g.ringBonds[r] {
			byBond[k] = append(byBond[k], r)
		}
	}
	fused := make([][]int, len(g.rings)) // ascending
	for _, r := range good {
		for _, k := range g.ringBonds[r] {
			for _, q := range byBond[k] {
				if q != r {
					fused[r] = append(fused[r], q)
				}
			}
		}
		slices.Sort(fused[r])
		fused[r] = slices.Compact(fused[r])
	}
	for _, r := range good {
		for _, q := range fused[r] {
			if q > r {
				p.unions = append(p.unions, p.union(r, q))
			}
		}
	}
	for _, r := range good {
		for a, q := range fused[r] {
			for _, s := range fused[r][:a] {
				// r is in the middle; a triangle of rings is met at its lowest only
				if _, triangle := slices.BinarySearch(fused[q], s); !triangle || r < s {
					p.unions = append(p.unions, p.union(r, q, s))
				}
			}
		}
	}
}

func (p *hueckel) union(rings ...int) ringUnion {
	var u ringUnion
	for _, r := range rings {
		u.atoms = append(u.atoms, p.g.rings[r]...)
		u.bonds = append(u.bonds, p.g.ringBonds[r]...)
	}
	slices.Sort(u.atoms)
	slices.Sort(u.bonds)
	u.atoms, u.bonds = slices.Compact(u.atoms), slices.Compact(u.bonds)
	return u
}

func (p *hueckel) run() {
	p.runSingles()
	for changed := true; changed; {
		changed = false
		for _, u := range p.unions {
			if p.test(u) {
				changed = true
			}
		}
		if p.runSingles() {
			changed = true
		}
	}
}

func (p *hueckel) runSingles() (any bool) {
	for changed := true; changed; {
		changed = false
		for r := range p.g.rings {
			if p.test(ringUnion{p.g.rings[r], p.g.ringBonds[r]}) {
				changed, any = true, true
			}
		}
	}
	return any
}

// test flags the union if it is aromatic and says whether that is new.
func (p *hueckel) test(u ringUnion) bool {
	if !slices.ContainsFunc(u.bonds, func(k int) bool { return !p.bond[k] }) {
		return false
	}
	sum := 0
	for _, i := range u.atoms {
		electrons, ok := p.electrons(i, u.bonds)
		if !ok {
			return false
		}
		sum += electrons
	}
	if sum%4 != 2 {
		return false
	}
	for _, i := range u.atoms {
		p.atom[i] = true
	}
	for _, k := range u.bonds {
		p.bond[k] = true
	}
	return true
}

// electrons returns what atom i lends to the pi system of the bonds in the
// ring set, and whether it can be part of one.
func (p *hueckel) electrons(i int, bonds []int) (count int, ok bool) {
	k := p.double[i]
	switch {
	case k == -2 || len(p.g.neighbours[i]) > 3 || !canBeAromatic(p.g.atoms[i].Number):
		return 0, false
	case k == -1:
		return p.lonePair(i)
	case p.bond[k] || slices.Contains(bonds, k):
		return 1, true
	}
	if p.g.atoms[i].Number != 6 {
		return 0, false
	}
	switch p.g.atoms[p.g.other(k, i)].Number {
	case 7, 8, 16, 34, 52:
		return 0, true // the partner draws the electrons out of the ring
	}
	return 0, false
}

// lonePair returns the electrons of an atom without double bond.
func (p *hueckel) lonePair(i int) (count int, ok bool) {
	a, degree := p.g.atoms[i], len(p.g.neighbours[i])
	if a.Radical != 0 {
		return 0, false
	}
	switch a.Number {
	case 5:
		return 0, degree == 3 && a.Charge == 0
	case 6:
		switch {
		case degree == 3 && a.Charge == -1:
			return 2, true
		case degree == 3 && a.Charge == 1:
			return 0, true
		}
	case 7, 15, 33:
		if degree == 3 && a.Charge == 0 || degree == 2 && a.Charge == -1 {
			return 2, true
		}
	case 8, 16, 34, 52:
		if degree == 2 && a.Charge == 0 {
			return 2, true
		}
	}
	return 0, false
}

func count(flags []bool) int {
	n := 0
	for _, is := range flags {
		if is {
			n++
		}
	}
	return n
}
