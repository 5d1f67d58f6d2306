package main

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/optimize"

	"torsieve/internal/units"
	"torsieve/screen/calibration"
)

// minusLog returns -ln of the probability of residuals r (centred, n of them)
// whose variance is that of the law: a multivariate Student t in n-1 dimensions
// of scale s, up to a constant. Where the slope on e (centred) differs between
// molecules by spread s, the scale matrix is s^2 (1 + spread^2 e e^T).
//
// Source: Gelman et al., Bayesian Data Analysis (3rd ed. 2013), appendix A.
func minusLog(r, e []float64, s, spread, freedom float64) float64 {
	n := float64(len(r) - 1)
	var squares, product, length float64
	for i := range r {
		squares += r[i] * r[i]
		if spread > 0 {
			product += r[i] * e[i]
			length += e[i] * e[i]
		}
	}
	v := spread * spread
	squares -= v * product * product / (1 + v*length)
	a, _ := math.Lgamma((freedom + n) / 2)
	b, _ := math.Lgamma(freedom / 2)
	return b - a + n/2*math.Log(freedom*s*s) + math.Log1p(v*length)/2 + (freedom+n)/2*math.Log1p(squares/(freedom*s*s))
}

// A lawFit finds a law for residuals, and where asked a slope and its spread.
type lawFit struct {
	set          []molecule
	residual     func(m molecule, slope float64) []float64
	disagreement bool // whether the law may ask how far the first two methods disagree
	slope        bool // whether a slope on the first method is fitted
}

// The places of what is fitted, in the minimiser's vector.
const (
	logScale = iota
	heavyPower
	rotorPower
	logFreedom
	fixed // so many without the ones that may be left out
)

func (f lawFit) minimum(start calibration.Law) (law calibration.Law, slope, spread float64, err error) {
	x := []float64{math.Log(start.Scale), start.Heavy, start.Rotors, math.Log(start.Freedom)}
	if f.disagreement {
		x = append(x, start.Disagreement)
	}
	if f.slope {
		x = append(x, 0.5, math.Log(0.5))
	}
	problem := optimize.Problem{Func: func(x []float64) float64 {
		law, slope, spread := f.unpack(x)
		return f.value(law, slope, spread)
	}}
	for range 4 { // a simplex that shrank too early is begun again
		res, err := optimize.Minimize(problem, x, &optimize.Settings{
			Converger: &optimize.FunctionConverge{Absolute: 1e-7, Iterations: 300},
		}, &optimize.NelderMead{})
		if err != nil {
			return law, 0, 0, fmt.Errorf("law of the residuals: %w", err)
		}
		x = res.X
	}
	law, slope, spread = f.unpack(x)
	return law, slope, spread, nil
}

func (f lawFit) unpack(x []float64) (law calibration.Law, slope, spread float64) {
	law = calibration.Law{Scale: math.Exp(x[logScale]), Heavy: x[heavyPower], Rotors: x[rotorPower], Freedom: math.Exp(x[logFreedom])}
	rest := x[fixed:]
	if f.disagreement {
		law.Disagreement, rest = rest[0], rest[1:]
	}
	if f.slope {
		slope, spread = rest[0], math.Exp(rest[1])
	}
	return law, slope, spread
}

// The exponents of size are known poorly from sets whose molecules are of like
// size, and the law is used on larger ones. Their prior is what the whole of
// fh2020 (684 molecules, of which the 150 here are a part) gave for six pairs of
// methods: heavy 0.38 to 0.73, rotors 1.16 to 1.78. A disagreement grows with
// size by itself, and takes its part.
const (
	usualHeavy    = 0.4
	usualRotors   = 1.5
	usualDistance = 0.3 // deviation of either
)

func (f lawFit) value(law calibration.Law, slope, spread float64) float64 {
	rest := 1 - law.Disagreement
	sum := (math.Pow(law.Heavy-rest*usualHeavy, 2) + math.Pow(law.Rotors-rest*usualRotors, 2)) / (2 * usualDistance * usualDistance)
	// The spread of slopes is known to within a factor of some ten only.
	if f.slope {
		sum += math.Pow(math.Log(spread/0.5), 2) / 8
	}
	for _, m := range f.set {
		var e []float64
		if spread > 0 {
			e = m.methods[0]
		}
		sum += minusLog(f.residual(m, slope), e, size(law, m), spread, law.Freedom)
	}
	return sum
}

func size(law calibration.Law, m molecule) float64 {
	return law.Size(m.heavy, m.rotors, disagreement(m))
}

// disagreement of the first two methods, in hartree as package calibration has it.
func disagreement(m molecule) float64 {
	if len(m.methods) < 2 {
		return 0
	}
	return calibration.Disagreement(m.methods[0], m.methods[1]) * units.KcalPerMol
}

// minus returns reference - sum of coefficient times method.
func minus(m molecule, coefficients []float64) []float64 {
	r := make([]float64, len(m.reference))
	copy(r, m.reference)
	for k, c := range coefficients {
		for i, v := range m.methods[k] {
			r[i] -= c * v
		}
	}
	return r
}
