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

// The surface in a solvent is summed over directions fixed in space, so turning
// a molecule changes its energy; package solvent says by how much at most. In the
// gas nothing changes.
func TestOrientationNoise(t *testing.T) {
	const turns = 30
	var sum, sumGrad, count, countGrad, widest, largest float64
	for _, name := range []string{
		"pdb-1ik4", "pdb-2hb1", "pdb-1pa9", "pdb-1r4p", "pdb-1p62", "csd-SLFNMF02", "pdb-1v48", "csd-BEHHOL10",
		"pdb-1zvx", "csd-VIMYUL", "pdb-2j34", "pdb-1s3v", "pdb-2h42", "pdb-1d4l",
	} {
		m := named(t, name)
		s, err := New(m.numbers(), m.Charge, 1, Options{Accuracy: 0.01, Solvent: "water"})
		if err != nil {
			t.Fatal(err)
		}
		rng := rand.New(rand.NewPCG(7, uint64(len(m.X))))
		x, turned, grad := m.coordinates(), make([]float64, len(m.X)), make([]float64, len(m.X))
		var energies []float64
		grads := make([][]float64, turns)
		mean, meanGrad := 0.0, make([]float64, len(x))
		for k := range turns {
			r := randomTurn(rng)
			turn(turned, x, &r, false)
			p := mustGradient(t, s, grad, turned)
			energies, mean = append(energies, p.Energy), mean+p.Energy/turns
			grads[k] = make([]float64, len(x))
			turn(grads[k], grad, &r, true)
			for i, g := range grads[k] {
				meanGrad[i] += g / turns
			}
		}
		low, high, square := math.Inf(1), math.Inf(-1), 0.0
		for _, e := range energies {
			low, high = min(low, e), max(high, e)
			square += (e - mean) * (e - mean)
		}
		squareGrad, most := 0.0, 0.0
		for _, g := range grads {
			for i := range g {
				d := g[i] - meanGrad[i]
				squareGrad, most = squareGrad+d*d, max(most, math.Abs(d))
			}
		}
		components := float64(turns * len(x))
		t.Logf("%-13s %2d atoms: rms %.4f, widest %.4f kcal/mol; gradient rms %.1e, largest %.1e hartree/bohr", name, len(m.Elements),
			math.Sqrt(square/turns)/units.KcalPerMol, (high-low)/units.KcalPerMol, math.Sqrt(squareGrad/components), most)
		sum, count, widest = sum+square, count+turns, max(widest, high-low)
		sumGrad, countGrad, largest = sumGrad+squareGrad, countGrad+components, max(largest, most)
	}
	t.Logf("all: rms %.4f, widest %.4f kcal/mol; gradient rms %.1e, largest %.1e hartree/bohr",
		math.Sqrt(sum/count)/units.KcalPerMol, widest/units.KcalPerMol, math.Sqrt(sumGrad/countGrad), largest)
	if widest == 0 || widest > 2e-4 {
		t.Errorf("turning changes energies by up to %.1e hartree, where package solvent says 2e-4", widest)
	}
	if largest > 1e-3 {
		t.Errorf("turning changes a component of the gradient by %.1e hartree/bohr, where package solvent says 1e-3", largest)
	}
}
