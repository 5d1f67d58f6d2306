package generate

import (
	"cmp"
	"math"
	"slices"

	"torsieve/internal/geom"
	"torsieve/internal/relax"
	"torsieve/internal/units"
)

// What is kept of a fragment's shapes.
const (
	shapeWindow  = 12 * units.KcalPerMol // above the fragment's lowest
	shapeNoise   = 0.15 * units.Angstrom // RMSD below which two shapes are one
	shapeLimit   = 40
	macroLimit   = 150 // of a fragment with a large ring
	macroSize    = 9   // atoms from which a ring is a large one
	quietStarts  = 12  // starts without a new shape that end the search
	stiffStarts  = 3
	bendyStarts  = 16 // and more with each flexible ring bond
	startsPerBit = 5
	mostStarts   = 160
)

// loose convergence: the shape is that of the minimum, the last digits are not.
var looseSettings = relax.Settings{RMSGradient: 5e-4, MaxGradients: 150, EnergyChange: 1e-5}

// pick takes the positions of core and outside.
func (f *fragment) pick(x []float64) []float64 {
	n := len(f.core) + len(f.outside)
	return slices.Clone(x[:3*n])
}

// keep adds a shape if it is new, or lowers the energy of the one it equals.
func (f *fragment) keep(s shape, compared []int) bool {
	a := choose(s.x, compared)
	for k := range f.shapes {
		if same, _ := geom.RMSD(choose(f.shapes[k].x, compared), a); same < shapeNoise {
			if s.energy < f.shapes[k].energy {
				f.shapes[k] = s
			}
			return false
		}
	}
	f.shapes = append(f.shapes, s)
	return true
}

func choose(x []float64, which []int) []float64 {
	out := make([]float64, 0, 3*len(which))
	for _, i := range which {
		out = append(out, x[3*i:3*i+3]...)
	}
	return out
}

// trim sorts by energy and drops what is too high or too much.
func (f *fragment) trim() {
	slices.SortStableFunc(f.shapes, func(a, b shape) int { return cmp.Compare(a.energy, b.energy) })
	lowest, limit := f.shapes[0].energy, shapeLimit
	for _, ring := range f.model.Rings() {
		if len(ring) >= macroSize {
			limit = macroLimit
		}
	}
	for k := range f.shapes {
		f.shapes[k].energy -= lowest
		if f.shapes[k].energy > shapeWindow || k >= limit {
			f.shapes = f.shapes[:k]
			break
		}
	}
}

// weights returns the share of sampling that each shape gets: by Boltzmann's
// factor at an effective kT wide enough not to trust the force field.
func (f *fragment) weights() []float64 {
	const kT = 4 * units.KcalPerMol
	w := make([]float64, len(f.shapes))
	for k, s := range f.shapes {
		w[k] = math.Exp(-s.energy / kT)
	}
	return w
}
