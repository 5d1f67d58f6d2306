package hf

import (
	"math"
	"strings"
	"testing"

	"torsieve/internal/gauss"
)

// publishedFile is testdata/reference/hf/published-values.json, where the
// sources stand.
type publishedFile struct {
	Worked []workedExample `json:"worked_examples"`
	Minima []struct {
		Name, Basis string
		Energy      float64  // computed with a general-purpose library, hartree
		Published   *float64 // five decimals
		Atoms       []string
		Geometry    [][]float64 `json:"geometry_bohr"`
	}
}

type workedExample struct {
	Name       string
	Energy     float64
	Repulsion  float64 `json:"nuclear_repulsion"`
	Published  float64
	Electronic float64 `json:"electronic_energy"`
	Overlap    float64
	Levels     []float64    `json:"orbital_energies"`
	Occupied   []float64    `json:"occupied_coefficients_He_H"`
	He         [][2]float64 `json:"primitives_He"`
	H          [][2]float64 `json:"primitives_H"`
	Atoms      []string
	Geometry   [][]float64 `json:"geometry_bohr"`
}

func readPublished(t *testing.T) publishedFile {
	t.Helper()
	var f publishedFile
	decodeFile(t, "../testdata/reference/hf/published-values.json", &f)
	return f
}

// energyOf runs plain Hartree-Fock, tightly converged.
func energyOf(t *testing.T, basisName string, charge int, atoms []string, x []float64) float64 {
	t.Helper()
	s := referenceSystem{Atoms: atoms}
	surface, err := New(s.numbers(t), charge, 1, Options{Method: "hf", Basis: basisName, Accuracy: 0.01, TwoElectron: "exact"})
	if err != nil {
		t.Fatal(err)
	}
	p, err := surface.Energy(t.Context(), x)
	if err != nil {
		t.Fatal(err)
	}
	return p.Energy
}

func TestPublishedMinima(t *testing.T) {
	f := readPublished(t)
	if len(f.Minima) != 39 {
		t.Fatalf("%d minima, want 39", len(f.Minima))
	}
	printed := 0
	for _, m := range f.Minima {
		t.Run(m.Name+"/"+strings.ReplaceAll(m.Basis, "*", "s"), func(t *testing.T) {
			s := referenceSystem{Geometry: m.Geometry}
			got := energyOf(t, m.Basis, 0, m.Atoms, s.coordinates())
			if math.Abs(got-m.Energy) > 1.5e-8 { // eight decimals, and the geometry has seven
				t.Errorf("%.8f, want %.8f", got, m.Energy)
			}
			if m.Published != nil {
				printed++
				if math.Abs(got-*m.Published) > 1e-5 { // a unit in the last printed digit: the minima differ a little
					t.Errorf("%.6f, published %.5f", got, *m.Published)
				}
			}
		})
	}
	if printed != 24 {
		t.Errorf("%d published values, want 24", printed)
	}
}

func TestWorkedExamples(t *testing.T) {
	f := readPublished(t)
	for _, w := range f.Worked {
		t.Run(w.Name, func(t *testing.T) {
			var got float64
			switch {
			case len(w.Geometry) > 0:
				s := referenceSystem{Geometry: w.Geometry}
				got = energyOf(t, "STO-3G", 0, w.Atoms, s.coordinates())
			case strings.HasPrefix(w.Name, "H2"):
				set := "STO-3G"
				if strings.Contains(w.Name, "6-31G**") {
					set = "6-31G**"
				}
				got = energyOf(t, set, 0, []string{"H", "H"}, []float64{0, 0, 0, 0, 0, 1.4})
			case len(w.He) > 0:
				got = heliumHydride(t, &w)
			default:
				got = energyOf(t, "sto-3g", 1, []string{"He", "H"}, []float64{0, 0, 0, 0, 0, 1.4632})
			}
			if math.Abs(got-w.Energy) > 2e-9 {
				t.Errorf("%.10f, want %.10f", got, w.Energy)
			}
			if w.Published != 0 && math.Abs(got-w.Published) > 5e-5 {
				t.Errorf("%.6f, published %.6f", got, w.Published)
			}
		})
	}
}

// heliumHydride runs the textbook's HeH+ with the example's own exponents, and
// compares overlap, orbital energies and coefficients too.
func heliumHydride(t *testing.T, w *workedExample) float64 {
	t.Helper()
	var shells []gauss.Shell
	for atom, prims := range [][][2]float64{w.He, w.H} {
		s := gauss.Shell{Atom: atom}
		for _, p := range prims {
			s.Exps, s.Coefs = append(s.Exps, p[0]), append(s.Coefs, p[1])
		}
		gauss.Normalise(s.Coefs, 0, s.Exps, s.Coefs)
		shells = append(shells, s)
	}
	x := []float64{0, 0, 0, 0, 0, 1.4632}
	s := &Surface{numbers: []int{2, 1}, nuclei: []float64{2, 1}, charge: 1, occupied: []int{1}, accuracy: 0.01,
		shells: shells, offsets: gauss.Offsets(shells), engine: newExactEngine(newFockBuilder(shells, 1<<20))}
	f, one, err := s.prepare(t.Context(), x, 2/1.4632)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := f.converge(t.Context(), 1e-4, func() { f.guess(&start{p: make([]float64, 4)}) }); err != nil {
		t.Fatal(err)
	}
	near := func(what string, got, want float64) {
		t.Helper()
		if math.Abs(got-want) > 1e-7 {
			t.Errorf("%s: %.8f, want %.8f", what, got, want)
		}
	}
	near("overlap", one.Overlap[1], w.Overlap)
	near("electronic energy", f.parts.sum(), w.Electronic)
	near("lowest level", f.levels[0], w.Levels[0])
	near("highest level", f.levels[1], w.Levels[1])
	near("coefficient of He", math.Sqrt(f.densities.spins[0][0]), w.Occupied[0])
	near("coefficient of H", math.Sqrt(f.densities.spins[0][3]), w.Occupied[1])
	return f.out.Energy
}
