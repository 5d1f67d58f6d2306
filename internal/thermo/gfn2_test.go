package thermo_test

import (
	"context"
	"errors"
	"math"
	"slices"
	"testing"

	"torsieve/internal/geom"
	"torsieve/internal/relax"
	"torsieve/internal/thermo"
	"torsieve/internal/units"
	"torsieve/semiempirical"
)

// A structure is a molecule on its GFN2-xTB surface.
type structure struct {
	numbers []int
	charge  int
	solvent string
	x       []float64 // bohr
}

// surface starts every gradient from the last state, as a tier's does.
func (s *structure) surface(t *testing.T, accuracy float64) relax.Func {
	t.Helper()
	surface, err := semiempirical.New(s.numbers, s.charge, 1, semiempirical.Options{Accuracy: accuracy, Solvent: s.solvent})
	if err != nil {
		t.Fatal(err)
	}
	return func(ctx context.Context, grad, x []float64) (float64, error) {
		p, err := surface.Gradient(ctx, grad, x)
		return p.Energy, err
	}
}

// relax moves the structure to where the gradient is zero and returns its energy.
func (s *structure) relax(t *testing.T) float64 {
	t.Helper()
	res, err := relax.Minimise(t.Context(), s.surface(t, 1e-4), s.x,
		relax.Settings{MaxGradient: 5e-7, MaxGradients: 2000, Numbers: s.numbers})
	if err == nil {
		err = res.Status.Err()
	}
	if err != nil || res.MaxGradient > 5e-6 {
		t.Fatalf("not relaxed: %+v, %v", res, err)
	}
	return res.Energy
}

func (s *structure) modes(t *testing.T, isotopes []int, step float64) thermo.Modes {
	t.Helper()
	h, err := thermo.Differences(t.Context(), s.surface(t, 1e-4), s.x, step)
	if err != nil {
		t.Fatal(err)
	}
	m, err := thermo.NormalModes(h.Matrix, s.x, thermo.Masses(s.numbers, isotopes))
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// freeEnergy is G above the energy at 298.15 K and 1 bar.
func (s *structure) freeEnergy(t *testing.T, step float64) float64 {
	t.Helper()
	m := s.modes(t, nil, step)
	quanta, _, err := m.Real()
	if err != nil {
		t.Fatal(err)
	}
	return thermo.Species{Body: m.Body, Symmetry: 1, Quanta: quanta}.At(298.15, thermo.OneBar).FreeEnergy()
}

// angstroms makes a structure of coordinates in angstrom.
func angstroms(numbers []int, x ...float64) *structure {
	for i := range x {
		x[i] *= units.Angstrom
	}
	return &structure{numbers: numbers, x: x}
}

func water() *structure {
	return angstroms([]int{8, 1, 1}, 0, 0, 0.12, 0, 0.76, -0.47, 0, -0.76, -0.47)
}

func methane() *structure {
	const a = 0.63
	return angstroms([]int{6, 1, 1, 1, 1}, 0, 0, 0, a, a, a, a, -a, -a, -a, a, -a, -a, -a, a)
}

// ethane with the methyl groups turned against each other by the angle given:
// 60 is staggered, 0 eclipsed.
func ethane(degrees float64) *structure {
	x := []float64{0, 0, 0.763, 0, 0, -0.763}
	for end, z := range []float64{1.16, -1.16} {
		for k := range 3 {
			phi := (float64(120*k) + float64(end)*degrees) * math.Pi / 180
			x = append(x, 1.02*math.Cos(phi), 1.02*math.Sin(phi), z)
		}
	}
	return angstroms([]int{6, 6, 1, 1, 1, 1, 1, 1}, x...)
}

func wavenumbers(m thermo.Modes) []float64 {
	out := slices.Clone(m.Quanta)
	for i := range out {
		out[i] /= units.Wavenumber
	}
	return out
}

// The wavenumber of a diatomic is that of the second derivative of its energy by
// the distance, from energies alone (four-point difference of Abramowitz, Stegun
// 1964, eq. 25.3.24).
func TestDiatomicFromEnergies(t *testing.T) {
	for name, s := range map[string]*structure{
		"N2": angstroms([]int{7, 7}, 0.1, 0.2, 0.3, 0.9, 0.7, 0.8),
		"HF": angstroms([]int{1, 9}, 0, 0, 0, 0.5, 0.6, 0.5),
	} {
		s.relax(t)
		m := s.modes(t, nil, 2e-3)
		if len(m.Quanta) != 1 || len(m.Rigid) != 5 {
			t.Fatalf("%s: %d vibrations, %d motions of the whole", name, len(m.Quanta), len(m.Rigid))
		}
		surface, grad := s.surface(t, 1e-6), make([]float64, 6)
		r := geom.Distance(s.x, 0, 1)
		at := func(d float64) float64 {
			y := slices.Clone(s.x)
			for k := range 3 {
				y[3+k] += d * (s.x[3+k] - s.x[k]) / r
			}
			e, err := surface(t.Context(), grad, y)
			if err != nil {
				t.Fatal(err)
			}
			return e
		}
		const d = 0.01
		k := (-at(2*d) + 16*at(d) - 30*at(0) + 16*at(-d) - at(-2*d)) / (12 * d * d)
		mass := thermo.Masses(s.numbers, nil)
		want := math.Sqrt(k * (1/mass[0] + 1/mass[1]))
		near(t, name+" / cm^-1", m.Quanta[0]/units.Wavenumber, want/units.Wavenumber, 0.1)
	}
}

// Minima of GFN2-xTB: all modes real, as many as there must be, those of a
// symmetric molecule degenerate, and the motions of the whole without curvature.
// What is left of that is the anharmonicity of bonds over the step: the square of
// the quantum goes with the square of the step, and water, the lightest rotor
// here, has 27 cm^-1 at 0.01 bohr and a tenth of it at 0.001.
func TestMinima(t *testing.T) {
	for _, tc := range []struct {
		name  string
		s     *structure
		rigid int
		same  [][]int // places of degenerate modes
	}{
		{"water", water(), 6, nil},
		{"methane", methane(), 6, [][]int{{0, 1, 2}, {3, 4}, {6, 7, 8}}}, // 3, 2, 1, 3: tetrahedral
		{"CO2", angstroms([]int{8, 6, 8}, 1, 0.6, 0, 0, 0, 0, -1, -0.6, 0.02), 5, [][]int{{0, 1}}},
		{"HCN", angstroms([]int{1, 6, 7}, 0, 0, 1.07, 0, 0, 0, 0.01, 0, -1.16), 5, [][]int{{0, 1}}},
		{"ethane", ethane(60), 6, [][]int{{1, 2}}},
	} {
		t.Run(tc.name, func(t *testing.T) {
			tc.s.relax(t)
			m := tc.s.modes(t, nil, 1e-3)
			nu := wavenumbers(m)
			if len(m.Rigid) != tc.rigid || len(nu) != len(tc.s.x)-tc.rigid {
				t.Fatalf("%d vibrations, %d motions of the whole", len(nu), len(m.Rigid))
			}
			if _, turned, err := m.Real(); err != nil || turned > 0 || nu[0] < 100 {
				t.Errorf("wavenumbers %.1f, %d turned, %v", nu, turned, err)
			}
			for _, q := range m.Rigid {
				near(t, "motion of the whole / cm^-1", q/units.Wavenumber, 0, 5)
			}
			for _, places := range tc.same {
				near(t, "degenerate / cm^-1", nu[places[len(places)-1]], nu[places[0]], 0.5)
			}
		})
	}
}

// Turning, moving and renumbering a molecule leaves its wavenumbers: to what the
// anharmonicity over the step, which knows the axes, allows.
func TestRigidMotionAndOrder(t *testing.T) {
	s := ethane(60)
	s.relax(t)
	want := wavenumbers(s.modes(t, nil, 2e-3))
	order := []int{5, 1, 7, 0, 2, 4, 3, 6}
	other := &structure{}
	sin, cos := math.Sincos(0.7)
	for _, from := range order {
		v := s.x[3*from : 3*from+3]
		other.numbers = append(other.numbers, s.numbers[from])
		other.x = append(other.x, cos*v[0]-sin*v[2]+3, v[1]-1, sin*v[0]+cos*v[2]+0.5)
	}
	for k, got := range wavenumbers(other.modes(t, nil, 2e-3)) {
		near(t, "cm^-1", got, want[k], 0.1)
	}
}

// The zero-point energy of heavy water is 0.728 of that of water: the harmonic
// wavenumbers of W. S. Benedict, N. Gailar, E. K. Plyler, J. Chem. Phys. 1956,
// 24, 1139, sum to 6859 and 9423 cm^-1 (from memory). A ratio hardly depends on
// the force field.
func TestHeavyWater(t *testing.T) {
	s := water()
	s.relax(t)
	light, heavy := s.modes(t, nil, 0), s.modes(t, []int{0, 2, 2}, 0)
	var sum, sumHeavy float64
	for k := range light.Quanta {
		sum += light.Quanta[k]
		sumHeavy += heavy.Quanta[k]
	}
	near(t, "ratio of zero-point energies", sumHeavy/sum, 0.728, 0.005)
}

// Eclipsed ethane is the top of the barrier: one imaginary mode, that turns the
// methyl groups, and down along it lies the staggered form.
func TestEclipsedEthane(t *testing.T) {
	staggered := ethane(60)
	low := staggered.relax(t)
	s := ethane(0)
	high := s.relax(t)
	barrier := (high - low) / units.KcalPerMol
	if barrier < 1.5 || barrier > 4 { // experiment 2.9 (any textbook)
		t.Errorf("barrier %.2f kcal/mol", barrier)
	}
	m := s.modes(t, nil, 0)
	_, _, err := m.Real()
	var saddle *thermo.SaddleError
	if !errors.As(err, &saddle) || !slices.Equal(saddle.Modes, []int{0}) {
		t.Fatalf("wavenumbers %.1f, error %v", wavenumbers(m), err)
	}
	for i, d := range m.Motion(saddle.Modes[0]) {
		s.x[i] += 0.3 * d
	}
	near(t, "after the way down / hartree", s.relax(t), low, 1e-7)
	m = s.modes(t, nil, 0)
	if _, turned, err := m.Real(); err != nil || turned > 0 {
		t.Errorf("wavenumbers %.1f, %v", wavenumbers(m), err)
	}
}

// The same input gives the same bytes.
func TestSameBytes(t *testing.T) {
	s := ethane(60)
	s.relax(t)
	first := s.modes(t, nil, 0)
	if again := s.modes(t, nil, 0); !slices.Equal(first.Quanta, again.Quanta) {
		t.Error("two runs from the start differ")
	}
}

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s: %.10g, want %.10g within %.1g", what, got, want, tol)
	}
}
