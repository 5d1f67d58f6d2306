package molecule

import "fmt"

// findGroups couples the bridgeheads that small cages tie together.
func (s *stereoSearch) findGroups() {
	s.group, s.relative = make([]int, len(s.centres)), make([]Parity, len(s.centres))
	index := map[int]int{}
	for n, c := range s.centres {
		s.group[n], s.relative[n] = n, 1
		index[c.Atom] = n
	}
	for n, c := range s.centres {
		if s.g.ringDegree(c.Atom) < 3 {
			continue
		}
		for _, j := range s.g.nearbyBridgeheads(c.Atom) {
			m, ok := index[j]
			if !ok || m <= n {
				continue
			}
			if t, ok := s.g.tieBetween(c.Atom, j); ok {
				s.couple(n, m, t.relation(c.Neighbours, s.centres[m].Neighbours))
			}
		}
	}
	s.checkTies()
}

// couple joins the groups of two centres whose parities have a given product.
func (s *stereoSearch) couple(n, m int, product Parity) {
	if product == 0 || s.group[n] == s.group[m] {
		return
	}
	turn := s.relative[n] * s.relative[m] * product
	old, now := max(s.group[n], s.group[m]), min(s.group[n], s.group[m])
	for i, g := range s.group {
		if g == old {
			s.group[i] = now
			s.relative[i] *= turn
		}
	}
}

// checkTies warns of stated configurations that a cage cannot have.
func (s *stereoSearch) checkTies() {
	for n, c := range s.centres {
		for m, d := range s.centres[:n] {
			if s.group[n] == s.group[m] && c.Parity*d.Parity == -s.relative[n]*s.relative[m] {
				s.warnings = append(s.warnings, fmt.Sprintf("the stated configurations of %s and %s do not fit into one small cage",
					s.g.centreText(d), s.g.centreText(c)))
			}
		}
	}
}
