//go:build full

package thermo_test

import (
	"compress/gzip"
	"encoding/json"
	"fmt"
	"os"
	"testing"

	"torsieve/internal/element"
	"torsieve/internal/units"
)

// ligand reads a molecule of testdata/reference/gfn2/molecules.json.gz.
func ligand(t *testing.T, name, solvent string) *structure {
	t.Helper()
	f, err := os.Open("../../testdata/reference/gfn2/molecules.json.gz")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	z, err := gzip.NewReader(f)
	if err != nil {
		t.Fatal(err)
	}
	var file struct {
		Molecules []struct {
			Name     string
			Charge   int
			Elements []string
			X        []float64 `json:"x_angstrom"`
		}
	}
	if err := json.NewDecoder(z).Decode(&file); err != nil {
		t.Fatal(err)
	}
	for _, m := range file.Molecules {
		if m.Name != name {
			continue
		}
		s := &structure{charge: m.Charge, solvent: solvent}
		for _, e := range m.Elements {
			number, _ := element.Number(e)
			s.numbers = append(s.numbers, number)
		}
		for _, c := range m.X {
			s.x = append(s.x, c*units.Angstrom)
		}
		return s
	}
	t.Fatalf("no molecule %s", name)
	return nil
}

// The free energy of ligands of 24 and 29 atoms at the default step differs from
// that at steps from 0.005 to 0.02 bohr by less than 0.02 kcal/mol in gas, and in
// water, where the surface is rough and which points of it are met is chance, by
// less than 0.05; so the step is no part of the error that counts (package
// comment).
func TestStep(t *testing.T) {
	limits := map[string]float64{"none": 0.02, "water": 0.05} // kcal/mol
	for _, name := range []string{"pdb-1r4p", "pdb-1p62"} {
		for _, solvent := range []string{"none", "water"} {
			t.Run(fmt.Sprintf("%s in %s", name, solvent), func(t *testing.T) {
				s := ligand(t, name, solvent)
				s.relax(t)
				want := s.freeEnergy(t, 0)
				for _, step := range []float64{1e-3, 2e-3, 5e-3, 0.02, 0.03, 0.05} {
					d := (s.freeEnergy(t, step) - want) / units.KcalPerMol
					t.Logf("step %g bohr: %+.4f kcal/mol", step, d)
					if step >= 5e-3 && step <= 0.02 {
						near(t, fmt.Sprintf("step %g / kcal/mol", step), d, 0, limits[solvent])
					}
				}
			})
		}
	}
}
