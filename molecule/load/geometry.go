package load

import (
	"fmt"
	"math"

	"torsieve/internal/element"
	"torsieve/internal/units"
)

// Two atoms nearer than this, in bohr, are at the same place for all purposes:
// the shortest bonds are 0.74 angstrom (H2), 0.92 (HF) and 1.10 (N2).
const (
	nearestHeavy    = 0.5 * units.Angstrom
	nearestHydrogen = 0.4 * units.Angstrom // where one of the two is hydrogen
)

// CheckGeometry returns an error that names two atoms of x (bohr, 3N) which are
// practically at the same place, or an atom without a finite position. No tier
// can compute such a geometry.
func CheckGeometry(numbers []int, x []float64) error {
	if len(x) != 3*len(numbers) {
		panic("load: coordinates and atomic numbers differ in length")
	}
	for i, c := range x {
		if math.IsNaN(c) || math.IsInf(c, 0) {
			return fmt.Errorf("atom %d has no finite position", i/3+1)
		}
	}
	for i := range numbers {
		for j := i + 1; j < len(numbers); j++ {
			nearest := nearestHeavy
			if numbers[i] == 1 || numbers[j] == 1 {
				nearest = nearestHydrogen
			}
			dx, dy, dz := x[3*i]-x[3*j], x[3*i+1]-x[3*j+1], x[3*i+2]-x[3*j+2]
			if d := math.Sqrt(dx*dx + dy*dy + dz*dz); d < nearest {
				return fmt.Errorf("atoms %d (%s) and %d (%s) are at the same place (%.2f angstrom apart)",
					i+1, element.Symbol(numbers[i]), j+1, element.Symbol(numbers[j]), d/units.Angstrom)
			}
		}
	}
	return nil
}
