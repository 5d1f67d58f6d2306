package thermo

import (
	"math"
	"testing"

	"torsieve/internal/units"
)

const kT298 = 298.15 * units.Kelvin

// One mode of 50 cm^-1 at 298.15 K worked by hand in SI units from the equations
// of Grimme 2012:
//
//	nu = 1.498962e12 /s, h nu/kT = 0.241285
//	S_V = R(0.241285/0.272884 + 1.539991) = 20.156 J/(mol K)        (eq. 3)
//	mu = h/(8 pi^2 nu) = 5.5985e-48 kg m^2                          (eq. 4)
//	mu' = mu B/(mu + B) = 5.5954e-48 kg m^2, B = 1e-44              (eq. 5)
//	8 pi^3 mu' kT/h^2 = 13.0132, S_R = R(1/2 + 1.28299) = 14.824    (eq. 6)
//	w = 1/(1 + 2^4) = 0.0588235, S = 15.138 J/(mol K)               (eqs. 7, 8)
func TestSoftMode(t *testing.T) {
	q := 50 * wavenumber
	near(t, "S_V", oscillator(q, kT298).Entropy/units.JoulePerMol, 20.156, 0.0005)
	near(t, "S_R", freeRotor(q, kT298)/units.JoulePerMol, 14.824, 0.0005)
	near(t, "S", interpolated(q, kT298)/units.JoulePerMol, 15.138, 0.0005)
}

// Half rotation at 100 cm^-1; oscillator above, rotor below; always between the
// two, and falling as the mode stiffens.
func TestInterpolation(t *testing.T) {
	half := interpolated(100*wavenumber, kT298)
	near(t, "at 100 cm^-1 / k", half/units.Kelvin,
		(oscillator(100*wavenumber, kT298).Entropy+freeRotor(100*wavenumber, kT298))/2/units.Kelvin, 1e-12)
	near(t, "at 3000 cm^-1 / k", interpolated(3000*wavenumber, kT298)/units.Kelvin,
		oscillator(3000*wavenumber, kT298).Entropy/units.Kelvin, 1e-6)
	near(t, "at 1 cm^-1 / k", interpolated(wavenumber, kT298)/units.Kelvin, freeRotor(wavenumber, kT298)/units.Kelvin, 1e-6)
	last := math.Inf(1)
	for nu := 1.0; nu < 400; nu += 0.5 {
		v, r, s := oscillator(nu*wavenumber, kT298).Entropy, freeRotor(nu*wavenumber, kT298), interpolated(nu*wavenumber, kT298)
		if s < math.Min(v, r) || s > math.Max(v, r) {
			t.Errorf("%g cm^-1: %g lies outside of %g and %g", nu, s, v, r)
		}
		if s >= last {
			t.Errorf("%g cm^-1: the entropy rises", nu)
		}
		last = s
	}
}

// A mode without frequency turns with the moment B: its entropy has a limit,
// R(1/2 + ln(8 pi^3 B kT/h^2)/2) = 0.5 R (1 + ln(8 pi^3 1e-44 kT/h^2)), where the
// oscillator's has none. 8 pi^3 1e-44 4.11640e-21/4.39048e-67 = 23256.5:
// 45.95 J/(mol K), worked by hand.
func TestFreeRotorLimit(t *testing.T) {
	near(t, "limit", freeRotor(1e-9*wavenumber, kT298)/units.JoulePerMol, 45.95, 0.01)
}

// The oscillator: kT and k(1 + ln kT/h nu) where it is soft, nothing where it is
// stiff, without overflow.
func TestOscillatorLimits(t *testing.T) {
	soft := oscillator(1e-4*kT298, kT298)
	near(t, "soft enthalpy / kT", soft.Enthalpy/kT298, 1, 1e-4)
	near(t, "soft entropy / k", soft.Entropy/units.Kelvin, 1+math.Log(1e4), 1e-8)
	stiff := oscillator(1000*kT298, kT298)
	near(t, "stiff enthalpy", stiff.Enthalpy, 0, 0)
	near(t, "stiff entropy", stiff.Entropy, 0, 0)
}

// The published equation leaves the enthalpy a plain oscillator's.
func TestEnthalpyIsHarmonic(t *testing.T) {
	s := Species{Body: Body{Mass: 1e4}, Symmetry: 1, Quanta: []float64{20 * wavenumber, 70 * wavenumber}}
	f := s.At(298.15, OneBar)
	near(t, "enthalpy", f.Vibration.Enthalpy, f.Harmonic.Enthalpy, 0)
	near(t, "zero point", f.ZeroPoint, 45*wavenumber, 1e-18)
	near(t, "harmonic against interpolated G", f.HarmonicFreeEnergy(),
		f.FreeEnergy()-298.15*(f.Harmonic.Entropy-f.Vibration.Entropy), 1e-16)
}
