package semiempirical

import (
	"compress/gzip"
	"encoding/json"
	"errors"
	"os"
	"path/filepath"
	"slices"
	"testing"

	"torsieve/internal/gradcheck"
	"torsieve/molecule"
	"torsieve/semiempirical/solvent"
)

// A solvated holds what testdata/reference/solvation/reference.json.gz has of a
// molecule in one solvent, in atomic units: tblite 0.7.0 at accuracy 0.01.
type solvated struct {
	Energy     float64   `json:"total_energy"`
	Difference float64   `json:"minus_gas"`
	Polar      float64   `json:"e_born"`
	Surface    float64   `json:"e_sasa"`
	Bonds      float64   `json:"e_hbond"`
	Shift      float64   `json:"e_shift"`
	Charges    []float64 // e
	Gradient   []float64 `json:"total_gradient"` // empty for most solvents
}

// A solvatedMolecule is a molecule with its values in each solvent.
type solvatedMolecule struct {
	referenceMolecule
	gas float64 // hartree
	in  map[string]solvated
}

// readGzip decodes a file below testdata/reference.
func readGzip(t *testing.T, name string, into any) {
	t.Helper()
	f, err := os.Open(filepath.Join("..", "testdata", "reference", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	z, err := gzip.NewReader(f)
	if err != nil {
		t.Fatal(err)
	}
	if err := json.NewDecoder(z).Decode(into); err != nil {
		t.Fatal(err)
	}
}

// solvatedMolecules returns the 26 molecules; their geometries are those of the
// dispersion energies' check values.
func solvatedMolecules(t *testing.T) []solvatedMolecule {
	t.Helper()
	var geometries struct {
		Molecules []struct {
			Name     string
			Charge   int
			Elements []string
			XYZ      [][3]float64 `json:"xyz_angstrom"`
		}
	}
	readGzip(t, "dispersion/reference.json.gz", &geometries)
	var values struct{ Molecules []map[string]json.RawMessage }
	readGzip(t, "solvation/reference.json.gz", &values)
	if len(values.Molecules) != 26 || len(geometries.Molecules) != 26 {
		t.Fatalf("%d molecules and %d geometries, want 26", len(values.Molecules), len(geometries.Molecules))
	}
	var all []solvatedMolecule
	for i, g := range geometries.Molecules {
		m := solvatedMolecule{in: map[string]solvated{}}
		m.Name, m.Charge, m.Elements = g.Name, g.Charge, g.Elements
		for _, r := range g.XYZ {
			m.X = append(m.X, r[:]...)
		}
		var name string
		entry := values.Molecules[i]
		unpack(t, entry["name"], &name)
		if name != m.Name {
			t.Fatalf("values of %s stand where those of %s should", name, m.Name)
		}
		unpack(t, entry["gfn2_gas_energy"], &m.gas)
		for _, s := range solvent.Names() {
			if entry[s] != nil {
				var v solvated
				unpack(t, entry[s], &v)
				m.in[s] = v
			}
		}
		all = append(all, m)
	}
	return all
}

func unpack(t *testing.T, raw json.RawMessage, into any) {
	t.Helper()
	if err := json.Unmarshal(raw, into); err != nil {
		t.Fatal(err)
	}
}

// inSolvent prepares a molecule in a solvent.
func (m *solvatedMolecule) inSolvent(t *testing.T, name string, accuracy float64) *Surface {
	t.Helper()
	s, err := New(m.numbers(), m.Charge, 1, Options{Accuracy: accuracy, Solvent: name})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// compareSolvated holds one molecule in one solvent to its values. The
// reference's charges stand to 1e-6, and so its parts to 1e-7 and its gradient
// to 2e-7, while energies, being stationary, stand to 1e-11.
func compareSolvated(t *testing.T, m *solvatedMolecule, name string, want solvated, gas float64) {
	t.Helper()
	s, grad := m.inSolvent(t, name, 1e-4), make([]float64, len(m.X))
	p := mustGradient(t, s, grad, m.coordinates())
	what := m.Name + " in " + name
	near(t, what+" energy", p.Energy, want.Energy, 5e-11)
	near(t, what+" less gas", p.Energy-gas, want.Difference, 5e-11)
	allNear(t, what+" charges", p.Charges, want.Charges, 1e-6)
	if want.Gradient != nil {
		allNear(t, what+" gradient", grad, want.Gradient, 2e-7)
	}
	for part, value := range map[string]float64{
		"solvent reaction field": want.Polar, "solvent hydrogen bonds": want.Bonds,
		"solvent surface": want.Surface, "solvent shift": want.Shift,
	} {
		k := slices.IndexFunc(p.Parts, func(p molecule.Part) bool { return p.Name == part })
		if k < 0 {
			t.Fatalf("no part %q", part)
		}
		near(t, what+" "+part, p.Parts[k].Energy, value, 1e-7)
	}
}

// compareSolvents holds molecules with an accepted number of atoms in the
// solvents accepted to the reference.
func compareSolvents(t *testing.T, accept func(atoms int, solvent string) bool) {
	all, compared := solvatedMolecules(t), 0
	for i := range all {
		m := &all[i]
		var gas molecule.Point
		for _, name := range solvent.Names() {
			want, there := m.in[name]
			if !there || !accept(len(m.Elements), name) {
				continue
			}
			if gas.Charges == nil {
				var err error
				if gas, err = m.inSolvent(t, "none", 1e-4).Energy(t.Context(), m.coordinates()); err != nil {
					t.Fatal(err)
				}
				near(t, m.Name+" in the gas", gas.Energy, m.gas, 5e-11)
			}
			compareSolvated(t, m, name, want, gas.Energy)
			compared++
		}
	}
	t.Logf("%d pairs of molecule and solvent", compared)
	if compared == 0 {
		t.Error("nothing was compared")
	}
}

// Small molecules in every solvent, and those of medium size in water.
func TestSolvents(t *testing.T) {
	compareSolvents(t, func(atoms int, solvent string) bool {
		return atoms <= 8 || solvent == "water" && atoms <= 29
	})
}

// In a solvent the gradient still is the slope of the energy. The step is such
// that the surface, which is rough, does no harm at this geometry.
func TestGradientInSolvent(t *testing.T) {
	all := solvatedMolecules(t)
	for i := range all {
		m := &all[i]
		if m.Name != "difluoroacetate" && m.Name != "acetic_acid" {
			continue
		}
		for _, name := range []string{"water", "chloroform"} {
			s, x := m.inSolvent(t, name, 1e-6), m.coordinates()
			for i := range x {
				x[i] += 0.1 * float64(i*i%7-3) / 3
			}
			t.Run(m.Name+" in "+name, func(t *testing.T) {
				gradcheck.Run(t, x, 1e-3, 1e-7, func(x, grad []float64) float64 {
					g := make([]float64, len(x))
					p := mustGradient(t, s, g, x)
					if grad != nil {
						copy(grad, g)
					}
					return p.Energy
				})
			})
		}
	}
}

func TestSolventErrors(t *testing.T) {
	var unknown *solvent.UnknownError
	if _, err := New([]int{1, 1}, 0, 1, Options{Solvent: "watre"}); !errors.As(err, &unknown) || !slices.Contains(unknown.Nearest, "water") {
		t.Errorf("error %v, want water as the nearest", err)
	}
	var unsupported *solvent.Unsupported
	if _, err := New([]int{1, 57, 1, 1}, 0, 1, Options{Solvent: "water"}); !errors.As(err, &unsupported) || unsupported.Atom != 1 {
		t.Errorf("error %v, want one for the second atom", err)
	}
	for _, none := range []string{"", "none", "None"} {
		s, err := New([]int{1, 57, 1, 1}, 0, 1, Options{Solvent: none})
		if err != nil || s.model.solvent != nil {
			t.Errorf("solvent %q is not the gas phase: %v", none, err)
		}
	}
}
