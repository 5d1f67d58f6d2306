package forcefield

import (
	"fmt"
	"math"

	"torsieve/internal/dispersion"
)

// FreezeCharges computes charges at x (3N, bohr), makes symmetry-equivalent
// atoms' charges equal, and keeps them from now on: a surface has one energy
// for each geometry, with an exact gradient. Without Options.Charges "eeq" it
// does nothing.
//
// Source: electronegativity equilibration, E. Caldeweyher et al., J. Chem.
// Phys. 2019, 150, 154122.
func (s *Surface) FreezeCharges(x []float64) error {
	o, m := s.tables.options, s.tables.m
	s.check(x)
	if o.Charges != "eeq" || m.NumAtoms() == 0 {
		return nil
	}
	q := make([]float64, m.NumAtoms())
	if err := dispersion.NewEEQ(s.tables.numbers).Charges(x, float64(m.Charge()), q); err != nil {
		return fmt.Errorf("force field: charges: %w", err)
	}
	return s.SetCharges(average(q, m.Classes()))
}

// SetCharges freezes given charges, one an atom, in elementary charges; nil
// takes the electrostatic term away.
func (s *Surface) SetCharges(q []float64) error {
	if q != nil && len(q) != s.tables.m.NumAtoms() {
		panic("forcefield: charges of the wrong length")
	}
	for i, v := range q {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("force field: charge of atom %d is not finite", i+1)
		}
	}
	s.charges = append([]float64(nil), q...)
	switch {
	case s.soft: // has no charges
	case q == nil:
		s.nonbonded = s.tables.uncharged
	default:
		s.nonbonded = s.tables.withCharges(q)
	}
	return nil
}

// average replaces each value by the mean over the atoms of its class.
func average(q []float64, classes []int) []float64 {
	sum, count := make([]float64, len(q)), make([]float64, len(q))
	for i, c := range classes {
		sum[c] += q[i]
		count[c]++
	}
	out := make([]float64, len(q))
	for i, c := range classes {
		out[i] = sum[c] / count[c]
	}
	return out
}
