package screen

import (
	"math"
	"testing"

	"torsieve/forcefield"
	"torsieve/internal/geom"
	"torsieve/internal/units"
	"torsieve/molecule/smiles"
)

// Ethane's minimum is staggered (textbook knowledge). Eclipsed ethane of exact
// symmetry stays eclipsed when it is relaxed as it stands: all forces along the
// rotation vanish.
func TestRelaxationsLeaveMethylSaddles(t *testing.T) {
	m, _, err := smiles.Parse("CC")
	if err != nil {
		t.Fatal(err)
	}
	x := make([]float64, 3*m.NumAtoms())
	x[2], x[5] = -0.77, 0.77
	for i := 2; i < m.NumAtoms(); i++ {
		carbon := m.Neighbours(i)[0]
		turn := float64(i%3) * 2 * math.Pi / 3
		x[3*i], x[3*i+1], x[3*i+2] = 1.03*math.Cos(turn), 1.03*math.Sin(turn), 1.16
		if carbon == 0 {
			x[3*i+2] = -1.16
		}
	}
	for i := range x {
		x[i] *= units.Angstrom
	}
	surface, err := forcefield.New(m, withoutCharges())
	if err != nil {
		t.Fatal(err)
	}
	set := RelaxDefaults()
	set.Numbers = m.Numbers()
	angle := func(x []float64) float64 {
		return math.Abs(math.Remainder(geom.Dihedral(x, 2, 0, 1, 5), 2*math.Pi/3))
	}
	stuck := append([]float64(nil), x...)
	if _, _, err := Relax(t.Context(), surface, stuck, set); err != nil {
		t.Fatal(err)
	}
	if a := angle(stuck); a > 0.01 {
		t.Fatalf("the start is no saddle: it relaxes to %.2f rad by itself", a)
	}
	free := offSaddle(m, x)
	if _, _, err := Relax(t.Context(), surface, free, set); err != nil {
		t.Fatal(err)
	}
	if a := angle(free); math.Abs(a-math.Pi/3) > 0.02 {
		t.Errorf("H-C-C-H is %.3f rad off eclipsed, want %.3f (staggered)", a, math.Pi/3)
	}
}
