package generate

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"torsieve/internal/geom"
	"torsieve/internal/units"
	"torsieve/molecule/smiles"
)

// Molecules with one shape, small and odd ones among them.
func TestRigidMolecules(t *testing.T) {
	for _, text := range []string{
		"[He]", "[H][H]", "Cl", "C#N", "C#C", "C=C=C", "O=C=O", "O", "N", "C", "CC", "CC#CC", "FS(F)(F)(F)(F)F",
		"c1ccccc1", "c1ccc2ccccc2c1", "C12C3C4C1C5C2C3C45", "C1C2CC3CC1CC(C2)C3", "C1CC2CCC1C2", "C1CN2CCN1CC2",
		"C1CC1", "[Na+]", "[NH4+]", "CC(C)(C)C", "FC(F)(F)C(F)(F)F", "C[Si](C)(C)C",
	} {
		_, res := conformers(t, text)
		if len(res.Conformers) != 1 {
			t.Errorf("%s: %d conformers, want 1", text, len(res.Conformers))
		}
	}
}

// Ring systems that are not flat: C60 is a sphere of radius 3.55 angstrom (gas
// electron diffraction, K. Hedberg et al., Science 1991, 254, 410: bonds 1.458
// and 1.401 angstrom); corannulene, C20H10, is a bowl, and turned inside out the
// same shape.
func TestCurvedRingSystems(t *testing.T) {
	m, res := conformers(t, "c12c3c4c5c1c1c6c7c2c2c8c3c3c9c4c4c%10c5c5c1c1c6c6c%11c7c2c2c7c8c3c3c8c9c4c4c9c%10c5c5c1c1c6c6c%11c2c2c7c3c3c8c4c4c9c5c1c1c6c2c3c41")
	centre := geom.Centroid(res.Conformers[0].X)
	for i := range m.NumAtoms() {
		var r float64
		for d := range 3 {
			r += math.Pow(res.Conformers[0].X[3*i+d]-centre[d], 2)
		}
		if r = math.Sqrt(r) / units.Angstrom; math.Abs(r-3.55) > 0.1 {
			t.Errorf("C60: atom %d is %.2f angstrom from the middle, want 3.55", i+1, r)
		}
	}
	m, res = conformers(t, "c1cc2ccc3ccc4ccc5ccc1c6c2c3c4c56")
	if len(res.Conformers) != 1 || m.Formula() != "C20H10" {
		t.Errorf("corannulene, %s: %d conformers, want 1", m.Formula(), len(res.Conformers))
	}
}

// Stated stereo is held in every conformer: signs of volumes and dihedrals as
// the parities of the graph say, whose convention molecule's tests check
// against L-alanine.
func TestStereoIsHeld(t *testing.T) {
	for _, text := range []string{
		"N[C@@H](C)C(=O)O", "N[C@H](C)C(=O)O", "C/C=C/C", "C/C=C\\C", "C[S@](=O)CC", "C/C=N/O",
		"C[C@@H](NC(=O)c1ccnc(NC2CCOCC2)c1)c1ccc(F)cc1", "O=C(/C=C/c1ccc(F)cc1)N[C@H]1CCCN(C1)c1ccncn1",
		"C[C@H]1CC[C@@H](C)CC1", "C[C@H]1CC[C@H](C)CC1", "C[C@]12CC[C@H]3[C@H]([C@@H]1CC[C@@H]2O)CCC4=CC(=O)CC[C@]34C",
	} {
		m := parse(t, text)
		o := Defaults()
		o.Max = 12
		res, err := Conformers(context.Background(), m, text, o)
		if err != nil {
			t.Errorf("%s: %v", text, err)
			continue
		}
		for k, c := range res.Conformers {
			if err := m.StereoMatches(c.X); err != nil {
				t.Errorf("%s, conformer %d: %v", text, k+1, err)
			}
		}
	}
}

// L-alanine: over N, CH3, COOH, H the signed volume is negative, worked out by
// hand from the SMILES rule and the descriptor S (see generation_checks.json,
// parity_example).
func TestAlanineParity(t *testing.T) {
	m, res := conformers(t, "N[C@@H](C)C(=O)O")
	h := hydrogenOn(m, 1)
	for k, c := range res.Conformers {
		if v := geom.SignedVolume(c.X, 0, 2, 3, h); v >= 0 {
			t.Errorf("conformer %d: volume %g bohr^3, want a negative one", k+1, v)
		}
	}
}

// The amide of N-methylacetamide is found both ways, Z (O=C-N-CH3 near 0)
// below E, as handbook.json has it (2.5 kcal/mol).
func TestAmideStates(t *testing.T) {
	_, res := conformers(t, "CC(=O)NC")
	angles := map[bool]float64{}
	for _, c := range res.Conformers {
		e := math.Abs(dihedrals(c, [4]int{2, 1, 3, 4})[0]) > 90
		if _, ok := angles[e]; !ok {
			angles[e] = c.Energy
		}
	}
	z, okZ := angles[false]
	e, okE := angles[true]
	if !okZ || !okE || e <= z {
		t.Errorf("Z %v, E %v, E - Z %.2f kcal/mol; want both, E above", okZ, okE, (e-z)/units.KcalPerMol)
	}
}

// One call is like another, bit by bit; another seed is another search.
func TestDeterminism(t *testing.T) {
	m := parse(t, "CC(C)Oc1cccc(c1)CNC(=O)C1CCOCC1")
	o := Defaults()
	o.Max = 20
	run := func(seed uint64) []Conformer {
		o.Seed = seed
		res, err := Conformers(context.Background(), m, "one", o)
		if err != nil {
			t.Fatal(err)
		}
		return res.Conformers
	}
	a, b, other := run(1), run(1), run(2)
	same := func(p, q []Conformer) bool {
		return slices.EqualFunc(p, q, func(x, y Conformer) bool {
			return x.Energy == y.Energy && x.Family == y.Family && x.Hits == y.Hits && slices.Equal(x.X, y.X)
		})
	}
	if !same(a, b) {
		t.Error("two calls with the same seed differ")
	}
	if same(a, other) {
		t.Error("two seeds give the same conformers to the last bit")
	}
}

// Max, Window and the order are kept: the lowest first, none above the window.
func TestCapWindowOrder(t *testing.T) {
	m := parse(t, "OCCCCCO")
	o := Defaults()
	o.Max, o.Window = 15, 6*units.KcalPerMol
	res, err := Conformers(context.Background(), m, "diol", o)
	if err != nil {
		t.Fatal(err)
	}
	if len(res.Conformers) == 0 || len(res.Conformers) > o.Max {
		t.Fatalf("%d conformers, want 1 to %d", len(res.Conformers), o.Max)
	}
	for k, c := range res.Conformers {
		if above := c.Energy - res.Conformers[0].Energy; above < 0 || above > o.Window {
			t.Errorf("conformer %d lies %.2f kcal/mol above the first", k+1, above/units.KcalPerMol)
		}
	}
}

// A given geometry joins the search: one that no torsion table knows is kept
// as what it relaxes to.
func TestGivenStart(t *testing.T) {
	m, res := conformers(t, "CCCC")
	o := Defaults()
	o.Max = 60
	o.Start = [][]float64{slices.Clone(res.Conformers[1].X)}
	with, err := Conformers(context.Background(), m, "butane", o)
	if err != nil {
		t.Fatal(err)
	}
	if len(with.Conformers) != len(res.Conformers) || with.Starts != res.Starts+1 {
		t.Errorf("%d conformers of %d starts, want %d of %d", len(with.Conformers), with.Starts,
			len(res.Conformers), res.Starts+1)
	}
	// Hydrogens may have any order: here two of a CH2 group change places.
	x := o.Start[0]
	for d := range 3 {
		x[3*7+d], x[3*8+d] = x[3*8+d], x[3*7+d]
	}
	if swapped, err := Conformers(context.Background(), m, "butane", o); err != nil || swapped.Relaxed != with.Relaxed {
		t.Errorf("a start with two hydrogens exchanged: %d relaxed (%v), want %d", swapped.Relaxed, err, with.Relaxed)
	}
	l := parse(t, "N[C@@H](C)C(=O)O")
	_, other := conformers(t, "N[C@H](C)C(=O)O")
	o.Start = [][]float64{other.Conformers[0].X}
	if _, err := Conformers(context.Background(), l, "ala", o); err == nil || !strings.Contains(err.Error(), "opposite") {
		t.Errorf("a start of the other hand: %v, want a refusal", err)
	}
}

// MirrorImages doubles the chiral shapes of an achiral molecule and nothing else.
func TestMirrorImages(t *testing.T) {
	for _, c := range []struct {
		smiles string
		want   int // staggered forms counted on paper: a, g+, g-; and none for a labelled centre
	}{
		{"CCCC", 3}, {"CCF", 1},
	} {
		res, err := Conformers(context.Background(), parse(t, c.smiles), "x", Spread())
		if err != nil {
			t.Fatal(err)
		}
		if len(res.Conformers) != c.want {
			t.Errorf("%s: %d conformers, want %d", c.smiles, len(res.Conformers), c.want)
		}
	}
}

// What cannot be is refused with the atom's name, and never built wrong.
func TestRefusals(t *testing.T) {
	for _, c := range []struct{ smiles, wanted string }{
		{"CC(F)Cl", "stereo of 1"},
		{"CC.CC", "2 parts"},
		{"CC1(C)[C@@H]2CC[C@]1(C)C(=O)C2", "could not embed"}, // camphor with one bridgehead turned over
	} {
		m := parse(t, c.smiles)
		_, err := Conformers(context.Background(), m, "x", Defaults())
		if err == nil || !strings.Contains(err.Error(), c.wanted) {
			t.Errorf("%s: %v, want an error with %q", c.smiles, err, c.wanted)
		}
	}
}

// Long chains and large molecules, beyond any grid: an answer in the count of
// starts that was asked for, with the stated stereo.
func TestLargeMolecules(t *testing.T) {
	for _, c := range []struct {
		name, smiles string
		rotors       int // at least
		atoms        int // at least
	}{
		{"hexacontane", strings.Repeat("C", 60), 50, 182},
		{"a peptide of 30 alanines", strings.Repeat("N[C@@H](C)C(=O)", 30) + "O", 59, 300},
	} {
		m := parse(t, c.smiles)
		o := Spread()
		o.Max, o.Relaxations = 3, 12
		res, err := Conformers(context.Background(), m, c.name, o)
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		if m.NumAtoms() < c.atoms || m.RotatableBonds() < c.rotors {
			t.Fatalf("%s: %d atoms, %d rotors", c.name, m.NumAtoms(), m.RotatableBonds())
		}
		if len(res.Conformers) == 0 || res.Complete || res.Starts > 12+mostRuns {
			t.Errorf("%s: %d conformers of %d starts, complete %v", c.name, len(res.Conformers), res.Starts, res.Complete)
		}
		for _, x := range res.Conformers {
			if err := m.StereoMatches(x.X); err != nil {
				t.Errorf("%s: %v", c.name, err)
			}
		}
	}
}

// Configurations that no ring can hold are refused after a bounded number of
// attempts, or were dropped with a warning when the molecule was read.
func TestImpossibleRings(t *testing.T) {
	for _, text := range []string{
		"C1CC2=CC1CC2",                       // a double bond at the bridgehead of norbornane: J. Bredt, Justus Liebigs Ann. Chem. 1924, 437, 1
		"C1CC[C@H]2[C@@H]3CC[C@H]2[C@@H]1C3", // whichever way: it has an end
		"C12C3C1C23", "C1CC/C=C/C1", "C1CCC/C=C/CC1",
	} {
		m := parse(t, text)
		isomers, err := m.Isomers(8)
		if err != nil {
			t.Fatal(err)
		}
		o := Defaults()
		o.Max = 10
		res, err := Conformers(context.Background(), isomers[0], text, o)
		var e *EmbedError
		if err != nil && !errors.As(err, &e) {
			t.Errorf("%s: %v", text, err)
		}
		if err == nil && len(res.Conformers) == 0 {
			t.Errorf("%s: neither conformers nor an error", text)
		}
	}
}

func TestOptionsCheck(t *testing.T) {
	for _, c := range []struct {
		change func(*Options)
		wanted string
	}{
		{func(*Options) {}, ""},
		{func(o *Options) { o.Max = 0 }, "Max 0"},
		{func(o *Options) { o.Window = math.NaN() }, "window"},
		{func(o *Options) { o.EnergyScale = 0 }, "energy scale"},
		{func(o *Options) { o.Relaxations = -1 }, "-1 relaxations"},
	} {
		o := Defaults()
		c.change(&o)
		err := o.Check()
		if c.wanted == "" && err == nil {
			continue
		}
		if err == nil || c.wanted == "" || !strings.Contains(err.Error(), c.wanted) {
			t.Errorf("%v, want an error with %q", err, c.wanted)
		}
	}
}

func TestStopsWithContext(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Conformers(ctx, parse(t, "CCCC"), "x", Defaults()); !errors.Is(err, context.Canceled) {
		t.Errorf("error %v, want %v", err, context.Canceled)
	}
}

func ExampleConformers() {
	m, _, err := smiles.Parse("CCCC")
	if err != nil {
		fmt.Println(err)
		return
	}
	res, err := Conformers(context.Background(), m, "butane", Defaults())
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, c := range res.Conformers {
		phi := geom.Dihedral(c.X, 0, 1, 2, 3) * 180 / math.Pi
		fmt.Printf("anti: %v\n", math.Abs(phi) > 150)
	}
	// Output:
	// anti: true
	// anti: false
}

// BenchmarkConformers reports seconds for one ligand and conformers of it.
func BenchmarkConformers(b *testing.B) {
	for _, text := range []string{"COc1cccc(c1)-c1ccnc(NC2CC2)n1", "CC(C)Oc1cccc(c1)-c1ccnc(NCC2CCOCC2)n1"} {
		m := parse(b, text)
		b.Run("ligand="+text, func(b *testing.B) {
			n := 0
			for b.Loop() {
				res, err := Conformers(context.Background(), m, text, Defaults())
				if err != nil {
					b.Fatal(err)
				}
				n = len(res.Conformers)
			}
			b.ReportMetric(float64(n), "conformers")
		})
	}
}
