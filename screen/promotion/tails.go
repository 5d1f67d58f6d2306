package promotion

import (
	"math"
	"math/rand/v2"
)

// Residuals within a ligand are normal, or they have heavy tails: a Student t of
// three degrees of freedom. The residuals of the computed candidates tell which,
// with odds of 7 to 3 for heavy ones before anything is known.
//
// With normal residuals alone the 95th percentile of the missed weight held in
// only 84 to 88 % of ligands whose residuals had heavy tails; with heavy ones
// alone in 97.5 % of others, at the cost of a tenth more evaluations.
const heavyBefore = 0.7

// heavyDeviation is the deviation of a heavy residual in units of the fit's s.
// A few numbers with heavy tails mostly look narrower than they are: it is above 1.
const heavyDeviation = 1.1

// heavyTails returns the probability that the residuals r have heavy tails. Both
// densities are averaged over the size of the residuals, on a grid of factors
// about their root mean square.
func heavyTails(r []float64) float64 {
	var square float64
	for _, v := range r {
		square += v * v / float64(len(r))
	}
	if rms := math.Sqrt(square); rms > 0 && len(r) > 1 {
		normal, heavy := math.Inf(-1), math.Inf(-1)
		for k := -12; k <= 6; k++ {
			size := rms * math.Exp2(float64(k)/4)
			var logNormal, logHeavy float64
			for _, v := range r {
				z := v / size
				logNormal -= z*z/2 + math.Log(size) + math.Log(2*math.Pi)/2
				logHeavy -= 2*math.Log1p(z*z/3) + math.Log(size) + math.Log(math.Pi*math.Sqrt(3)/2)
			}
			normal, heavy = addLogs(normal, logNormal), addLogs(heavy, logHeavy)
		}
		return 1 / (1 + (1-heavyBefore)/heavyBefore*math.Exp(normal-heavy))
	}
	return heavyBefore
}

// addLogs returns ln(e^a + e^b).
func addLogs(a, b float64) float64 {
	top := math.Max(a, b)
	if math.IsInf(top, -1) {
		return top
	}
	return top + math.Log(math.Exp(a-top)+math.Exp(b-top))
}

// heavy draws from a Student t of three degrees of freedom, scaled to the
// deviation heavyDeviation.
func heavy(normal *rand.Rand) float64 {
	var squares float64
	for range 3 {
		z := normal.NormFloat64()
		squares += z * z
	}
	return heavyDeviation * normal.NormFloat64() / math.Sqrt(squares) // t/3^1/2 has the deviation 1
}
