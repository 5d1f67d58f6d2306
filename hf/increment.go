package hf

import "context"

// An increment adds to the Coulomb and exchange matrices of the last build what
// the change of the density makes: small changes need few integrals. Rounding
// and neglect would pile up, so now and then it begins anew.
type increment struct {
	n        int
	builds   int
	total    []float64
	spins    [][]float64
	j        []float64
	ks       [][]float64
	dTotal   []float64
	dSpins   [][]float64
	dj       []float64
	dks      [][]float64
	anewEach int
}

func newIncrement(n int) *increment { return &increment{n: n, anewEach: 8} }

// reserve makes room for matrices of so many sets of orbitals.
func (inc *increment) reserve(spins int) {
	m := func() []float64 { return make([]float64, inc.n*inc.n) }
	if inc.total == nil {
		inc.total, inc.j, inc.dTotal, inc.dj = m(), m(), m(), m()
	}
	for len(inc.spins) < spins {
		inc.spins, inc.ks = append(inc.spins, m()), append(inc.ks, m())
		inc.dSpins, inc.dks = append(inc.dSpins, m()), append(inc.dks, m())
	}
}

// forget makes the next build a whole one.
func (inc *increment) forget() { inc.builds = 0 }

func (inc *increment) build(ctx context.Context, f *fockBuilder, total []float64, spins [][]float64, j []float64, ks [][]float64) error {
	inc.reserve(len(spins))
	if inc.builds%inc.anewEach == 0 {
		clear(inc.total)
		clear(inc.j)
		for s := range spins {
			clear(inc.spins[s])
			clear(inc.ks[s])
		}
	}
	inc.builds++
	subtract(inc.dTotal, total, inc.total)
	for s := range spins {
		subtract(inc.dSpins[s], spins[s], inc.spins[s])
	}
	if err := f.build(ctx, inc.dTotal, inc.dSpins[:len(spins)], inc.dj, inc.dks[:len(spins)]); err != nil {
		return err
	}
	accumulate(j, inc.j, inc.dj)
	copy(inc.total, total)
	for s := range spins {
		accumulate(ks[s], inc.ks[s], inc.dks[s])
		copy(inc.spins[s], spins[s])
	}
	return nil
}

func subtract(dst, a, b []float64) {
	for i := range dst {
		dst[i] = a[i] - b[i]
	}
}

// accumulate adds change to sum and copies the sum to dst.
func accumulate(dst, sum, change []float64) {
	for i, v := range change {
		sum[i] += v
		dst[i] = sum[i]
	}
}
