package semiempirical

// A moments is the state that becomes self-consistent: the charge of each
// shell, the dipole and the quadrupole of each atom. All are moments of the
// charge, not of the electron density (Mulliken's partition).
type moments struct {
	vec        []float64 // all the following but atom, in this order
	shell      []float64 // e
	dipole     []float64 // 3N, e bohr
	quadrupole []float64 // 6N, e bohr^2: xx, xy, yy, xz, yz, zz of a traceless tensor
	atom       []float64 // e, sums of shell
	shellAtom  []int
}

func newMoments(b *basis) *moments {
	n, shells := b.atoms(), len(b.shells)
	vec := make([]float64, shells+9*n)
	return &moments{
		vec:   vec,
		shell: vec[:shells], dipole: vec[shells : shells+3*n], quadrupole: vec[shells+3*n:],
		atom: make([]float64, n), shellAtom: b.shellAtom,
	}
}

// load takes over a state.
func (m *moments) load(vec []float64) {
	copy(m.vec, vec)
	m.sumShells()
}

func (m *moments) sumShells() {
	clear(m.atom)
	for i, q := range m.shell {
		m.atom[m.shellAtom[i]] += q
	}
}

// A potential is the derivative of the energy with respect to the moments.
type potential struct {
	shell      []float64 // hartree/e
	atom       []float64 // hartree/e, for all shells of the atom
	dipole     []float64 // 3N
	quadrupole []float64 // 6N, of each element of the tensor; xy stands for yx too
}

func newPotential(b *basis) *potential {
	n := b.atoms()
	return &potential{
		shell: make([]float64, len(b.shells)), atom: make([]float64, n),
		dipole: make([]float64, 3*n), quadrupole: make([]float64, 6*n),
	}
}

func (v *potential) clear() {
	clear(v.shell)
	clear(v.atom)
	clear(v.dipole)
	clear(v.quadrupole)
}

// A contribution is one part of the energy that depends on the moments.
//
// update takes in a new geometry. energy returns the energy in hartree at the
// moments m and adds its derivatives to v.
type contribution interface {
	name() string
	update(g *geometry)
	energy(m *moments, v *potential) float64
}
