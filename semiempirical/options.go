package semiempirical

import (
	"errors"
	"fmt"
)

// Options are the settings of a Surface. A field that is zero takes its
// default.
type Options struct {
	// Accuracy scales the limits of self-consistency: the energy must change
	// by less than 1e-6 hartree times it between two cycles, and the root mean
	// square of what the moments change by must be below 2e-5 times it.
	// Default 1; 0.1 is for relaxations.
	Accuracy float64

	Temperature float64 // of the electrons, kelvin; 300
	MaxCycles   int     // 250 in each attempt; heat.go has more limits

	// Solvent is what surrounds the molecule, by any name that solvent.Find
	// knows; empty or "none" is the gas phase.
	Solvent string
}

func (o Options) withDefaults() Options {
	if o.Accuracy == 0 {
		o.Accuracy = 1
	}
	if o.Temperature == 0 {
		o.Temperature = 300
	}
	if o.MaxCycles == 0 {
		o.MaxCycles = 250
	}
	return o
}

func (o Options) check() error {
	var errs []error
	if !(o.Accuracy > 0) {
		errs = append(errs, fmt.Errorf("semiempirical: accuracy: want more than 0, have %g", o.Accuracy))
	}
	if !(o.Temperature > 0) {
		errs = append(errs, fmt.Errorf("semiempirical: electronic temperature: want more than 0 K, have %g", o.Temperature))
	}
	if o.MaxCycles < 1 {
		errs = append(errs, fmt.Errorf("semiempirical: cycles: want at least 1, have %d", o.MaxCycles))
	}
	return errors.Join(errs...)
}
