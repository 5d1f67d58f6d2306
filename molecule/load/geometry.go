package load

import (
	"fmt"
	"math"

	"torsieve/internal/element"
	"torsieve/internal/units"
	"torsieve/molecule"
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

// longBond is the largest length of a bond, in sums of covalent radii, that is
// taken for meant.
const longBond = 1.6

// stretched names the bond of a 3D record that is much too long, the worst of
// them, or returns "".
func stretched(m *molecule.Molecule, x []float64) string {
	worst, text := longBond, ""
	for _, b := range m.Bonds() {
		zi, zj := m.Atom(b.A).Number, m.Atom(b.B).Number
		reach := element.CovalentRadius(zi) + element.CovalentRadius(zj)
		var d2 float64
		for k := range 3 {
			d2 += (x[3*b.A+k] - x[3*b.B+k]) * (x[3*b.A+k] - x[3*b.B+k])
		}
		if d := math.Sqrt(d2); reach > 0 && d > worst*reach {
			worst = d / reach
			text = fmt.Sprintf("the bond of atoms %d (%s) and %d (%s) is %.2f angstrom long: are the coordinates those of this molecule?",
				b.A+1, element.Symbol(zi), b.B+1, element.Symbol(zj), d/units.Angstrom)
		}
	}
	return text
}
