package hf

import (
	"math"
	"strings"
	"testing"

	"torsieve/internal/element"
)

// referenceFile is a file of testdata/reference/hf with molecules; its source
// and conventions are in it.
type referenceFile struct {
	Systems []referenceSystem
}

type referenceSystem struct {
	Name         string
	Conformer    int
	Charge       int
	Multiplicity int
	Atoms        []string
	Geometry     [][]float64 `json:"geometry_bohr"`
	Results      []referenceResult
}

type referenceResult struct {
	Basis        string
	TwoElectron  string  `json:"two_electron"`
	Functions    int     `json:"n_basis"`
	Energy       float64 // hartree
	Repulsion    float64 `json:"nuclear_repulsion"`
	Kinetic      float64
	Attraction   float64   `json:"nuclear_attraction"`
	Coulomb      float64   // 0 where the file gives the two-electron energy as one
	Exchange     float64   // likewise
	Dipole       []float64 `json:"dipole_au"` // about the origin of the coordinates
	Mulliken     []float64
	TwoElectrons float64 `json:"two_electron_energy"`
}

func (s *referenceSystem) numbers(t testing.TB) []int {
	var out []int
	for _, symbol := range s.Atoms {
		z, ok := element.Number(symbol)
		if !ok {
			t.Fatalf("no element %q", symbol)
		}
		out = append(out, z)
	}
	return out
}

func (s *referenceSystem) coordinates() []float64 {
	var x []float64
	for _, g := range s.Geometry {
		x = append(x, g...)
	}
	return x
}

func readReference(t testing.TB, name string) []referenceSystem {
	t.Helper()
	var f referenceFile
	decodeFile(t, "../testdata/reference/hf/"+name, &f)
	if len(f.Systems) == 0 {
		t.Fatalf("%s holds no systems", name)
	}
	return f.Systems
}

// check runs one reference entry and compares energy, parts, charges and
// dipole; energies within tol hartree.
func check(t *testing.T, s *referenceSystem, want *referenceResult, accuracy, tol float64) {
	t.Helper()
	numbers, x := s.numbers(t), s.coordinates()
	surface, err := New(numbers, s.Charge, s.Multiplicity, Options{Method: "hf", Basis: want.Basis, Accuracy: accuracy, TwoElectron: want.TwoElectron})
	if err != nil {
		t.Fatal(err)
	}
	if surface.offsets[len(surface.shells)] != want.Functions {
		t.Fatalf("%d functions, want %d", surface.offsets[len(surface.shells)], want.Functions)
	}
	p, err := surface.Energy(t.Context(), x)
	if err != nil {
		t.Fatal(err)
	}
	near := func(what string, got, want, tol float64) {
		t.Helper()
		if !(math.Abs(got-want) <= tol) {
			t.Errorf("%s: got %.10f, want %.10f (off by %.1e)", what, got, want, got-want)
		}
	}
	near("energy", p.Energy, want.Energy, tol)
	t.Logf("off by %.1e, %d iterations", p.Energy-want.Energy, p.Iterations)
	part := map[string]float64{}
	for _, q := range p.Parts {
		part[q.Name] = q.Energy
	}
	// Parts answer in first order to what is left of the commutator, energies
	// in second; core electrons of heavy atoms dominate both.
	loosely := func(what string, got, want float64) {
		t.Helper()
		near(what, got, want, max(1e3*tol, 1e-5)+1e-8*math.Abs(want))
	}
	near("nuclear repulsion", part["nuclear repulsion"], want.Repulsion, 1e-9)
	loosely("kinetic", part["kinetic"], want.Kinetic)
	loosely("nuclear attraction", part["nuclear attraction"], want.Attraction)
	if want.Coulomb != 0 {
		loosely("coulomb", part["coulomb"], want.Coulomb)
		loosely("exchange", part["exchange"], want.Exchange)
	} else {
		loosely("two-electron", part["coulomb"]+part["exchange"], want.TwoElectrons)
	}
	degenerate := s.Multiplicity > 1 && len(s.Atoms) == 1 // any direction of the open shell is as good
	for a, q := range want.Mulliken {
		if !degenerate {
			near("charge of an atom", p.Charges[a], q, 1e-5)
		}
	}
	mu := p.Dipole
	var centre [3]float64
	mass := 0.0
	for a, z := range numbers {
		mass += element.Mass(z)
		for k := range 3 {
			centre[k] += element.Mass(z) * x[3*a+k]
		}
	}
	for k := range 3 {
		near("dipole", mu[k]+float64(s.Charge)*centre[k]/mass, want.Dipole[k], 5e-5)
	}
}

// entries runs f for each result of a file that pick takes.
func entries(t *testing.T, file string, pick func(*referenceSystem, *referenceResult) bool, f func(*testing.T, *referenceSystem, *referenceResult)) {
	t.Helper()
	n := 0
	systems := readReference(t, file)
	for i := range systems {
		s := &systems[i]
		for k := range s.Results {
			r := &s.Results[k]
			if !pick(s, r) {
				continue
			}
			n++
			t.Run(s.Name+"/"+string(rune('0'+s.Conformer))+"/"+strings.ReplaceAll(r.Basis, "*", "s"), func(t *testing.T) { f(t, s, r) })
		}
	}
	if n == 0 {
		t.Errorf("%s: nothing was compared", file)
	}
}

func TestSmallSystems(t *testing.T) {
	entries(t, "small-systems.json",
		func(s *referenceSystem, r *referenceResult) bool { return r.Functions <= 40 },
		func(t *testing.T, s *referenceSystem, r *referenceResult) { check(t, s, r, 0.01, 1e-8) })
}

func TestUnrestrictedSystems(t *testing.T) {
	entries(t, "uhf-small-systems.json",
		func(s *referenceSystem, r *referenceResult) bool { return r.Functions <= 31 },
		func(t *testing.T, s *referenceSystem, r *referenceResult) { check(t, s, r, 0.01, 1e-8) })
}
