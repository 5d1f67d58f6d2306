package ensemble

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"

	"gonum.org/v1/gonum/stat/distuv"

	"torsieve/internal/units"
)

// A Scatter says how far a tier's conformer energies lie from the truth within
// one molecule: normally distributed, with a standard deviation that differs
// between molecules as a scaled inverse chi-square. The difference of one
// energy from the truth is then Student t with Freedom degrees of freedom.
type Scatter struct {
	Scale   float64 // hartree, greater than 0
	Freedom float64 // degrees of freedom, greater than 0; small: molecules differ much
}

// A Bar holds the 5th and the 95th percentile of a population.
type Bar struct{ Low, High float64 }

// draws is the number of worlds that Bars looks at: a percentile of 5 is then
// known to about a third of a per cent (binomial standard error).
const draws = 4000

// Bars carries the scatter of the energies into the populations. In each of
// many draws every state gets an error of its own, the populations follow, and
// the bars hold what nine of ten draws agree on. The errors of two states are
// taken as independent, which makes the bars of near-identical shapes too wide,
// and states that are not in the list are not thought of.
//
// The result depends on the arguments alone: stream names the sequence of random
// numbers. Panics like Weigh, and for a scatter that is not greater than 0.
//
// Source of the t distribution within molecules: Gelman et al., Bayesian Data
// Analysis (3rd ed. 2013), section 3.2.
func Bars(states []State, temperature float64, s Scatter, stream [2]uint64) []Bar {
	check(states, temperature)
	if !(s.Scale > 0 && s.Freedom > 0) {
		panic(fmt.Sprintf("ensemble: scatter %+v", s))
	}
	source := rand.NewPCG(stream[0], stream[1])
	spread := distuv.ChiSquared{K: s.Freedom, Src: source}
	normal := rand.New(source)
	kT := temperature * units.Kelvin
	zero := lowest(states)
	seen := make([][]float64, len(states)) // populations by state, then by draw
	for i := range seen {
		seen[i] = make([]float64, draws)
	}
	logs := make([]float64, len(states))
	for d := range draws {
		width := s.Scale * math.Sqrt(s.Freedom/spread.Rand())
		for i, st := range states {
			energy := st.Energy - zero + width*normal.NormFloat64()
			logs[i] = math.Log(st.Copies) - energy/kT
		}
		logZ := logSumExp(logs)
		for i := range states {
			seen[i][d] = math.Exp(logs[i] - logZ)
		}
	}
	bars := make([]Bar, len(states))
	for i, p := range seen {
		slices.Sort(p)
		bars[i] = Bar{Low: p[draws*5/100], High: p[draws*95/100]}
	}
	return bars
}
