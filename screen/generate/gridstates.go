package generate

import "math"

// finest is the largest number of combinations with shoulders that are all built.
const finest = 800

// middles are the states of each rotor as the table has them.
func (s *search) middles() [][]state {
	list := make([][]state, len(s.assembly.turns))
	for k, t := range s.assembly.turns {
		list[k] = t.states
	}
	return list
}

// shoulders are the states of each rotor and, where there is room between them,
// their sides. Two gauche bonds of opposite sign side by side, as in pentane,
// have minima at one middle and one side; three in a row, as in hexane, at two
// sides at once, which no pair of middles leads to.
func (s *search) shoulders() [][]state {
	list := make([][]state, len(s.assembly.turns))
	for k, t := range s.assembly.turns {
		list[k] = append([]state(nil), t.states...)
		for _, st := range t.states {
			for _, side := range [2]float64{-aside, aside} {
				beside := state{st.angle + side*st.spread, st.spread, st.weight * math.Exp(-aside*aside/2)}
				n := t.nearest(beside.angle)
				if off := math.Remainder(beside.angle-t.states[n].angle, t.turn); math.Abs(off) >= 1.5*t.states[n].spread {
					list[k] = append(list[k], beside)
				}
			}
		}
	}
	return list
}

// aside is how far the sides of a state are from its middle, in its spreads: 95
// degrees for gauche at 65.
const aside = 2
