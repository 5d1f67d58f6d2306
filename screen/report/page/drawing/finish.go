package drawing

import "slices"

// drawing takes the finished sketch down.
func (s *sketch) drawing() Drawing {
	var d Drawing
	index := make([]int, s.m.NumAtoms())
	for n, i := range s.atoms {
		index[i] = n
		d.Atoms = append(d.Atoms, Atom{Of: i, X: real(s.at[i]), Y: imag(s.at[i]), Label: s.label(i)})
	}
	marks := s.wedges()
	for _, k := range s.drawnBonds() {
		b := s.m.Bond(k)
		a, z := b.A, b.B
		m, ok := marks[k]
		if ok && m.narrow == z {
			a, z = z, a
		}
		bond := Bond{A: index[a], B: index[z], Order: b.Order, Mark: m.mark, Note: s.note(k)}
		if b.Order == 2 {
			bond.Side = s.doubleSide(k, a, z)
		}
		d.Bonds = append(d.Bonds, bond)
	}
	return d
}

// note names the configuration of a double bond that the layout shows wrongly.
func (s *sketch) note(k int) string {
	for _, b := range s.m.StereoBonds() {
		if b.Bond != k || !b.Known || s.drawnCis(b) == b.Cis {
			continue
		}
		if b.Cis {
			return "cis"
		}
		return "trans"
	}
	return ""
}

// doubleSide puts the second line of a double bond into its smallest ring, else
// on the side where the neighbours are, or in the middle.
func (s *sketch) doubleSide(k, a, z int) float64 {
	axis := s.at[z] - s.at[a]
	if size := s.m.SmallestRing(k); size > 0 {
		for _, ring := range s.m.Rings() {
			if len(ring) != size || !slices.Contains(ring, a) || !slices.Contains(ring, z) {
				continue
			}
			var centre complex128
			for _, i := range ring {
				centre += s.at[i] / complex(float64(size), 0)
			}
			return sign(left(axis, centre-s.at[a]))
		}
	}
	if len(s.next[a]) == 1 || len(s.next[z]) == 1 || s.straight(a) || s.straight(z) {
		return 0
	}
	var sum float64
	for _, end := range []int{a, z} {
		for _, n := range s.next[end] {
			if n != a && n != z {
				sum += sign(left(axis, s.at[n]-s.at[end]))
			}
		}
	}
	if sum == 0 {
		return 1
	}
	return sign(sum)
}

func sign(v float64) float64 {
	if v < 0 {
		return -1
	}
	return 1
}
