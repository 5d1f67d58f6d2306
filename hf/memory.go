package hf

import (
	"fmt"
	"math"

	"torsieve/internal/element"
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
// matrices alone take more, which New refuses.
//
// Integrals are estimated for a molecule of the usual shape: of the n^4/8 a
// share is left out because charge clouds far apart are small, the more the
// larger the molecule.
func MemoryEstimate(numbers []int, o Options) (int64, error) {
	o, set, err := o.settle()
	if err != nil {
		return 0, err
	}
	if err := set.Check(numbers); err != nil {
		return 0, &Unsupported{Reason: "Hartree-Fock: " + err.Error(), Err: err}
	}
	n := 0
	for _, z := range numbers {
		n += set.Functions(z)
	}
	matrices := matrixBytes(n, 2)
	survive := min(1, math.Pow(28/float64(len(numbers)), 1.4))
	integrals := math.Pow(float64(n), 4) * survive
	return max(matrices, int64(min(float64(o.MemoryBytes), float64(matrices)+integrals))), nil
}
