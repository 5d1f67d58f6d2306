package hf

// atoms returns the sum of the atoms' densities, n by n: blocks on the diagonal.
func (s *Surface) atoms() ([]float64, error) {
	n := s.fock.n
	p := make([]float64, n*n)
	at := 0
	for _, z := range s.numbers {
		block, err := atomDensity(s.set, z)
		if err != nil {
			return nil, err
		}
		m := s.set.Functions(z)
		for i := range m {
			copy(p[(at+i)*n+at:][:m], block[i*m:])
		}
		at += m
	}
	return p, nil
}

// guess takes half of a density of both spins as the first density of each.
func (f *field) guess(p []float64) {
	for _, d := range f.densities {
		for i, v := range p {
			d[i] = v / 2
		}
	}
}
