package dispersion

// D4EEQ is the D4 correction with equilibrated charges, which needs nothing
// but the geometry and the total charge.
type D4EEQ struct {
	d4   *D4
	eeq  *EEQ
	q, v []float64
}

// hfFlavour belongs to Hartree-Fock (E. Caldeweyher et al., J. Chem. Phys.
// 2019, 150, 154122).
var hfFlavour = d4Flavour{
	params:  D3Params{S6: 1, S8: 1.61679827, A1: 0.44959224, A2: 3.35743605},
	s9:      1,
	charges: eeqModel, pairCutoff: 60, threeCutoff: 40,
}

// NewD4EEQ prepares for a molecule, with the parameters of Hartree-Fock.
// Panics for Z outside 1..MaxZ.
func NewD4EEQ(numbers []int) *D4EEQ {
	n := len(numbers)
	return &D4EEQ{d4: newD4(numbers, hfFlavour), eeq: NewEEQ(numbers), q: make([]float64, n), v: make([]float64, n)}
}

// Energy returns the dispersion energy at x (3N, bohr) of a molecule of the
// given total charge in hartree and, where grad is not nil, adds its gradient,
// the charges' response included, in hartree/bohr. Errors are those of
// EEQ.Charges.
func (d *D4EEQ) Energy(x []float64, charge float64, grad []float64) (float64, error) {
	if err := d.eeq.Charges(x, charge, d.q); err != nil {
		return 0, err
	}
	d.d4.Update(x)
	clear(d.v)
	energy := d.d4.EnergyPotential(d.q, d.v) + d.d4.ThreeBody()
	if grad != nil {
		d.d4.AddGradient(d.q, grad)
		d.eeq.AddGradient(d.v, grad)
	}
	return energy, nil
}
