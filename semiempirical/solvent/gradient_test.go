package solvent

import (
	"math"
	"slices"
	"testing"

	"torsieve/internal/gradcheck"
)

// gradient compares part of a model's gradient with the slope of its energy.
func gradient(t *testing.T, name, solvent string, step, tol float64, energy func(Parts) float64, add func(m *Model, q, grad []float64)) {
	t.Helper()
	m := find(t, name)
	model, x, q := m.model(t, solvent), m.coordinates(), m.solvated["water"].Charges
	for i := range x { // bent and strained
		x[i] += 0.15 * math.Sin(float64(7*i))
	}
	gradcheck.Run(t, x, step, tol, func(x, grad []float64) float64 {
		if err := model.Update(x); err != nil {
			t.Fatal(err)
		}
		if grad != nil {
			add(model, q, grad)
		}
		return energy(model.Parts(q))
	})
}

// The reaction field's gradient is its slope: neutral, with either charge, and
// where a sphere is inside another's.
func TestPolarGradient(t *testing.T) {
	for _, name := range []string{"acetic_acid", "difluoroacetate", "methylimidazolium", "hydrogen_chloride", "glycine_dipeptide"} {
		for _, solvent := range []string{"water", "hexane"} {
			t.Run(name+" in "+solvent, func(t *testing.T) {
				gradient(t, name, solvent, 1e-3, 1e-10, func(p Parts) float64 { return p.Polar }, (*Model).addPolar)
			})
		}
	}
}

// The surface's slope is that of the energy to rounding where no point of it
// enters or leaves a soft border within the step.
func TestSurfaceGradient(t *testing.T) {
	for _, solvent := range []string{"water", "hexane", "dmso"} {
		for _, name := range []string{"water", "acetic_acid", "bromobenzene"} {
			t.Run(name+" in "+solvent, func(t *testing.T) {
				gradient(t, name, solvent, 1e-5, 1e-11, surfaceParts, (*Model).addSurface)
			})
		}
	}
}

// Where points do, differences are rough. A point is dropped when 1e-6 of it is
// left, which changes the energy by up to 1e-9 hartree (5 % of a sphere's
// surface, the weight of a point on an axis, times 250 bohr^2 and 6e-5
// hartree/bohr^2, times 1e-6), and a difference over 1e-3 bohr by up to 6e-7
// hartree/bohr. The jump of the second derivative at a border is below that.
func TestSurfaceGradientIsRough(t *testing.T) {
	for _, name := range []string{"acetic_acid", "bromobenzene", "methanesulfonate", "glycine_dipeptide", "1hnn"} {
		for _, solvent := range []string{"water", "hexane"} {
			t.Run(name+" in "+solvent, func(t *testing.T) {
				gradient(t, name, solvent, 1e-3, 6e-7, surfaceParts, (*Model).addSurface)
			})
		}
	}
}

func surfaceParts(p Parts) float64 { return p.Surface + p.HydrogenBonds }

// The potential is the slope of the energy by the charges.
func TestPotential(t *testing.T) {
	m := find(t, "difluoroacetate")
	model, q := m.model(t, "water"), slices.Clone(m.solvated["water"].Charges)
	gradcheck.Run(t, q, 1e-2, 1e-13, func(q, v []float64) float64 {
		if v == nil {
			v = make([]float64, len(q))
		}
		return model.ReactionField(q, v) + model.HydrogenBonds(q, v)
	})
}
