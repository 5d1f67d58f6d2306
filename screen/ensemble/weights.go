// Package ensemble turns energies of conformers into an ensemble: Boltzmann
// weights with degeneracy, averages, and bars that say how far the error of the
// energies reaches into the weights.
//
// Energies are hartree, temperatures kelvin. The package knows no files and no
// tiers.
package ensemble

import (
	"fmt"
	"math"

	"torsieve/internal/units"
)

// A State is one conformer as the partition function sees it.
type State struct {
	Energy float64 // hartree: all that counts, but for the degeneracy
	Copies float64 // statistical weight, greater than 0 (degeneracy.go)
}

// A Distribution is an ensemble at one temperature.
type Distribution struct {
	Temperature float64   // kelvin
	Populations []float64 // one per state, in the states' order; they sum to 1
	FreeEnergy  float64   // -kT ln Z, hartree
	Energy      float64   // mean of the states' energies, hartree
	Entropy     float64   // conformational entropy, hartree/kelvin
}

// Weigh returns the Boltzmann distribution over the states,
//
//	p_i = c_i exp(-E_i/kT) / Z,   S = -k sum p_i ln(p_i/c_i),
//
// with energies relative to the lowest and the sum relative to its largest term,
// so that no exponential overflows and no digits are lost. The sums run in the states' order.
//
// Panics without states, and for energies that are not finite, copies that are
// not greater than 0 and temperatures that are not greater than 0: the caller
// has checked them.
func Weigh(states []State, temperature float64) Distribution {
	check(states, temperature)
	kT := temperature * units.Kelvin
	zero := lowest(states) // total energies over kT would lose their digits
	logs := make([]float64, len(states))
	for i, s := range states {
		logs[i] = math.Log(s.Copies) - (s.Energy-zero)/kT
	}
	logZ := logSumExp(logs)
	d := Distribution{
		Temperature: temperature,
		Populations: make([]float64, len(states)),
		FreeEnergy:  zero - kT*logZ,
	}
	var above float64
	for i, s := range states {
		p := math.Exp(logs[i] - logZ)
		d.Populations[i] = p
		above += p * (s.Energy - zero)
		if p > 0 {
			d.Entropy -= units.Kelvin * p * (logs[i] - logZ - math.Log(s.Copies))
		}
	}
	d.Energy = zero + above
	return d
}

// logSumExp returns ln sum exp(x_i) without overflow: the largest term is taken
// out of the sum.
func logSumExp(x []float64) float64 {
	largest := math.Inf(-1)
	for _, v := range x {
		largest = math.Max(largest, v)
	}
	var sum float64
	for _, v := range x {
		sum += math.Exp(v - largest)
	}
	return largest + math.Log(sum)
}

func lowest(states []State) float64 {
	low := math.Inf(1)
	for _, s := range states {
		low = math.Min(low, s.Energy)
	}
	return low
}

func check(states []State, temperature float64) {
	if len(states) == 0 {
		panic("ensemble: no states")
	}
	if !(temperature > 0) || math.IsInf(temperature, 0) {
		panic(fmt.Sprintf("ensemble: temperature %g K", temperature))
	}
	for _, s := range states {
		if math.IsNaN(s.Energy) || math.IsInf(s.Energy, 0) || !(s.Copies > 0) || math.IsInf(s.Copies, 0) {
			panic(fmt.Sprintf("ensemble: state with energy %g and copies %g", s.Energy, s.Copies))
		}
	}
}
