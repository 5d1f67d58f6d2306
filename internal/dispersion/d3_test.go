package dispersion

import (
	"testing"

	"torsieve/internal/gradcheck"
)

// The check values come from s-dftd3 1.4; gradients have twelve decimals.
func TestD3(t *testing.T) {
	for _, m := range references(t) {
		for _, set := range []struct {
			name     string
			params   D3Params
			energy   float64
			gradient []float64
		}{
			{"HF-3c", HF3c, m.D3HF3cEnergy, m.D3HF3cGradient},
			{"HF", HF, m.D3HFEnergy, m.D3HFGradient},
		} {
			d := NewD3(m.numbers(), set.params)
			grad := make([]float64, 3*len(m.Symbols))
			energy := d.Energy(m.coordinates(), grad)
			near(t, m.Name+" "+set.name+" energy", []float64{energy}, []float64{set.energy}, 2e-11)
			near(t, m.Name+" "+set.name+" gradient", grad, set.gradient, 2e-12)
		}
	}
}

func TestD3Coefficients(t *testing.T) {
	for _, m := range references(t) {
		d := NewD3(m.numbers(), HF)
		d.Energy(m.coordinates(), nil)
		for b, want := range m.D3C6Row1 {
			c6, _, _ := d.in.coefficient(0, b, d.w, d.dw)
			near(t, m.Name+" C6", []float64{c6}, []float64{want}, 1e-10*want)
		}
	}
}

func TestD3Gradient(t *testing.T) {
	m := find(t, "methylimidazolium")
	gradcheck.Run(t, m.coordinates(), 1e-3, 1e-10, NewD3(m.numbers(), HF3c).Energy)
}
