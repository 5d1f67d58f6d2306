package hf

import (
	"fmt"
	"math"

	"torsieve/hf/basis"
	"torsieve/internal/element"
	"torsieve/internal/gauss"
)

func noDispersion(z int) error {
	return fmt.Errorf("there are no dispersion coefficients for %s", element.Symbol(z))
}

// matrixBytes is what everything but repulsion integrals takes: some thirty n
// by n matrices, and states and residuals that DIIS remembers.
func matrixBytes(n, spins int) int64 {
	return 8 * int64(n) * int64(n) * int64(30+(2*diisKeep+6)*spins)
}

// MemoryEstimate returns the bytes that a surface for these elements is expected
// to hold at its largest; never more than o.MemoryBytes (0: 2 GiB), unless the
// least that it can do with takes more, which New refuses.
//
// Integrals are estimated for a molecule of the usual shape: of the pairs, and
// the more so of the quartets of functions, a share is left out because charge
// clouds far apart are small, the more the larger the molecule.
func MemoryEstimate(numbers []int, o Options) (int64, error) {
	o, set, err := o.settle()
	if err != nil {
		return 0, err
	}
	shells, err := set.Shells(numbers)
	if err != nil {
		return 0, &Unsupported{Reason: "Hartree-Fock: " + err.Error(), Err: err}
	}
	n := gauss.Offsets(shells)[len(shells)]
	least := matrixBytes(n, 2)
	var most float64
	if o.TwoElectron == twoElectronFitted {
		auxiliary, err := fieldFitting(numbers)
		if err != nil {
			return 0, err
		}
		aux := gauss.Offsets(auxiliary)[len(auxiliary)]
		rows := float64(n*(n+1)/2) * min(1, math.Pow(24/float64(len(numbers)), 0.6))
		pairs := gauss.PairBytes(shells)
		most = float64(least + pairs + storedBytes(n, aux, int(rows)))
		least += pairs + directBytes(n, aux, 1)
	} else {
		survive := min(1, math.Pow(28/float64(len(numbers)), 1.4))
		most = float64(least) + math.Pow(float64(n), 4)*survive
	}
	if most, least, err = withCorrelation(numbers, o, set, n, most, least); err != nil {
		return 0, err
	}
	return max(least, int64(min(float64(o.MemoryBytes), most))), nil
}

// withCorrelation raises estimates by what comes after the field, when its
// integrals are given up.
func withCorrelation(numbers []int, o Options, set *basis.Set, n int, most float64, least int64) (float64, int64, error) {
	electrons := 0
	for _, z := range numbers {
		electrons += z
	}
	c, err := newCorrelation(numbers, []int{electrons / 2}, o, set)
	if c == nil || err != nil {
		return most, least, err
	}
	virtual, active := n-electrons/2, electrons/2-c.core
	all := matrixBytes(n, 1) + correlationBytes(n, c.functions, virtual, active, 1)
	return max(most, float64(all)), max(least, c.least(matrixBytes(n, 1), n, electrons/2)), nil
}

// fieldFitting returns the shells that fit the field of a molecule.
func fieldFitting(numbers []int) ([]gauss.Shell, error) {
	set, err := basis.FieldFitting()
	if err != nil {
		return nil, err
	}
	shells, err := set.Shells(numbers)
	if err != nil {
		return nil, &Unsupported{Reason: "density fitting: " + err.Error(), Err: err}
	}
	return shells, nil
}
