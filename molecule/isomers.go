package molecule

import "fmt"

// WithStereo returns the molecule with all stereo elements stated: parities by
// the index of Centres, cis by the index of StereoBonds; a parity of 0 leaves a
// centre unstated. Elements that mean nothing beside the others then (a carbon
// between two branches that have become equal) are none in the result.
// Panics if the lengths differ: a caller's mistake.
func (m *Molecule) WithStereo(parities []Parity, cis []bool) *Molecule {
	if len(parities) != len(m.centres) || len(cis) != len(m.stereoBonds) {
		panic("molecule: stereo elements and statements differ in number")
	}
	s := &stereoSearch{g: m.graph}
	for n, c := range m.centres {
		c.Parity = parities[n]
		s.centres = append(s.centres, c)
	}
	for n, b := range m.stereoBonds {
		b.Known, b.Cis = true, cis[n]
		s.bonds = append(s.bonds, b)
	}
	s.run()
	return newMolecule(m.graph, s.centres, s.bonds)
}

// maxArrangements bounds how many combinations Isomers looks at.
const maxArrangements = 1 << 12

// Isomers returns the distinct stereoisomers that the unspecified elements
// leave open, in a fixed order; the molecule itself if there are none.
// Bridgeheads of small cages are varied together. The error names the elements
// where there are more than max isomers.
func (m *Molecule) Isomers(max int) ([]*Molecule, error) {
	if m.UnspecifiedStereo() == 0 {
		return []*Molecule{m}, nil
	}
	choices := m.freeChoices()
	if len(choices) > 30 || 1<<len(choices) > maxArrangements && 1<<len(choices) > 64*max {
		return nil, m.tooMany(max)
	}
	var isomers []*Molecule
	seen := map[string]bool{}
	for bits := range 1 << len(choices) {
		isomer := m.choose(choices, bits)
		if key := isomer.SMILES(); !seen[key] {
			seen[key] = true
			isomers = append(isomers, isomer)
		}
		if len(isomers) > max {
			return nil, m.tooMany(max)
		}
	}
	return isomers, nil
}

func (m *Molecule) tooMany(max int) error {
	text := ""
	for _, c := range m.centres {
		if c.Parity == 0 {
			text += ", " + m.centreText(c)
		}
	}
	for _, b := range m.stereoBonds {
		if !b.Known {
			text += ", " + m.bondText(b)
		}
	}
	return fmt.Errorf("more than %d stereoisomers: not stated are %s", max, text[2:])
}

// A choice is a centre (with what a cage ties to it) or a double bond whose
// configuration is open.
type choice struct {
	centres  []int // indices of Centres
	relative []Parity
	fixed    Parity // what a stated centre of the same cage leaves, else 0
	bond     int    // index of StereoBonds where there are no centres
}

func (m *Molecule) freeChoices() []choice {
	s := &stereoSearch{g: m.graph, centres: m.centres}
	s.findGroups()
	stated := map[int]Parity{} // by group
	for n, c := range m.centres {
		if c.Parity != 0 {
			stated[s.group[n]] = c.Parity * s.relative[n]
		}
	}
	var choices []choice
	at := map[int]int{}
	for n, c := range m.centres {
		if c.Parity != 0 {
			continue
		}
		first := s.group[n]
		i, ok := at[first]
		if !ok {
			i = len(choices)
			at[first] = i
			choices = append(choices, choice{fixed: stated[first]})
		}
		choices[i].centres = append(choices[i].centres, n)
		choices[i].relative = append(choices[i].relative, s.relative[n])
	}
	for n, b := range m.stereoBonds {
		if !b.Known {
			choices = append(choices, choice{bond: n})
		}
	}
	return choices
}

// choose states every open choice as the bits say.
func (m *Molecule) choose(choices []choice, bits int) *Molecule {
	parities, cis := make([]Parity, len(m.centres)), make([]bool, len(m.stereoBonds))
	for n, c := range m.centres {
		parities[n] = c.Parity
	}
	for n, b := range m.stereoBonds {
		cis[n] = b.Cis
	}
	for i, c := range choices {
		bit := bits>>i&1 == 1
		if len(c.centres) == 0 {
			cis[c.bond] = bit
			continue
		}
		sign := Parity(1)
		if bit {
			sign = -1
		}
		if c.fixed != 0 {
			sign = c.fixed
		}
		for n, centre := range c.centres {
			parities[centre] = sign * c.relative[n]
		}
	}
	return m.WithStereo(parities, cis)
}
