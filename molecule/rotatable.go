package molecule

import "slices"

// Rotors returns the bonds about which parts of the molecule turn: single bonds
// outside rings between atoms that both carry something off the axis, so that
// neither end is linear. Bonds of methyl and the like are among them, marked
// Idle. So are the C=N bonds of delocalised ions, of amidines with N-H and of
// =NH imines, which are no stereo elements: they have two states and are never
// counted.
//
// The order is that of the bonds.
func (m *Molecule) Rotors() []Rotor { return m.lazy.rotors() }

// RotatableBonds counts the rotatable bonds in the usual sense: single bonds
// outside rings between two atoms that each have a further heavy neighbour,
// neither part of a triple bond, amide-like C-N bonds left out.
func (m *Molecule) RotatableBonds() int {
	n := 0
	for _, r := range m.Rotors() {
		if r.Counted {
			n++
		}
	}
	return n
}

func (m *Molecule) findRotors() []Rotor {
	var rotors []Rotor
	cells := m.stereoClasses()
	seen := make([]int, len(m.atoms))
	for k, b := range m.bonds {
		if m.inRing[k] || !m.turns(k) || !m.offAxis(b.A) || !m.offAxis(b.B) {
			continue
		}
		r := Rotor{Bond: k, J: b.A, K: b.B, AmideLike: m.amideLike(b.A, b.B) || m.amideLike(b.B, b.A) || b.Order == 2}
		moving, ofB := m.smallerSide(b.A, b.B, seen, k+1)
		if r.Moving = moving; !ofB {
			r.J, r.K = r.K, r.J
		}
		r.PeriodJ, r.PeriodK = m.period(r.J, r.K, cells), m.period(r.K, r.J, cells)
		r.Idle = m.idleEnd(r.J, r.K, r.PeriodJ) || m.idleEnd(r.K, r.J, r.PeriodK)
		r.Counted = !r.AmideLike && m.branches(r.J, r.K) && m.branches(r.K, r.J)
		rotors = append(rotors, r)
	}
	return rotors
}

// turns says whether bond k is single, or a double bond that turns as one: of
// a delocalised cation, or an imine whose configuration nobody stated.
func (m *Molecule) turns(k int) bool {
	b := m.bonds[k]
	switch {
	case b.Order == 1:
		return true
	case b.Order != 2 || b.Aromatic:
		return false
	}
	c, n := b.A, b.B
	if m.atoms[c].Number == 7 {
		c, n = n, c
	}
	return m.atoms[c].Number == 6 && m.atoms[n].Number == 7 && m.flexibleImine(k)
}

// offAxis says whether atom i, an end of a bond, has further neighbours that are
// off its axis.
func (m *Molecule) offAxis(i int) bool { return len(m.neighbours[i]) > 1 && !m.linear(i) }

// linear says whether the bonds of atom i lie on a line.
func (g *graph) linear(i int) bool {
	double := 0
	for _, k := range g.neighbourBonds[i] {
		switch g.bonds[k].Order {
		case 3:
			return true
		case 2:
			double++
		}
	}
	return double > 1 && len(g.neighbours[i]) == 2
}

// branches says whether i has a heavy neighbour beside j.
func (m *Molecule) branches(i, j int) bool {
	for _, n := range m.neighbours[i] {
		if n != j && m.atoms[n].Number > 1 {
			return true
		}
	}
	return false
}

// amideLike says whether c-n is the C-N bond of an amide, thioamide, urea,
// carbamate, amidine or guanidine.
func (m *Molecule) amideLike(c, n int) bool {
	if m.atoms[c].Number != 6 || m.atoms[n].Number != 7 || m.atoms[c].Aromatic {
		return false
	}
	if m.valenceSum(n) != len(m.neighbours[n]) && !m.shared.delocalised.atom[n] {
		return false
	}
	for at, j := range m.neighbours[c] {
		if j == n || m.bonds[m.neighbourBonds[c][at]].Order != 2 {
			continue
		}
		switch m.atoms[j].Number {
		case 7, 8, 16, 34:
			return true
		}
	}
	return false
}

// smallerSide returns the smaller of the two sides of acyclic bond i-j: the
// atoms on it, its end left out, ascending, and whether it is the side of j. The
// sides grow in turn until one is complete; of equal ones it is that of j.
func (m *Molecule) smallerSide(i, j int, seen []int, stamp int) (atoms []int, ofJ bool) {
	sides := [2][]int{{j}, {i}}
	var at [2]int
	seen[i], seen[j] = stamp, stamp
	for {
		for s := range sides {
			if at[s] == len(sides[s]) {
				atoms = sides[s][1:]
				slices.Sort(atoms)
				return atoms, s == 0
			}
			a := sides[s][at[s]]
			at[s]++
			for _, n := range m.neighbours[a] {
				if seen[n] != stamp {
					seen[n] = stamp
					sides[s] = append(sides[s], n)
				}
			}
		}
	}
}

// stereoClasses returns symmetry classes that tell branches of different
// configuration apart.
func (m *Molecule) stereoClasses() []int {
	class := make([]int, len(m.atoms))
	offset := 0
	for f, atoms := range m.fragments {
		v := m.view(f, true)
		v.setStereo(m.graph, f, m.centres, m.stereoBonds)
		cells := v.cells()
		for n, i := range v.atoms {
			class[i] = offset + cells[n]
		}
		for _, i := range atoms {
			if v.node[i] < 0 {
				class[i] = offset + len(v.atoms) + cells[v.node[m.neighbours[i][0]]]
			}
		}
		offset += 2 * len(v.atoms)
	}
	return class
}

// period returns the order of the rotation about the axis j-i that maps the
// substituents of i on like ones: 3 for three alike, 2 for two alike in a
// plane, else 1.
func (m *Molecule) period(i, j int, class []int) int {
	var others []int
	for _, n := range m.neighbours[i] {
		if n != j {
			others = append(others, n)
		}
	}
	for _, n := range others[1:] {
		if class[n] != class[others[0]] {
			return 1
		}
	}
	switch {
	case len(others) == 3:
		return 3
	case len(others) == 2 && m.planar(i):
		return 2
	}
	return 1
}

// planar says whether the three bonds of atom i lie in a plane: it has a double
// bond, is aromatic, a cation or boron, or a nitrogen whose lone pair a
// neighbour takes up.
func (g *graph) planar(i int) bool {
	a := g.atoms[i]
	if len(g.neighbours[i]) != 3 {
		return false
	}
	if a.Aromatic || a.Number == 5 || a.Number == 6 && a.Charge == 1 {
		return true
	}
	switch a.Number {
	case 6:
		return g.valenceSum(i) == 4
	case 7:
		return g.valenceSum(i) == 4 || g.conjugated(i)
	}
	return false
}

// conjugated says whether nitrogen i with three single bonds is next to a pi
// system, a sulfonyl group left out, and in no small ring.
func (g *graph) conjugated(i int) bool {
	for _, k := range g.neighbourBonds[i] {
		if size := g.smallest[k]; size == 3 || size == 4 {
			return false
		}
	}
	for _, j := range g.neighbours[i] {
		if z := g.atoms[j].Number; z != 6 && z != 7 && z != 5 {
			continue
		}
		if g.atoms[j].Aromatic || g.valenceSum(j) > len(g.neighbours[j]) {
			return true
		}
	}
	return false
}

// idleEnd says whether turning end i makes no other conformer: three like
// substituents that are single atoms or methyl groups.
func (m *Molecule) idleEnd(i, j, period int) bool {
	if period != 3 {
		return false
	}
	for _, n := range m.neighbours[i] {
		if n == j || len(m.neighbours[n]) == 1 {
			continue
		}
		if m.atoms[n].Number != 6 || m.hydrogenCount(n) != 3 {
			return false
		}
	}
	return true
}
