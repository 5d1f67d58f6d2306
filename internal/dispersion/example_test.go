package dispersion_test

import (
	"fmt"

	"torsieve/internal/dispersion"
	"torsieve/internal/units"
)

// water is the geometry of GMTKN55's W4-11 set, in bohr; energy and charges
// below agree with s-dftd3 1.4 and multicharge 0.5.
func water() (numbers []int, x []float64) {
	x = []float64{0.0, 0.06590031, 0.0, -0.75545295, -0.52305064, 0.0, 0.75545295, -0.52305064, 0.0}
	for i := range x {
		x[i] *= units.Angstrom
	}
	return []int{8, 1, 1}, x
}

func ExampleD3() {
	numbers, x := water()
	d := dispersion.NewD3(numbers, dispersion.HF3c)
	fmt.Printf("%.4f millihartree\n", 1000*d.Energy(x, nil))
	// Output: -2.6472 millihartree
}

func ExampleEEQ() {
	numbers, x := water()
	q := make([]float64, 3)
	if err := dispersion.NewEEQ(numbers).Charges(x, 0, q); err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.4f\n", q)
	// Output: [-0.5970 0.2985 0.2985]
}
