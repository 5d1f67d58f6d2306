//go:build full

package semiempirical

import (
	"math"
	"math/rand/v2"
	"testing"

	"torsieve/internal/units"
)

// randomTurn is a rotation, all being equally likely (K. Shoemake, Graphics Gems
// III, 1992, 124).
func randomTurn(rng *rand.Rand) [3][3]float64 {
	u, v, w := rng.Float64(), 2*math.Pi*rng.Float64(), 2*math.Pi*rng.Float64()
	a, b := math.Sqrt(1-u), math.Sqrt(u)
	x, y, z, s := a*math.Sin(v), a*math.Cos(v), b*math.Sin(w), b*math.Cos(w)
	return [3][3]float64{
		{1 - 2*(y*y+z*z), 2 * (x*y - s*z), 2 * (x*z + s*y)},
		{2 * (x*y + s*z), 1 - 2*(x*x+z*z), 2 * (y*z - s*x)},
		{2 * (x*z - s*y), 2 * (y*z + s*x), 1 - 2*(x*x+y*y)},
	}
}

// turn writes r times each vector of x into dst; back uses the inverse.
func turn(dst, x []float64, r *[3][3]float64, back bool) {
	for i := 0; i < len(x); i += 3 {
		for k := range 3 {
			var sum float64
			for l := range 3 {
				if back {
					sum += r[l][k] * x[i+l]
				} else {
					sum += r[k][l] * x[i+l]
				}
			}
			dst[i+k] = sum
		}
	}
}

// A spread says how values scatter about their mean.
type spread struct {
	square, count float64 // sum of squared deviations; number of values
	low, high     float64 // deviations
}

func (s *spread) add(d float64) {
	s.square, s.count = s.square+d*d, s.count+1
	s.low, s.high = min(s.low, d), max(s.high, d)
}

func (s *spread) merge(o spread) {
	s.square, s.count = s.square+o.square, s.count+o.count
	s.low, s.high = min(s.low, o.low), max(s.high, o.high)
}

func (s *spread) rms() float64 { return math.Sqrt(s.square / s.count) }

func (s *spread) largest() float64 { return max(s.high, -s.low) }

// turnAround computes a molecule in water in random orientations and returns the
// spreads of the energy (hartree) and of the gradient's components, turned back.
func turnAround(t *testing.T, m *referenceMolecule, turns int) (energy, gradient spread) {
	t.Helper()
	s, err := New(m.numbers(), m.Charge, 1, Options{Accuracy: 0.01, Solvent: "water"})
	if err != nil {
		t.Fatal(err)
	}
	rng := rand.New(rand.NewPCG(7, uint64(len(m.X))))
	x, turned, grad := m.coordinates(), make([]float64, len(m.X)), make([]float64, len(m.X))
	energies, grads := make([]float64, turns), make([][]float64, turns)
	mean, meanGrad := 0.0, make([]float64, len(x))
	for k := range turns {
		r := randomTurn(rng)
		turn(turned, x, &r, false)
		energies[k] = mustGradient(t, s, grad, turned).Energy
		grads[k] = make([]float64, len(x))
		turn(grads[k], grad, &r, true)
		mean += energies[k] / float64(turns)
		for i, g := range grads[k] {
			meanGrad[i] += g / float64(turns)
		}
	}
	for k, e := range energies {
		energy.add(e - mean)
		for i, g := range grads[k] {
			gradient.add(g - meanGrad[i])
		}
	}
	return energy, gradient
}

// The surface in a solvent is summed over directions fixed in space, so turning
// a molecule changes its energy; package solvent says by how much at most.
func TestOrientationNoise(t *testing.T) {
	var all, allGrad spread
	widest := 0.0
	for _, name := range []string{
		"pdb-1ik4", "pdb-2hb1", "pdb-1pa9", "pdb-1r4p", "pdb-1p62", "csd-SLFNMF02", "pdb-1v48", "csd-BEHHOL10",
		"pdb-1zvx", "csd-VIMYUL", "pdb-2j34", "pdb-1s3v", "pdb-2h42", "pdb-1d4l",
	} {
		m := named(t, name)
		e, g := turnAround(t, m, 30)
		t.Logf("%-13s %2d atoms: rms %.4f, widest %.4f kcal/mol; gradient rms %.1e, largest %.1e hartree/bohr", name, len(m.Elements),
			e.rms()/units.KcalPerMol, (e.high-e.low)/units.KcalPerMol, g.rms(), g.largest())
		all.merge(e)
		allGrad.merge(g)
		widest = max(widest, e.high-e.low)
	}
	t.Logf("all: rms %.4f, widest %.4f kcal/mol; gradient rms %.1e, largest %.1e hartree/bohr",
		all.rms()/units.KcalPerMol, widest/units.KcalPerMol, allGrad.rms(), allGrad.largest())
	if widest == 0 || widest > 2e-4 {
		t.Errorf("turning changes energies by up to %.1e hartree, where package solvent says 2e-4", widest)
	}
	if allGrad.largest() > 1e-3 {
		t.Errorf("turning changes a component of the gradient by %.1e hartree/bohr, where package solvent says 1e-3", allGrad.largest())
	}
}
