package forcefield

// pairs are all atoms three or more bonds apart. polar, the share of x that a
// hydrogen on nitrogen, oxygen or sulfur keeps towards atoms more than three
// bonds away, is 1 in the paper; nearer, barriers of rotors depend on it.
func (s *skeleton) pairs(apart []int8, polar float64) *nonbonded {
	n := len(s.types)
	out := &nonbonded{pairs: make([]pair, 0, n*n/2)}
	for i := range n {
		for j := i + 1; j < n; j++ {
			if apart[i*n+j] < 3 {
				continue
			}
			x2, d := wellOf(s.types[i], s.types[j])
			if apart[i*n+j] > 3 {
				for _, atom := range [2]int{i, j} {
					if s.polarHydrogen(atom) {
						x2 *= polar
					}
				}
			}
			out.add(i, pair{j: int32(j), x2: x2, d: d})
		}
	}
	return out
}

func (s *skeleton) polarHydrogen(i int) bool {
	if s.types[i].Number != 1 || len(s.arms[i]) != 1 {
		return false
	}
	switch s.types[s.arms[i][0].atom].Number {
	case 7, 8, 16:
		return true
	}
	return false
}
