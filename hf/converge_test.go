package hf

import (
	"math"
	"testing"

	"torsieve/internal/gauss"
)

// The energy of one electron falls towards the exact value as the basis grows and
// never below it: the hydrogen atom's -1/2 hartree, and the molecular ion at 2
// bohr, -0.602634 with the nuclei's repulsion (D. R. Bates, K. Ledsham, A. L.
// Stewart, Phil. Trans. R. Soc. A 1953, 246, 215: electronic -1.102634).
func TestOneElectronFromAbove(t *testing.T) {
	for _, c := range []struct {
		name    string
		numbers []int
		charge  int
		x       []float64
		exact   float64
		within  float64 // of the exact value in the largest basis, hartree
	}{
		{"H", []int{1}, 0, []float64{0, 0, 0}, -0.5, 5e-4},
		{"H2+", []int{1, 1}, 1, []float64{0, 0, -1, 0, 0, 1}, -0.602634, 1e-3},
	} {
		for _, engine := range []string{"exact", "fitted"} {
			last := 0.0
			for _, set := range []string{"STO-3G", "6-31G", "def2-SVP", "def2-TZVP", "def2-TZVPP"} {
				p := point(t, c.numbers, c.charge, 2, c.x, Options{Method: "hf", Basis: set, TwoElectron: engine})
				if p.Energy < c.exact || p.Energy > last+1e-9 {
					t.Errorf("%s in %s, %s: %.6f hartree, before %.6f, exact %.6f", c.name, set, engine, p.Energy, last, c.exact)
				}
				last = p.Energy
			}
			if last > c.exact+c.within {
				t.Errorf("%s: %.6f hartree in the largest basis, exact %.6f", c.name, last, c.exact)
			}
		}
	}
}

// Two hydrogen atoms far apart with one electron of each spin: the closed-shell
// solution is a saddle, found so and left; the energy is that of two atoms.
func TestLeavesSaddle(t *testing.T) {
	for engine, tol := range map[string]float64{
		"exact":  1e-5,
		"fitted": 5e-5, // the fit misses a little of the one atom's charge in the field of the other
	} {
		o := Options{Method: "hf", Basis: "6-31G**", Accuracy: 0.1, TwoElectron: engine}
		atom := point(t, []int{1}, 0, 2, []float64{0, 0, 0}, o)
		surface, err := New([]int{1, 1}, 0, 1, o)
		if err != nil {
			t.Fatal(err)
		}
		x := []float64{0, 0, 0, 0, 0, 12}
		closed, err := surface.Energy(t.Context(), x)
		if err != nil {
			t.Fatal(err)
		}
		surface.occupied = []int{1, 1}
		open, err := surface.Energy(t.Context(), x)
		if err != nil {
			t.Fatal(err)
		}
		if math.Abs(open.Energy-2*atom.Energy) > tol || closed.Energy < open.Energy+0.1 {
			t.Errorf("%s: %.6f hartree with two sets of orbitals, %.6f with one; two atoms have %.6f", engine, open.Energy, closed.Energy, 2*atom.Energy)
		}
		if len(open.Warnings) == 0 {
			t.Error("no word about it")
		}
	}
}

// Functions that say almost the same are left out, and the energy hardly moves:
// two shells of oxygen come twice, with exponents a little apart.
func TestNearDependence(t *testing.T) {
	s := find(t, "H2O")
	x := s.coordinates()
	for _, engine := range []string{"exact", "fitted"} {
		surface, err := New(s.numbers(t), 0, 1, Options{Method: "hf", Basis: "6-31G*", Accuracy: 0.01, TwoElectron: engine})
		if err != nil {
			t.Fatal(err)
		}
		want, err := surface.Energy(t.Context(), x)
		if err != nil {
			t.Fatal(err)
		}
		shells := append([]gauss.Shell(nil), surface.shells...)
		for _, again := range surface.shells[1:5] {
			again.Exps = clone(again.Exps)
			for i := range again.Exps {
				again.Exps[i] *= 1 + 1e-5
			}
			shells = append(shells, again)
		}
		twice := *surface
		twice.shells, twice.offsets = shells, gauss.Offsets(shells)
		if engine == "exact" {
			twice.engine = newExactEngine(newFockBuilder(shells, 1<<28))
		} else {
			auxiliary, err := fieldFitting(s.numbers(t))
			if err != nil {
				t.Fatal(err)
			}
			twice.engine = newFittedEngine(shells, auxiliary, 1<<28)
		}
		repulsion, err := surface.repulsion(x)
		if err != nil {
			t.Fatal(err)
		}
		f, _, err := twice.prepare(t.Context(), x, repulsion)
		if err != nil {
			t.Fatal(err)
		}
		n := f.basis.n
		if f.basis.rows != surface.offsets[len(surface.shells)] {
			t.Errorf("%d functions of %d are kept, want those of 6-31G*", f.basis.rows, n)
		}
		if _, err := f.converge(t.Context(), 0.01, func() { f.guess(&start{p: make([]float64, n*n)}) }); err != nil {
			t.Fatal(err)
		}
		if d := f.out.Energy - want.Energy; math.Abs(d) > 1e-5 {
			t.Errorf("%s: the energy moves by %.1e hartree", engine, d)
		}
	}
}
