package hf

// atoms returns the sum of the atoms' densities, both spins together: blocks on
// the diagonal.
func (s *Surface) atoms() (*start, error) {
	n := s.offsets[len(s.shells)]
	g := &start{p: make([]float64, n*n)}
	at := 0
	for _, z := range s.numbers {
		atom, err := atomDensity(s.set, z)
		if err != nil {
			return nil, err
		}
		m := s.set.Functions(z)
		for i := range m {
			copy(g.p[(at+i)*n+at:][:m], atom.p[i*m:])
		}
		for k := range atom.rows {
			row := make([]float64, n)
			copy(row[at:], atom.c[k*m:(k+1)*m])
			g.c = append(g.c, row...)
		}
		g.rows += atom.rows
		at += m
	}
	return g, nil
}

// A start is a first density of both spins, and a factor of it.
type start struct {
	p []float64
	factor
}

// guess takes half of a density of both spins as the first density of each.
func (f *field) guess(g *start) {
	const half = 0.70710678118654752440 // the factor's root of one half
	for s, d := range f.densities.spins {
		for i, v := range g.p {
			d[i] = v / 2
		}
		c := make([]float64, len(g.c))
		for i, v := range g.c {
			c[i] = half * v
		}
		f.densities.factors[s] = factor{g.rows, c}
	}
}
