package solvent

import (
	"fmt"

	"torsieve/internal/units"
)

// Water in water; tblite 0.7.0 has -0.019208 hartree (-12.05 kcal/mol) at these
// charges, which are those of the molecule in the solvent.
func ExampleModel() {
	x := []float64{0, 0.124534, 0, -1.4276, -0.988422, 0, 1.4276, -0.988422, 0} // bohr
	m, err := New([]int{8, 1, 1}, "H2O")
	if err != nil {
		fmt.Println(err)
		return
	}
	if err := m.Update(x); err != nil {
		fmt.Println(err)
		return
	}
	p := m.Parts([]float64{-0.718314, 0.359157, 0.359157})
	fmt.Printf("%.2f kcal/mol, of which hydrogen bonds %.2f\n", p.Sum()/units.KcalPerMol, p.HydrogenBonds/units.KcalPerMol)
	// Output: -12.05 kcal/mol, of which hydrogen bonds -9.20
}
