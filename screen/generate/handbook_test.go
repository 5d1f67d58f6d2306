package generate

import (
	"context"
	"encoding/json"
	"math"
	"os"
	"slices"
	"strings"
	"testing"

	"torsieve/internal/geom"
	"torsieve/internal/units"
	"torsieve/molecule"
)

// handbook returns a value of testdata/reference/uff/handbook.json, where its
// source stands.
func handbook(t *testing.T, molecule, quantity string) float64 {
	t.Helper()
	text, err := os.ReadFile("../../testdata/reference/uff/handbook.json")
	if err != nil {
		t.Fatal(err)
	}
	var book struct {
		Values []struct {
			Molecule, Quantity string
			Value              any
		}
	}
	if err := json.Unmarshal(text, &book); err != nil {
		t.Fatal(err)
	}
	for _, v := range book.Values {
		if v.Molecule == molecule && strings.HasPrefix(v.Quantity, quantity) {
			return v.Value.(float64)
		}
	}
	t.Fatalf("the handbook has no %q of %s", quantity, molecule)
	return 0
}

func conformers(t *testing.T, text string) (*molecule.Molecule, Result) {
	t.Helper()
	m := parse(t, text)
	o := Defaults()
	o.Max = 60
	res, err := Conformers(context.Background(), m, text, o)
	if err != nil {
		t.Fatalf("%s: %v", text, err)
	}
	return m, res
}

// above counts the conformers within so many kcal/mol of the lowest.
func within(res Result, kcal float64) int {
	n := 0
	for _, c := range res.Conformers {
		if c.Energy-res.Conformers[0].Energy < kcal*units.KcalPerMol {
			n++
		}
	}
	return n
}

func dihedrals(c Conformer, chains ...[4]int) []float64 {
	var out []float64
	for _, q := range chains {
		out = append(out, geom.Dihedral(c.X, q[0], q[1], q[2], q[3])/degree)
	}
	return out
}

// Counts of distinct conformers, mirror images and renumberings merged, of
// handbook.json. kcal bounds the energy where the count is of a kind of
// conformer that higher ones of another kind follow.
func TestHandbookCounts(t *testing.T) {
	for _, c := range []struct {
		molecule, quantity, smiles string
		kcal                       float64
	}{
		{"butane", "distinct minima", "CCCC", 25},
		{"pentane", "distinct minima", "CCCCC", 25},
		{"cyclohexane", "distinct minima", "C1CCCCC1", 25},
		{"trans-decalin", "distinct chair-chair minima", "C1CC[C@H]2CCCC[C@@H]2C1", 4},
		{"cis-decalin", "two chair-chair forms", "C1CC[C@@H]2CCCC[C@@H]2C1", 4},
	} {
		_, res := conformers(t, c.smiles)
		if got, want := within(res, c.kcal), handbook(t, c.molecule, c.quantity); float64(got) != want {
			t.Errorf("%s: %d conformers, want %g", c.molecule, got, want)
			for _, x := range res.Conformers {
				t.Logf("%.2f kcal/mol, %d hits", (x.Energy-res.Conformers[0].Energy)/units.KcalPerMol, x.Hits)
			}
		}
	}
}

// The dihedrals of butane and pentane: anti 180, gauche 63.7, and the gx form
// of pentane near (-95, 60), from the ACONF geometries of handbook.json. The
// force field is good to about ten degrees.
func TestAlkaneDihedrals(t *testing.T) {
	const tolerance = 12
	near := func(got, want float64) bool { return math.Abs(math.Remainder(got-want, 360)) < tolerance }
	_, butane := conformers(t, "CCCC")
	gauche := handbook(t, "butane", "gauche dihedral")
	for k, want := range []float64{180, gauche} {
		if got := dihedrals(butane.Conformers[k], [4]int{0, 1, 2, 3})[0]; !near(math.Abs(got), want) {
			t.Errorf("butane, conformer %d: dihedral %.1f, want %.1f", k+1, got, want)
		}
	}
	_, pentane := conformers(t, "CCCCC")
	forms := map[string][2]float64{"tt": {180, 180}, "tg": {176, 64}, "gg": {58, 58}, "gx": {-95, 60}}
	for name, want := range forms {
		if !slices.ContainsFunc(pentane.Conformers, func(c Conformer) bool {
			d := dihedrals(c, [4]int{0, 1, 2, 3}, [4]int{1, 2, 3, 4})
			for _, sign := range []float64{1, -1} {
				for _, pair := range [][2]float64{{d[0], d[1]}, {d[1], d[0]}} {
					if near(sign*pair[0], want[0]) && near(sign*pair[1], want[1]) {
						return true
					}
				}
			}
			return false
		}) {
			t.Errorf("pentane: no %s form with dihedrals near %v", name, want)
		}
	}
}

// Cyclohexane's chair: the ring torsion of handbook.json (55 degrees), all six
// of alternating sign; the twist-boat lies above it.
func TestCyclohexane(t *testing.T) {
	_, res := conformers(t, "C1CCCCC1")
	chair := res.Conformers[0]
	want := handbook(t, "cyclohexane", "ring torsion")
	for i := range 6 {
		got := dihedrals(chair, [4]int{i, (i + 1) % 6, (i + 2) % 6, (i + 3) % 6})[0]
		if math.Abs(math.Abs(got)-want) > 3 {
			t.Errorf("chair: torsion %.1f at atom %d, want %g", got, i, want)
		}
	}
	q := geom.PuckeringOf(chair.X[:18])
	// Cremer and Pople 1975: Q about 0.56 to 0.58 angstrom for the chair, theta 0.
	if total := q.Total() / units.Angstrom; math.Abs(total-0.57) > 0.03 || math.Abs(q.Amplitude[0]) > 0.02*units.Angstrom {
		t.Errorf("chair: Q %.3f, q2 %.3f angstrom; want 0.57 and 0", total, q.Amplitude[0]/units.Angstrom)
	}
	twist := res.Conformers[1]
	q = geom.PuckeringOf(twist.X[:18])
	if phase := math.Mod(q.Phase[0]/degree+360+30, 60); math.Abs(q.Amplitude[1]) > 0.1*units.Angstrom || math.Min(phase, 60-phase) > 8 {
		t.Errorf("second conformer: q3 %.3f angstrom, phase %.1f; want a twist-boat (q3 0, phase 30 + 60 n)",
			q.Amplitude[1]/units.Angstrom, q.Phase[0]/degree)
	}
}

// Methylcyclohexane: the lowest conformer has the methyl group equatorial
// (handbook.json: axial is 1.74 kcal/mol higher), and the axial chair is found.
func TestMethylcyclohexane(t *testing.T) {
	_, res := conformers(t, "CC1CCCCC1")
	anti := func(c Conformer) bool { // C-C1-C2-C3: 180 equatorial, 60 axial
		return math.Abs(dihedrals(c, [4]int{0, 1, 2, 3})[0]) > 150
	}
	if !anti(res.Conformers[0]) {
		t.Error("the lowest conformer is axial, want equatorial")
	}
	chairs := map[bool]bool{}
	for _, c := range res.Conformers {
		if q := geom.PuckeringOf(c.X[3:21]); math.Abs(q.Amplitude[1]) > 0.5*units.Angstrom {
			chairs[anti(c)] = true
		}
	}
	if !chairs[true] || !chairs[false] {
		t.Errorf("equatorial chair found: %v, axial chair found: %v; want both", chairs[true], chairs[false])
	}
}

// The bridgehead hydrogens of trans-decalin are anti (180 degrees), those of
// cis-decalin gauche, in every conformer: the configuration is held.
func TestDecalinConfiguration(t *testing.T) {
	for _, c := range []struct {
		name, smiles string
		anti         bool
	}{
		{"trans-decalin", "C1CC[C@H]2CCCC[C@@H]2C1", true},
		{"cis-decalin", "C1CC[C@@H]2CCCC[C@@H]2C1", false},
	} {
		m, res := conformers(t, c.smiles)
		h1, h2 := hydrogenOn(m, 3), hydrogenOn(m, 8)
		for k, x := range res.Conformers {
			if got := math.Abs(dihedrals(x, [4]int{h1, 3, 8, h2})[0]); got > 120 != c.anti {
				t.Errorf("%s, conformer %d: H-C-C-H %.0f degrees", c.name, k+1, got)
			}
		}
	}
}

func hydrogenOn(m *molecule.Molecule, i int) int {
	for _, j := range m.Neighbours(i) {
		if m.Atom(j).Number == 1 {
			return j
		}
	}
	return -1
}
