package forcefield

import (
	"context"
	"math"
	"testing"

	"torsieve/internal/relax"
)

// refMolecule is an entry of molecules.json: 30 small molecules at stated
// geometries, from an independent program.
type refMolecule struct {
	Name     string
	Elements []string
	Types    []string
	Bonds    []struct {
		I, J     int
		UFFOrder float64 `json:"uff_order"`
	}
	XYZ      [][3]float64
	Terms    map[string]float64
	Total    float64
	K6       float64 `json:"inversion_if_N_has_K6"`
	Gradient [][3]float64
	Counts   map[string]int
	Relaxed  struct {
		Total       float64
		Terms       map[string]float64
		MaxGradient float64 `json:"max_gradient"`
	}
}

// termKeys are the file's names for our terms.
var termKeys = map[string]string{
	"stretch": "bond", "bend": "angle", "torsion": "torsion", "inversion": "inversion", "van der Waals": "vdw",
}

func loadMolecules(t *testing.T) []refMolecule {
	var file struct{ Molecules []refMolecule }
	load(t, "molecules.json", &file)
	if len(file.Molecules) != 30 {
		t.Fatalf("%d molecules, want 30", len(file.Molecules))
	}
	return file.Molecules
}

// skeleton builds the terms' input from the types and orders of the file, so
// that the terms are judged apart from the typing.
func (m refMolecule) skeleton(t *testing.T) *skeleton {
	var types []*atomType
	for _, name := range m.Types {
		types = append(types, typeNamed(t, name))
	}
	var links []link
	for _, b := range m.Bonds {
		links = append(links, link{i: b.I, j: b.J, order: b.UFFOrder})
	}
	return newSkeleton(types, links)
}

// reference returns the published terms.
func (s *skeleton) reference() []term {
	return append(s.bonded(Reference(), nil, false), whole{s.pairs(s.bondsApart(), 1)})
}

func flat(xyz [][3]float64, unit float64) []float64 {
	var x []float64
	for _, p := range xyz {
		x = append(x, p[0]*unit, p[1]*unit, p[2]*unit)
	}
	return x
}

func TestMoleculesTermByTerm(t *testing.T) {
	for _, m := range loadMolecules(t) {
		t.Run(m.Name, func(t *testing.T) {
			s, x := m.skeleton(t), flat(m.XYZ, ang)
			grad := make([]float64, len(x))
			var total float64
			for _, term := range s.reference() {
				e := term.addTo(grad, x) / kcal
				near(t, term.name(), e, m.Terms[termKeys[term.name()]], 2e-8)
				total += e
			}
			near(t, "total", total, m.Total, 5e-8)
			near(t, "inversion of nitrogen", s.inversions(6*kcal).addTo(nil, x)/kcal-m.Terms["inversion"], m.K6, 2e-8)
			for i, want := range flat(m.Gradient, 1) {
				near(t, "gradient", grad[i]/kcal*ang, want, 1e-6)
			}
			near(t, "stretches", float64(len(s.stretches())), float64(m.Counts["bonds"]), 0)
			near(t, "bends", float64(len(s.bends(nil, false))), float64(m.Counts["angles"]), 0)
			near(t, "torsions", float64(len(s.torsions(nil))), float64(m.Counts["torsions"]), 0)
			near(t, "pairs", float64(len(s.pairs(s.bondsApart(), 1).pairs)), float64(m.Counts["vdw"]), 0)
		})
	}
}

// TestMoleculesRelaxed minimises from the stated geometries: the file's
// energies are those of the minimum, or symmetric saddle, reached from there.
func TestMoleculesRelaxed(t *testing.T) {
	for _, m := range loadMolecules(t) {
		terms, x := m.skeleton(t).reference(), flat(m.XYZ, ang)
		surface := relax.Func(func(_ context.Context, grad, x []float64) (float64, error) {
			clear(grad)
			var e float64
			for _, term := range terms {
				e += term.addTo(grad, x)
			}
			return e, nil
		})
		res, err := relax.Minimise(t.Context(), surface, x, relax.Settings{MaxGradient: 1e-8, MaxGradients: 5000})
		if err != nil || res.Status.Err() != nil {
			t.Errorf("%s: %v, %v after %d gradients", m.Name, res.Status, err, res.Gradients)
		}
		near(t, m.Name+" relaxed", res.Energy/kcal, m.Relaxed.Total, 1e-6)
		if math.IsNaN(res.Energy) {
			t.Fatal("not a number")
		}
	}
}
