package hf

// A mixture holds densities and their Coulomb and exchange matrices of the step
// before, of which a share stays in the next one. Both matrices are linear in the
// density, so mixing them is as good as building them of a mixed density, which
// would be no determinant's.
type mixture struct {
	share     float64
	coulomb   []float64
	densities [][]float64
	projector [][]float64
	exchange  [][]float64
}

// keep remembers the step that was, for the next one to be damped.
func (f *field) keep() {
	f.old = &mixture{share: f.damping, coulomb: clone(f.coulomb)}
	for s := range f.occupied {
		f.old.densities = append(f.old.densities, clone(f.densities.spins[s]))
		f.old.projector = append(f.old.projector, clone(f.projector[s]))
		f.old.exchange = append(f.old.exchange, clone(f.exchange[s]))
	}
}

// mix leaves a share of the old step in the new one, if that is to be.
func (f *field) mix() {
	m := f.old
	if m == nil {
		return
	}
	f.old = nil
	blend(f.coulomb, m.coulomb, m.share)
	for s := range f.occupied {
		blend(f.densities.spins[s], m.densities[s], m.share)
		blend(f.projector[s], m.projector[s], m.share)
		blend(f.exchange[s], m.exchange[s], m.share)
	}
	f.densities.sum()
}

func clone(x []float64) []float64 { return append([]float64(nil), x...) }

func blend(x, old []float64, share float64) {
	for i, v := range old {
		x[i] += share * (v - x[i])
	}
}
