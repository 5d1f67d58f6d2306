package semiempirical

import (
	"math"
	"slices"
	"strings"
	"testing"

	"torsieve/internal/units"
)

// A hardCase is a molecule whose charges do not settle of themselves, or whose
// levels nearly meet. Coordinates are in angstrom and made by hand.
type hardCase struct {
	name         string
	numbers      []int
	multiplicity int
	x            []float64
	heated       bool
}

func (c *hardCase) coordinates() []float64 {
	x := slices.Clone(c.x)
	for i := range x {
		x[i] *= units.Angstrom
	}
	return x
}

func (c *hardCase) surface(t *testing.T, o Options) *Surface {
	t.Helper()
	s, err := New(c.numbers, 0, c.multiplicity, o)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func diatomic(name string, za, zb, multiplicity int, r float64, heated bool) hardCase {
	return hardCase{name, []int{za, zb}, multiplicity, []float64{0.1, -0.2, 0, 0.1, -0.2, r}, heated}
}

// ethene has its CH2 groups turned against one another by so many degrees.
func ethene(name string, degrees float64) hardCase {
	s, c := math.Sincos(degrees * math.Pi / 180)
	const y, z = 0.923, 1.24
	return hardCase{name: name, numbers: []int{6, 6, 1, 1, 1, 1}, multiplicity: 1, x: []float64{
		0, 0, 0.665, 0, 0, -0.665, 0, y, z, 0, -y, z, y * s, y * c, -z, -y * s, -y * c, -z,
	}}
}

// zwitterion is H3N+-(CH2)n-COO- drawn out into a zigzag: without a solvent the
// charges at its ends are near the point of flowing together.
func zwitterion(name string, n int) hardCase {
	c := hardCase{name: name, multiplicity: 1}
	add := func(z int, x ...float64) {
		c.numbers = append(c.numbers, z)
		c.x = append(c.x, x...)
	}
	side := 1.0
	add(7, 0, 0.42, 0)
	add(1, -0.5, 1.27, 0)
	add(1, -0.35, -0.03, 0.85)
	add(1, -0.35, -0.03, -0.85)
	for i := 1; i <= n; i++ {
		side = -side
		x := 1.25 * float64(i)
		add(6, x, 0.42*side, 0)
		add(1, x, 1.05*side, 0.89)
		add(1, x, 1.05*side, -0.89)
	}
	x := 1.25 * float64(n+1)
	add(6, x, -0.42*side, 0)
	add(8, x+0.1, -1.67*side, 0)
	add(8, x+1.15, 0.18*side, 0)
	return c
}

func hardCases() []hardCase {
	return []hardCase{
		diatomic("oxygen, singlet", 8, 8, 1, 1.208, false),
		diatomic("oxygen, triplet", 8, 8, 3, 1.208, false),
		diatomic("CN radical, long", 6, 7, 2, 1.8, false),
		diatomic("nitrogen, torn", 7, 7, 1, 2.6, false),
		diatomic("chromium dimer", 24, 24, 1, 2.4, false),
		diatomic("lithium fluoride, torn", 3, 9, 1, 4, true),
		diatomic("sodium chloride, torn", 11, 17, 1, 10, true),
		diatomic("radon dimer", 86, 86, 1, 4.4, false),
		ethene("ethene, flat", 0),
		ethene("ethene, twisted", 89),
		ethene("ethene, crosswise", 90),
		zwitterion("glycine zwitterion", 1),
		zwitterion("zwitterion of 6 carbons", 5),
		zwitterion("zwitterion of 10 carbons", 9),
	}
}

// All hard cases become self-consistent at 300 K, those marked by way of hotter
// electrons and with a warning; what is reached is a stationary point, for the
// gradient is the energy's slope, and the same at any number of cycles allowed.
func TestHardCases(t *testing.T) {
	for _, c := range hardCases() {
		t.Run(c.name, func(t *testing.T) {
			x := c.coordinates()
			s, grad := c.surface(t, Options{Accuracy: 1e-3}), make([]float64, len(x))
			p := mustGradient(t, s, grad, x)
			t.Logf("%d cycles, %q", p.Iterations, p.Warnings)
			heated := slices.ContainsFunc(p.Warnings, func(w string) bool { return strings.Contains(w, "at 300 K only by way of electrons at") })
			if heated != c.heated {
				t.Errorf("heated: %v, want %v", heated, c.heated)
			}
			near(t, "temperature", s.cycle.orbitals.kT/boltzmann, 300, 1e-9)
			checkSlope(t, &c, x, grad)
			again := make([]float64, len(x))
			other := mustGradient(t, c.surface(t, Options{Accuracy: 1e-3}), again, x)
			if other.Energy != p.Energy || !slices.Equal(again, grad) {
				t.Error("a second surface gives other bits")
			}
			if c.heated {
				short, err := c.surface(t, Options{Accuracy: 1e-3, MaxCycles: 90}).Energy(t.Context(), x)
				if err != nil {
					t.Fatal(err)
				}
				near(t, "energy on another way", short.Energy, p.Energy, 1e-9)
			}
		})
	}
}

// checkSlope compares the gradient with the energy's slope in one direction.
func checkSlope(t *testing.T, c *hardCase, x, grad []float64) {
	t.Helper()
	const h = 1e-3
	var slope float64
	var energy [4]float64
	for k, step := range []float64{-2, -1, 1, 2} {
		moved := slices.Clone(x)
		for i := range moved {
			moved[i] += h * step * math.Sin(float64(3*i+1))
		}
		p, err := c.surface(t, Options{Accuracy: 1e-3}).Energy(t.Context(), moved)
		if err != nil {
			t.Fatal(err)
		}
		energy[k] = p.Energy
	}
	for i, g := range grad {
		slope += g * math.Sin(float64(3*i+1))
	}
	want := (8*(energy[2]-energy[1]) - (energy[3] - energy[0])) / (12 * h)
	near(t, "slope", slope, want, 1e-6)
}

// Where electrons cannot be cooled to what was asked for, the answer is at the
// lowest temperature that there is one for, the warning names it, and the next
// geometry knows nothing of it.
func TestHotAnswer(t *testing.T) {
	c := diatomic("oxygen, torn", 8, 8, 1, 5, true)
	s := c.surface(t, Options{Temperature: 0.01})
	p, err := s.Energy(t.Context(), c.coordinates())
	if err != nil {
		t.Fatal(err)
	}
	last := p.Warnings[len(p.Warnings)-1]
	t.Logf("%d cycles, %q", p.Iterations, last)
	if !strings.Contains(last, "charges became self-consistent only with electrons at ") || !strings.Contains(last, " K instead of 0.01 K") {
		t.Errorf("warning %q", last)
	}
	if limit := 2*250 + (len(hotter)+coolingSteps)*heatCycles + 1; p.Iterations > limit {
		t.Errorf("%d cycles, at most %d are allowed", p.Iterations, limit)
	}
	hot, err := c.surface(t, Options{Temperature: s.cycle.orbitals.kT / boltzmann}).Energy(t.Context(), c.coordinates())
	if err != nil {
		t.Fatal(err)
	}
	near(t, "energy at the answer's temperature", p.Energy, hot.Energy, 1e-6)
	if s.warm {
		t.Error("the hot answer starts the next geometry")
	}
	tame := diatomic("oxygen, whole", 8, 8, 1, 1.3, false)
	got, err := s.Energy(t.Context(), tame.coordinates())
	if err != nil {
		t.Fatal(err)
	}
	want, err := tame.surface(t, Options{Temperature: 0.01}).Energy(t.Context(), tame.coordinates())
	if err != nil || got.Energy != want.Energy || !slices.Equal(got.Warnings, want.Warnings) {
		t.Errorf("after a hot answer %.12f, %q; fresh %.12f, %q, %v", got.Energy, got.Warnings, want.Energy, want.Warnings, err)
	}
}

// A molecule of 254 atoms: two clusters and a glycine, 4000 bohr from one another,
// have the energies, charges and gradients of each alone.
func TestManyAtomsFarApart(t *testing.T) {
	cluster, glycine := named(t, "cluster-122"), named(t, "glycine")
	var all referenceMolecule
	var x, gradient, charges []float64
	for i, m := range []*referenceMolecule{cluster, cluster, glycine} {
		all.Elements = append(all.Elements, m.Elements...)
		for k, c := range m.coordinates() {
			if k%3 == 0 {
				c += 4000 * float64(i)
			}
			x = append(x, c)
		}
		gradient, charges = append(gradient, m.Gradient...), append(charges, m.Charges...)
	}
	grad := make([]float64, len(x))
	p := mustGradient(t, all.surface(t, 1e-2), grad, x)
	near(t, "energy", p.Energy, 2*cluster.Energy+glycine.Energy, 5e-9)
	allNear(t, "gradient", grad, gradient, 1e-6)
	allNear(t, "charges", p.Charges, charges, 1e-6)
}
