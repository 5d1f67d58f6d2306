package linalg_test

import (
	"fmt"

	"torsieve/internal/linalg"
)

// The energies of butadiene's four pi orbitals in units of Hückel's beta:
// 2 cos(k pi/5).
func ExampleEigen() {
	chain := []float64{
		0, 1, 0, 0,
		1, 0, 1, 0,
		0, 1, 0, 1,
		0, 0, 1, 0,
	}
	energies, orbitals := make([]float64, 4), make([]float64, 16)
	if err := linalg.NewEigen(4).Solve(chain, energies, orbitals); err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.3f\n", energies)
	// Output: [-1.618 -0.618 0.618 1.618]
}
