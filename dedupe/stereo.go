package dedupe

import "torsieve/molecule"

// byStereo sorts renumberings: those that keep every stated element of stereo,
// and those that turn every stated centre over but keep the double bonds. Where
// no centre is stated a renumbering is both; the rest can lie on no shape.
func (s *symmetry) byStereo(maps [][]int) (same, inverse [][]int) {
	for _, p := range maps {
		if !s.keepsDoubleBonds(p) {
			continue
		}
		kept, turned := s.centres(p)
		if kept {
			same = append(same, p)
		}
		if turned {
			inverse = append(inverse, p)
		}
	}
	return same, inverse
}

// centres says whether p keeps all stated centres, and whether it turns all.
func (s *symmetry) centres(p []int) (kept, turned bool) {
	kept, turned = true, true
	for _, c := range s.m.Centres() {
		if c.Parity == 0 || s.index[c.Atom] < 0 {
			continue
		}
		onto := s.atoms[p[s.index[c.Atom]]]
		image, ok := s.centreAt(onto)
		if !ok {
			return false, false
		}
		if s.carried(c, image, p) {
			turned = false
		} else {
			kept = false
		}
	}
	return kept, turned
}

func (s *symmetry) centreAt(atom int) (molecule.Centre, bool) {
	for _, c := range s.m.Centres() {
		if c.Atom == atom && c.Parity != 0 {
			return c, true
		}
	}
	return molecule.Centre{}, false
}

// carried says whether c, moved by p, has the parity that is stated for image.
func (s *symmetry) carried(c, image molecule.Centre, p []int) bool {
	var to [4]int // position in image.Neighbours of the image of each neighbour of c
	var taken [4]bool
	for k, n := range c.Neighbours {
		to[k] = -1
		if n >= 0 && s.index[n] >= 0 {
			want := s.atoms[p[s.index[n]]]
			for at, x := range image.Neighbours {
				if x == want {
					to[k], taken[at] = at, true
				}
			}
		}
	}
	for k := range to { // a lone pair or a hydrogen not compared: what is left
		for at := 0; to[k] < 0 && at < 4; at++ {
			if !taken[at] {
				to[k], taken[at] = at, true
			}
		}
	}
	parity := c.Parity
	for a := range 4 {
		for b := range a {
			if to[b] > to[a] {
				parity = -parity
			}
		}
	}
	return parity == image.Parity
}

func (s *symmetry) keepsDoubleBonds(p []int) bool {
	for _, b := range s.m.StereoBonds() {
		if !b.Known || s.index[b.J] < 0 || s.index[b.K] < 0 {
			continue
		}
		j, k := s.atoms[p[s.index[b.J]]], s.atoms[p[s.index[b.K]]]
		for _, o := range s.m.StereoBonds() {
			if !o.Known || o.J+o.K != j+k || o.J != j && o.J != k {
				continue
			}
			ref := [2]int{o.A, o.B}
			if o.J != j {
				ref = [2]int{o.B, o.A}
			}
			same := (s.goesTo(b.A, ref[0], p)) == (s.goesTo(b.B, ref[1], p))
			if same != (b.Cis == o.Cis) {
				return false
			}
		}
	}
	return true
}

// goesTo says whether p takes atom a to atom x. An atom that is not compared
// goes to one that is not.
func (s *symmetry) goesTo(a, x int, p []int) bool {
	if s.index[a] < 0 {
		return s.index[x] < 0
	}
	return s.atoms[p[s.index[a]]] == x
}
