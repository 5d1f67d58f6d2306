package dispersion

import (
	"math"
	"testing"

	"torsieve/internal/gradcheck"
)

// The check values come from tblite 0.7.0, at Mulliken charges that they
// contain.
func TestD4(t *testing.T) {
	for _, m := range references(t) {
		d, n := NewD4(m.numbers()), len(m.Symbols)
		v := make([]float64, n)
		d.Update(m.coordinates())
		energy := d.EnergyPotential(m.Mulliken, v)
		near(t, m.Name+" pair energy", []float64{energy}, []float64{m.GFN2Energy}, 2e-12)
		near(t, m.Name+" potential", v, m.GFN2Potential, 2e-12)
		near(t, m.Name+" three-body energy", []float64{d.ThreeBody()}, []float64{m.GFN2ATMEnergy}, 2e-12)

		want, grad := make([]float64, 3*n), make([]float64, 3*n)
		for i := range want {
			want[i] = m.GFN2Gradient[i] + m.GFN2ATMGradient[i]
		}
		d.AddGradient(m.Mulliken, grad)
		near(t, m.Name+" gradient", grad, want, 2e-12)
	}
}

// Pair and three-body gradients each against their own check values.
func TestD4GradientParts(t *testing.T) {
	for _, m := range references(t) {
		d, n := NewD4(m.numbers()), len(m.Symbols)
		d.Update(m.coordinates())
		grad := make([]float64, 3*n)
		d.pairGradient(m.Mulliken)
		d.finishGradient(grad)
		near(t, m.Name+" pair gradient", grad, m.GFN2Gradient, 2e-12)
		clear(grad)
		clear(d.slope)
		clear(d.dEdCN)
		d.threeBodyGradient()
		d.finishGradient(grad)
		near(t, m.Name+" three-body gradient", grad, m.GFN2ATMGradient, 2e-12)
	}
}

func TestD4FiniteDifferences(t *testing.T) {
	m := find(t, "cysteine_dipeptide")
	d := NewD4(m.numbers())
	v := make([]float64, len(m.Symbols))
	gradcheck.Run(t, m.coordinates(), 1e-3, 1e-10, func(x, grad []float64) float64 {
		d.Update(x)
		if grad != nil {
			d.AddGradient(m.Mulliken, grad)
		}
		return d.EnergyPotential(m.Mulliken, v) + d.ThreeBody()
	})
}

// The potential is the derivative of the energy with respect to the charges.
func TestD4Potential(t *testing.T) {
	m := find(t, "methanesulfonate")
	d := NewD4(m.numbers())
	d.Update(m.coordinates())
	v := make([]float64, len(m.Symbols))
	gradcheck.Run(t, m.Mulliken, 1e-3, 1e-10, func(q, grad []float64) float64 {
		if grad != nil {
			return d.EnergyPotential(q, grad)
		}
		return d.EnergyPotential(q, v)
	})
}

// Near the cut-offs the terms are switched off; two far pairs of atoms put one
// distance into the last 0.05 bohr of each.
func TestD4SwitchGradient(t *testing.T) {
	for _, cutoff := range []float64{gfn2Flavour.pairCutoff, gfn2Flavour.threeCutoff} {
		x := []float64{0, 0, 0, 0.3, cutoff - 0.02, 0.4, 1.9, 2.6, -0.7, -2, cutoff / 2, 3}
		d := NewD4([]int{53, 53, 35, 17})
		q, v := make([]float64, 4), make([]float64, 4)
		d.Update(x)
		dist := math.Sqrt(0.25 + (cutoff-0.02)*(cutoff-0.02))
		if dist < cutoff-switchWidth || dist > cutoff {
			t.Fatalf("distance %g is not in the switching range", dist)
		}
		const scale = 1e6 // the terms are small out there
		gradcheck.Run(t, x, 1e-4, 1e-7, func(x, grad []float64) float64 {
			d.Update(x)
			if grad != nil {
				d.AddGradient(q, grad)
				for i := range grad {
					grad[i] *= scale
				}
			}
			return scale * (d.EnergyPotential(q, v) + d.ThreeBody())
		})
	}
}

// Scratch that was used before must not show, and nothing may be allocated.
func TestD4Scratch(t *testing.T) {
	m := find(t, "acetic_acid")
	x, n := m.coordinates(), len(m.Symbols)
	d := NewD4(m.numbers())
	run := func(grad, v []float64) float64 {
		clear(grad)
		clear(v)
		d.Update(x)
		e := d.EnergyPotential(m.Mulliken, v) + d.ThreeBody()
		d.AddGradient(m.Mulliken, grad)
		return e
	}
	grad, v, grad2, v2 := make([]float64, 3*n), make([]float64, n), make([]float64, 3*n), make([]float64, n)
	want := run(grad, v)
	for _, s := range [][]float64{
		d.count, d.w, d.dw, d.v, d.dvdq, d.dvdcn, d.mv, d.slope, d.dEdCN, d.v0, d.dv0, d.pairs.r, d.cn.slope,
		d.three.r2, d.three.inv3, d.three.ratio, d.three.root, d.three.dlog, d.three.slope, d.three.share,
	} {
		for i := range s {
			s[i] = math.NaN()
		}
	}
	if got := run(grad2, v2); got != want {
		t.Errorf("energy %.17g, with poisoned scratch %.17g", want, got)
	}
	near(t, "gradient", grad2, grad, 0)
	near(t, "potential", v2, v, 0)
	if a := testing.AllocsPerRun(10, func() { run(grad, v) }); a != 0 {
		t.Errorf("%g allocations a geometry, want none", a)
	}
}

func BenchmarkD4(b *testing.B) {
	m := find(b, "1t46") // 69 atoms
	x, n := m.coordinates(), len(m.Symbols)
	d := NewD4(m.numbers())
	v, grad := make([]float64, n), make([]float64, 3*n)
	d.Update(x)
	b.Run("step=update", func(b *testing.B) {
		for b.Loop() {
			d.Update(x)
		}
	})
	b.Run("step=potential", func(b *testing.B) {
		for b.Loop() {
			d.EnergyPotential(m.Mulliken, v)
		}
	})
	b.Run("step=threebody", func(b *testing.B) {
		for b.Loop() {
			d.ThreeBody()
		}
	})
	b.Run("step=gradient", func(b *testing.B) {
		for b.Loop() {
			d.AddGradient(m.Mulliken, grad)
		}
	})
}
