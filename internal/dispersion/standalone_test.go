package dispersion

import (
	"testing"

	"torsieve/internal/gradcheck"
)

// The check values come from dftd4 4.2 and multicharge 0.5.
func TestD4EEQ(t *testing.T) {
	for _, m := range references(t) {
		d := NewD4EEQ(m.numbers())
		grad := make([]float64, 3*len(m.Symbols))
		energy, err := d.Energy(m.coordinates(), m.Charge, grad)
		if err != nil {
			t.Fatal(m.Name, err)
		}
		pair := energy - d.d4.ThreeBody()
		near(t, m.Name+" energy", []float64{energy, pair}, []float64{m.D4Energy, m.D4PairEnergy}, 1e-11)
		near(t, m.Name+" gradient", grad, m.D4Gradient, 2e-12)
	}
}

func TestD4EEQCoefficients(t *testing.T) {
	for _, m := range references(t) {
		d := NewD4EEQ(m.numbers())
		if _, err := d.Energy(m.coordinates(), m.Charge, nil); err != nil {
			t.Fatal(m.Name, err)
		}
		for b, want := range m.D4C6Row1 {
			c6, _, _ := d.d4.in.coefficient(0, b, d.d4.v, d.d4.dvdq)
			near(t, m.Name+" C6", []float64{c6}, []float64{want}, 1e-9*want)
		}
		near(t, m.Name+" polarizability", d.d4.polarizabilities(m.numbers()), m.D4Alpha0, 1e-9)
	}
}

// polarizabilities are the static ones, at the last charges; for tests.
func (d *D4) polarizabilities(numbers []int) []float64 {
	t, out := d4Table(), make([]float64, len(numbers))
	for a, z := range numbers {
		for i := range t.Elements[z] {
			out[a] += d.v[d.in.offset[a]+i] * t.polarizability(&t.Elements[z][i], d.flavour.charges)[0]
		}
	}
	return out
}

func TestD4EEQGradient(t *testing.T) {
	m := find(t, "difluoroacetate")
	d := NewD4EEQ(m.numbers())
	gradcheck.Run(t, m.coordinates(), 1e-3, 1e-10, func(x, grad []float64) float64 {
		e, err := d.Energy(x, m.Charge, grad)
		if err != nil {
			t.Fatal(err)
		}
		return e
	})
}
