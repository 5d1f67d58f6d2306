package molecule

import "fmt"

// Centres returns the tetrahedral stereo centres, stated or not: the atoms at
// which the two arrangements of the neighbours are different, given what is
// stated elsewhere, or would be if it were.
func (m *Molecule) Centres() []Centre { return m.centres }

// StereoBonds returns the double bonds with two configurations, stated or not.
func (m *Molecule) StereoBonds() []StereoBond { return m.stereoBonds }

// UnspecifiedStereo returns the number of stereo elements that are not stated.
func (m *Molecule) UnspecifiedStereo() int {
	n := 0
	for _, c := range m.centres {
		if c.Parity == 0 {
			n++
		}
	}
	for _, b := range m.stereoBonds {
		if !b.Known {
			n++
		}
	}
	return n
}

// withStereo makes the molecule: the stereo elements of g with what the input
// states of them.
func (d *draft) withStereo(g *graph) *Molecule {
	stated := d.statedCentres()
	var centres []Centre
	for i := range g.atoms {
		order, isStated := stated[i]
		neighbours, ok := g.centreCandidate(i, isStated)
		if !ok {
			continue
		}
		c := Centre{Atom: i, Neighbours: neighbours}
		if isStated {
			c.Parity = order.parity * permutationSign(order.neighbours, neighbours)
		}
		centres = append(centres, c)
	}
	marks := map[int]statedDouble{}
	for _, s := range d.doubles {
		if k, ok := g.bondBetween(s.i, s.j); ok {
			marks[k] = s
		}
	}
	var bonds []StereoBond
	for k := range g.bonds {
		mark, isStated := marks[k]
		b, ok := g.doubleCandidate(k)
		if !ok {
			continue
		}
		if isStated {
			b.Known, b.Cis = true, mark.cisFor(b)
		}
		bonds = append(bonds, b)
	}
	s := &stereoSearch{g: g, centres: centres, bonds: bonds}
	s.run()
	d.warnings = append(d.warnings, s.warnings...)
	return newMolecule(g, s.centres, s.bonds)
}

type statedOrder struct {
	neighbours [4]int
	parity     Parity
}

// statedCentres resolves the neighbours that the input left implicit.
func (d *draft) statedCentres() map[int]statedOrder {
	stated := map[int]statedOrder{}
	for _, c := range d.centres {
		if len(c.neighbours) < 3 || len(c.neighbours) > 4 || c.parity == 0 {
			continue
		}
		o := statedOrder{parity: c.parity}
		last := LonePair
		if d.firstH[c.atom] >= 0 {
			last = d.firstH[c.atom]
		}
		o.neighbours[3] = last
		for n, j := range c.neighbours {
			if j == ImplicitH {
				j = last
			}
			o.neighbours[n] = j
		}
		stated[c.atom] = o
	}
	return stated
}

// cisFor returns the configuration with respect to the reference substituents
// of b.
func (s statedDouble) cisFor(b StereoBond) bool {
	a, bb := s.a, s.b
	if s.i != b.J {
		a, bb = bb, a
	}
	return s.cis != ((a != b.A) != (bb != b.B))
}

// elementText names a stereo element for messages.
func (g *graph) centreText(c Centre) string {
	return fmt.Sprintf("atom %d (%s)", c.Atom+1, elementName(g.atoms[c.Atom].Number))
}

func (g *graph) bondText(b StereoBond) string {
	return fmt.Sprintf("the double bond between atoms %d and %d", b.J+1, b.K+1)
}
