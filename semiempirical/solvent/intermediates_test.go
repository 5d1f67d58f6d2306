package solvent

import (
	"math"
	"testing"
)

// An intermediate is an entry of testdata/reference/solvation/intermediates.json,
// in atomic units.
type intermediate struct {
	Name, Solvent string
	Kappa         float64
	Alpha         float64     `json:"alpha_prime"`
	Size          float64     `json:"a_det"`
	BornRadii     []float64   `json:"born_radii"`
	Matrix        [][]float64 `json:"J"`
	Sphere        []float64   `json:"sphere_radius_P"`
	Radial        []float64   `json:"radial_weight_F"`
	Areas         []float64   `json:"sasa"`
	Charges       []float64
	PolarField    []float64 `json:"v_born"`
	BondField     []float64 `json:"v_hbond"`
	Polar         float64   `json:"e_born"`
	HydrogenBonds float64   `json:"e_hbond"`
}

func TestIntermediates(t *testing.T) {
	var file struct{ Cases []intermediate }
	if err := decodeReference("solvation/intermediates.json", &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Cases) != 8 {
		t.Fatalf("%d cases, want 8", len(file.Cases))
	}
	for _, want := range file.Cases {
		t.Run(want.Name+" in "+want.Solvent, func(t *testing.T) {
			m := find(t, want.Name).model(t, want.Solvent)
			n := len(want.Charges)
			near(t, "kappa", []float64{m.reaction.kappa}, []float64{want.Kappa}, 1e-12)
			near(t, "alpha", []float64{m.reaction.alpha}, []float64{want.Alpha}, 1e-12)
			near(t, "size", []float64{m.shape.size}, []float64{want.Size}, 1e-11)
			near(t, "Born radius", m.born.radius, want.BornRadii, 2e-11)
			near(t, "sphere", m.area.sphere, want.Sphere, 1e-11)
			near(t, "area", m.area.value, want.Areas, 1e-9)
			for i, row := range want.Matrix {
				near(t, "J", m.reaction.matrix[i*n:(i+1)*n], row, 1e-12)
				near(t, "radial weight", []float64{m.area.weight[i] / (4 * math.Pi)}, want.Radial[i:i+1], 1e-10)
			}
			polar, bonds := make([]float64, n), make([]float64, n)
			near(t, "polar energy", []float64{m.reaction.energy(want.Charges, polar)}, []float64{want.Polar}, 1e-12)
			near(t, "bond energy", []float64{m.bonding.energy(m.area.value, want.Charges, bonds)}, []float64{want.HydrogenBonds}, 1e-12)
			near(t, "polar potential", polar, want.PolarField, 1e-12)
			near(t, "bond potential", bonds, want.BondField, 1e-12)
		})
	}
}

// The directions are those of the published table, in any order.
func TestDirections(t *testing.T) {
	var file struct{ Points [][4]float64 }
	if err := decodeReference("solvation/lebedev.json", &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Points) != 230 || len(directions()) != 230 {
		t.Fatalf("%d directions, %d in the table, want 230", len(directions()), len(file.Points))
	}
	used := map[int]bool{}
	for _, d := range directions() {
		for i, p := range file.Points {
			if math.Hypot(math.Hypot(d.n[0]-p[0], d.n[1]-p[1]), d.n[2]-p[2]) < 1e-12 && math.Abs(d.weight-p[3]) < 1e-15 {
				used[i] = true
			}
		}
	}
	if len(used) != 230 {
		t.Errorf("%d directions are in the table, want all", len(used))
	}
}

// Powers up to degree 25 have the averages over the sphere that they must:
// z^l has 1/(l+1) for even l and x^2 y^2 z^2 has 1/105.
func TestQuadrature(t *testing.T) {
	for l := range 26 {
		var got, want float64
		for _, d := range directions() {
			tilted := (d.n[0] + 2*d.n[1] - 2*d.n[2]) / 3 // no axis of the grid
			got += d.weight * math.Pow(tilted, float64(l))
		}
		if l%2 == 0 {
			want = 1 / float64(l+1)
		}
		near(t, "average of a power", []float64{got}, []float64{want}, 1e-13)
	}
	var xyz float64
	for _, d := range directions() {
		xyz += d.weight * d.n[0] * d.n[0] * d.n[1] * d.n[1] * d.n[2] * d.n[2]
	}
	near(t, "average of x2 y2 z2", []float64{xyz}, []float64{1.0 / 105}, 1e-14)
}
