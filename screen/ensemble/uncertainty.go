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

// A Bar holds the 5th and the 95th percentile of a quantity.
type Bar struct{ Low, High float64 }

// A Range is a mean with its bar.
type Range struct {
	Mean float64
	Bar
}

// draws is the number of worlds that are looked at: a percentile of 5 is then
// known to about a third of a per cent (binomial standard error).
const draws = 4000

// A Doubt is all that is not certain about the energies of an ensemble.
type Doubt struct {
	Scatter Scatter

	// Distances are the RMSD of the states in bohr, in their order: similar
	// shapes share their error (correlation.go). Nil: all errors are independent,
	// which makes the bars of near-identical shapes too wide.
	Distances [][]float64
}

// Bars carries the scatter of the energies into the populations: the bars that
// hold what nine of ten worlds agree on, with independent errors and no thought
// of states that are not in the list. See Imagine for more.
//
// Panics like Weigh, and for a scatter that is not greater than 0.
func Bars(states []State, temperature float64, s Scatter, stream [2]uint64) []Bar {
	check(states, temperature)
	populations := Imagine(states, Doubt{Scatter: s}, stream).At(temperature, nil).Populations()
	bars := make([]Bar, len(states))
	for i, p := range populations {
		bars[i] = p.Bar
	}
	return bars
}

// Worlds are draws of what the energies of an ensemble may truly be. They do not
// depend on the temperature.
type Worlds struct {
	states []State
	copies []float64 // log of the states' copies
	zero   float64   // hartree: the lowest energy as computed
	errors []float32 // hartree, by draw, then by state
	stream [2]uint64
}

// Imagine draws the worlds of an ensemble: in each, the molecule has a residual
// of its own size, and each state an error of that size. The result depends on
// the arguments alone: stream names the sequence of random numbers.
//
// Panics for states like Weigh, for a scatter that is not greater than 0, and
// for distances that do not fit the states.
//
// Source of the t distribution within molecules: Gelman et al., Bayesian Data
// Analysis (3rd ed. 2013), section 3.2.
func Imagine(states []State, doubt Doubt, stream [2]uint64) *Worlds {
	check(states, 1)
	if !(doubt.Scatter.Scale > 0 && doubt.Scatter.Freedom > 0) {
		panic(fmt.Sprintf("ensemble: scatter %+v", doubt.Scatter))
	}
	source := rand.NewPCG(stream[0], stream[1])
	spread := distuv.ChiSquared{K: doubt.Scatter.Freedom, Src: source}
	normal := rand.New(source)
	share := newSharing(states, doubt.Distances)
	w := &Worlds{states: states, zero: lowest(states), errors: make([]float32, draws*len(states)), stream: stream}
	for _, s := range states {
		w.copies = append(w.copies, math.Log(s.Copies))
	}
	z := make([]float64, len(states))
	for d := range draws {
		width := doubt.Scatter.Scale * math.Sqrt(doubt.Scatter.Freedom/spread.Rand())
		for i := range z {
			z[i] = normal.NormFloat64()
		}
		share.mix(z)
		row := w.row(d)
		for i, v := range z {
			row[i] = float32(width * v)
		}
	}
	return w
}

func (w *Worlds) row(d int) []float32 { return w.errors[d*len(w.states) : (d+1)*len(w.states)] }

// energy of a state in a world, in hartree above the lowest as computed.
func (w *Worlds) energy(d, i int) float64 { return w.states[i].Energy - w.zero + float64(w.row(d)[i]) }

// Lowest returns, for each state, the share of worlds in which none of the
// others lies lower: the chance that it is the global minimum, if the global
// minimum is in the list.
func (w *Worlds) Lowest() []float64 {
	chance := make([]float64, len(w.states))
	for d := range draws {
		best := 0
		for i := range w.states {
			if w.energy(d, i) < w.energy(d, best) {
				best = i
			}
		}
		chance[best]++
	}
	for i := range chance {
		chance[i] /= draws
	}
	return chance
}

// An Outlook is what the worlds say at one temperature.
type Outlook struct {
	worlds *Worlds
	kT     float64
	logZ   []float64 // by draw
	known  []float64 // by draw: the share of the states in the list
}

// At weighs the worlds at a temperature. The draws in missed are equally likely
// shares of the Boltzmann weight that states outside the list hold, from 0 to 1;
// nil: none. They stand as one state without a name.
//
// Panics for a temperature that is not greater than 0 and for shares outside 0
// to 1.
func (w *Worlds) At(temperature float64, missed []float64) *Outlook {
	check(w.states, temperature)
	o := &Outlook{worlds: w, kT: temperature * units.Kelvin, logZ: make([]float64, draws), known: make([]float64, draws)}
	source := rand.New(rand.NewPCG(w.stream[1], w.stream[0]))
	logs := make([]float64, len(w.states))
	for d := range draws {
		for i := range logs {
			logs[i] = o.log(d, i)
		}
		o.logZ[d] = logSumExp(logs)
		o.known[d] = 1
		if len(missed) > 0 {
			m := missed[source.IntN(len(missed))]
			if !(m >= 0 && m <= 1) {
				panic(fmt.Sprintf("ensemble: missed share %g", m))
			}
			o.known[d] = 1 - m
		}
	}
	return o
}

func (o *Outlook) log(d, i int) float64 {
	return o.worlds.copies[i] - o.worlds.energy(d, i)/o.kT
}

// population of a state among those in the list.
func (o *Outlook) population(d, i int) float64 { return math.Exp(o.log(d, i) - o.logZ[d]) }

// over sums up a quantity of each draw.
func over(quantity func(d int) float64) Range {
	x := make([]float64, draws)
	var sum float64
	for d := range x {
		x[d] = quantity(d)
		sum += x[d]
	}
	slices.Sort(x)
	return Range{Mean: sum / draws, Bar: Bar{Low: x[draws*5/100], High: x[draws*95/100]}}
}

// Populations returns the population of each state.
func (o *Outlook) Populations() []Range {
	out := make([]Range, len(o.worlds.states))
	for i := range out {
		out[i] = over(func(d int) float64 { return o.known[d] * o.population(d, i) })
	}
	return out
}

// Missed returns the population of the state without a name.
func (o *Outlook) Missed() Range { return over(func(d int) float64 { return 1 - o.known[d] }) }

// Joint returns the population of several states together.
func (o *Outlook) Joint(members []int) Range {
	return over(func(d int) float64 {
		var sum float64
		for _, i := range members {
			sum += o.population(d, i)
		}
		return o.known[d] * sum
	})
}

// Average returns the ensemble average of a property, one value per state, over
// the states in the list. Panics if there are more or fewer values than states.
func (o *Outlook) Average(values []float64) Range {
	if len(values) != len(o.worlds.states) {
		panic("ensemble: as many values as states are wanted")
	}
	return over(func(d int) float64 {
		var sum float64
		for i, v := range values {
			sum += v * o.population(d, i)
		}
		return sum
	})
}

// Energy returns the average energy of the states in the list, in hartree above
// the lowest as computed.
func (o *Outlook) Energy() Range {
	return over(func(d int) float64 {
		var sum float64
		for i := range o.worlds.states {
			sum += o.population(d, i) * o.worlds.energy(d, i)
		}
		return sum
	})
}

// Entropy returns the conformational entropy of the states in the list, in
// hartree/kelvin, as Weigh defines it. What is missed would add to it.
func (o *Outlook) Entropy() Range {
	return over(func(d int) float64 {
		var sum float64
		for i := range o.worlds.states {
			if p := o.population(d, i); p > 0 {
				sum -= p * (o.log(d, i) - o.logZ[d] - o.worlds.copies[i])
			}
		}
		return units.Kelvin * sum
	})
}
