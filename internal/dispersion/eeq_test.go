package dispersion

import (
	"errors"
	"math"
	"testing"

	"torsieve/internal/gradcheck"
)

func TestEEQCharges(t *testing.T) {
	for _, m := range references(t) {
		q := make([]float64, len(m.Symbols))
		if err := NewEEQ(m.numbers()).Charges(m.coordinates(), m.Charge, q); err != nil {
			t.Fatal(m.Name, err)
		}
		near(t, m.Name, q, m.EEQCharges, 1e-10)
	}
}

// The response of the charges, through a made-up energy sum_A wA qA.
func TestEEQGradient(t *testing.T) {
	for _, name := range []string{"acetic_acid", "methylimidazolium"} {
		m := find(t, name)
		n := len(m.Symbols)
		weights, q := make([]float64, n), make([]float64, n)
		for i := range weights {
			weights[i] = math.Sin(float64(3*i + 1))
		}
		e := NewEEQ(m.numbers())
		gradcheck.Run(t, m.coordinates(), 1e-3, 1e-9, func(x, grad []float64) float64 {
			if err := e.Charges(x, m.Charge, q); err != nil {
				t.Fatal(err)
			}
			if grad != nil {
				e.AddGradient(weights, grad)
			}
			sum := 0.0
			for i, w := range weights {
				sum += w * q[i]
			}
			return sum
		})
	}
}

func TestEEQRefuses(t *testing.T) {
	e, q := NewEEQ([]int{1, 1}), make([]float64, 2)
	for _, x := range [][]float64{
		{0, 0, 0, 0, 0, 0},
		{0, 0, 0, math.NaN(), 0, 0},
		{0, 0, 0, math.Inf(1), 0, 0},
	} {
		if err := e.Charges(x, 0, q); !errors.Is(err, ErrCoincident) {
			t.Errorf("charges at %v: error %v, want %v", x, err, ErrCoincident)
		}
	}
}

// One atom has nobody to share with.
func TestEEQOneAtom(t *testing.T) {
	q := make([]float64, 1)
	if err := NewEEQ([]int{11}).Charges([]float64{1, 2, 3}, 1, q); err != nil || math.Abs(q[0]-1) > 1e-14 {
		t.Errorf("charge of a sodium ion %g, %v", q[0], err)
	}
}
