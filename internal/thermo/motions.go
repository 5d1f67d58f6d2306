package thermo

import (
	"math"

	"torsieve/internal/units"
)

// translation is the Sackur-Tetrode equation for a particle of the given mass in
// a volume of its own. Source: McQuarrie, Statistical Mechanics (1976), eq. 5-20;
// the thermal wavelength squared is 2 pi/(m kT) in atomic units.
func translation(mass, kT, volume float64) Part {
	q := math.Pow(mass*kT/(2*math.Pi), 1.5) * volume
	return Part{Enthalpy: 2.5 * kT, Entropy: units.Kelvin * (2.5 + math.Log(q))}
}

// rotation is the classical rigid rotor. Source: McQuarrie (1976), eqs. 6-29 and
// 8-27; 8 pi^2 I kT/h^2 is 2 I kT in atomic units.
func rotation(b Body, symmetry int, kT float64) Part {
	i, sigma := b.Moments, float64(symmetry)
	switch b.Axes {
	case 3:
		q := math.Sqrt(math.Pi*2*i[0]*kT*2*i[1]*kT*2*i[2]*kT) / sigma
		return Part{Enthalpy: 1.5 * kT, Entropy: units.Kelvin * (1.5 + math.Log(q))}
	case 2:
		q := 2 * i[2] * kT / sigma
		return Part{Enthalpy: kT, Entropy: units.Kelvin * (1 + math.Log(q))}
	}
	return Part{}
}

// oscillator is a harmonic vibration above its zero point. Source: Grimme 2012,
// eq. 3; McQuarrie (1976), eqs. 5-44 to 5-47.
func oscillator(quantum, kT float64) Part {
	x := quantum / kT
	enthalpy := quantum / math.Expm1(x)
	return Part{Enthalpy: enthalpy, Entropy: units.Kelvin * (enthalpy/kT - math.Log(-math.Expm1(-x)))}
}

// Constants of Grimme 2012: the quantum at which a mode is half a rotation
// (text below eq. 8), and the moment of inertia that bounds that of the rotation
// (eq. 5). The power of eq. 8 is 4.
const (
	halfRotation  = 100 * units.Wavenumber
	averageMoment = 1e-44 * units.KilogramMetre2
)

// freeRotor is the entropy of a rotation about one axis that would have the
// quantum of a vibration: Grimme 2012, eqs. 4 to 6. In atomic units the moment
// of eq. 4, h/(8 pi^2 nu), is 1/(2 quantum), and 8 pi^3 mu kT/h^2 is 2 pi mu kT.
func freeRotor(quantum, kT float64) float64 {
	mu := 1 / (2 * quantum)
	mu = mu * averageMoment / (mu + averageMoment)
	return units.Kelvin * 0.5 * (1 + math.Log(2*math.Pi*mu*kT))
}

// interpolated is the entropy of a mode between vibration and rotation: Grimme
// 2012, eqs. 7 and 8.
func interpolated(quantum, kT float64) float64 {
	ratio := halfRotation / quantum
	w := 1 / (1 + ratio*ratio*ratio*ratio)
	return w*oscillator(quantum, kT).Entropy + (1-w)*freeRotor(quantum, kT)
}
