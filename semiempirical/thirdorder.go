package semiempirical

// A thirdOrder is the on-site third-order term, 1/3 sum Gamma_i q_i^3
// (J. Chem. Theory Comput. 2019, 15, 1652, eq. 23).
type thirdOrder struct {
	gamma []float64 // of each shell, hartree/e^3
}

var _ contribution = thirdOrder{}

// thirdOrderScale belongs to s, p and d shells.
var thirdOrderScale = [...]float64{1, 0.5, 0.25}

func newThirdOrder(b *basis) thirdOrder {
	var t thirdOrder
	for i, s := range b.shells {
		t.gamma = append(t.gamma, b.elements[b.shellAtom[i]].ThirdOrder*thirdOrderScale[s.L])
	}
	return t
}

func (thirdOrder) name() string { return "third-order electrostatics" }

func (thirdOrder) update(*geometry) {}

func (t thirdOrder) energy(m *moments, v *potential) float64 {
	var sum float64
	for i, q := range m.shell {
		v.shell[i] += t.gamma[i] * q * q
		sum += t.gamma[i] * q * q * q
	}
	return sum / 3
}
