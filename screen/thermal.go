package screen

import (
	"context"
	"errors"
	"fmt"

	"torsieve/internal/thermo"
	"torsieve/molecule"
)

// ThermalStage is the name in events of the work on vibrations.
const ThermalStage = "thermal"

// ErrNoVibrations comes for a run that asks for thermal terms and ends with the
// force field.
var ErrNoVibrations = errors.New("thermal terms need a tier above the force field that has a gradient")

// thermal gives every conformer that the last tier left the free energy of its
// nuclei. One that turns out to be a saddle of its surface is no conformer: it
// is taken out and told.
func (r *ligandRun) thermal(ctx context.Context) error {
	which := r.alive(len(r.tiers) - 1)
	tier, err := r.relaxingTier()
	if err != nil {
		return err
	}
	r.tellEntered(ThermalStage, len(which))
	outcomes, err := r.compute(ctx, tier, ThermalStage, which, r.vibrations)
	if err != nil {
		return err
	}
	var failed, saddles []error
	for k, i := range which {
		c, o := &r.conformers[i], outcomes[k]
		r.result.Took[tier] += o.took
		err := o.err
		if err == nil {
			err = r.warm(c, o.modes, tier)
		}
		if err == nil {
			continue
		}
		c.Why = ThermalStage + ": " + err.Error()
		told := fmt.Errorf("conformer %d: %w", c.Number, err)
		if errors.As(err, new(*thermo.SaddleError)) {
			saddles = append(saddles, told)
		} else {
			failed = append(failed, told)
		}
	}
	return r.tellThermal(len(which), failed, saddles)
}

func (r *ligandRun) tellThermal(of int, failed, saddles []error) error {
	if len(failed)+len(saddles) == of {
		return fmt.Errorf("none of %d conformers came through: %w", of, append(failed, saddles...)[0])
	}
	if n := len(saddles); n > 0 {
		r.warnf("thermal: %d of %d conformers are no minima and were left out, the first: %v", n, of, saddles[0])
	}
	if n := len(failed); n > 0 {
		r.result.Status = Partial
		r.result.Reason = fmt.Sprintf("thermal: %d of %d conformers could not be computed, the first: %v", n, of, failed[0])
	}
	return nil
}

// relaxingTier is the last tier above the force field whose surfaces have a
// gradient.
func (r *ligandRun) relaxingTier() (int, error) {
	for tier := len(r.tiers) - 1; tier > 0; tier-- {
		s, err := r.tiers[tier].Surface(r.ligand.Mol)
		if err != nil {
			return 0, TierError(r.tiers[tier], err)
		}
		if _, ok := s.(Sloped); ok {
			return tier, nil
		}
	}
	return 0, ErrNoVibrations
}

// vibrations is the task of a Hessian.
func (r *ligandRun) vibrations(ctx context.Context, p *workplace, c *Conformer) outcome {
	var last molecule.Point
	p.surface.Reset()
	h, err := thermo.Differences(ctx, slope(p.surface.(Sloped), &last), c.X, 0)
	out := outcome{x: c.X, energy: h.Energy, gradients: h.Gradients, err: err}
	if err != nil {
		return out
	}
	modes, err := thermo.NormalModes(h.Matrix, c.X, thermo.Masses(r.ligand.Mol.Numbers(), isotopes(r.ligand.Mol)))
	if err != nil {
		out.err = err
		return out
	}
	out.modes = &thermo.Modes{Body: modes.Body, Quanta: modes.Quanta} // the vectors are large and not needed
	return out
}

// warm gives a conformer its thermal terms at every temperature. Rotational
// symmetry is counted by the conformer's Copies and not again.
func (r *ligandRun) warm(c *Conformer, modes *thermo.Modes, tier int) error {
	quanta, turned, err := modes.Real()
	if err != nil {
		return err
	}
	if turned > 0 {
		c.Doubts = append(c.Doubts, fmt.Sprintf("thermal: %d soft vibrations came out imaginary and were taken as real", turned))
	}
	state := thermo.OneBar
	if _, ok := inSolvent(r.tiers[tier]); ok {
		state = thermo.OneMolar
	}
	species := thermo.Species{Body: modes.Body, Symmetry: 1, Quanta: quanta}
	for _, t := range r.options.Temperatures {
		c.Thermal = append(c.Thermal, species.At(t, state).FreeEnergy())
	}
	return nil
}

func isotopes(m *molecule.Molecule) []int {
	list := make([]int, m.NumAtoms())
	for i, a := range m.Atoms() {
		list[i] = a.Isotope
	}
	return list
}
