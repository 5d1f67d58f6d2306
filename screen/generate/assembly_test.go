package generate

import (
	"context"
	"math"
	"testing"

	"torsieve/internal/element"
	"torsieve/internal/geom"
	"torsieve/internal/units"
)

func searchOf(t *testing.T, text string) *search {
	t.Helper()
	s, err := newSearch(context.Background(), parse(t, text), text, Defaults())
	if err != nil {
		t.Fatalf("%s: %v", text, err)
	}
	if s.assembly == nil {
		t.Fatalf("%s: %v", text, s.result.Warnings)
	}
	return s
}

var drugs = []string{
	"C[C@@H](NC(=O)c1ccnc(N[C@@H]2CCN(C2)C(=O)COC)c1)c1ccc(OC(F)F)cc1",
	"CC(C)(O)CNC(=O)c1cc(NC(=O)c2ccccc2OC)ccc1O",
	"[O-]C(=O)[C@@H]1CC[NH+](C1)Cc1ccc(OCC2CCOCC2)cc1",
	"CC(N)=[NH2+]",
}

// A structure has exactly the angles of its recipe, and the right stereo.
func TestAssemblyKeepsAngles(t *testing.T) {
	for _, text := range drugs {
		s := searchOf(t, text)
		x := make([]float64, 3*s.m.NumAtoms())
		for k := range 20 {
			rec, ok := s.sampler.draw(stream(1, text, streamDraw, k), nil, x)
			if !ok {
				t.Errorf("%s: draw %d came to nothing", text, k)
				continue
			}
			for n, turn := range s.assembly.turns {
				got := geom.Dihedral(x, turn.a, turn.b, turn.c, turn.d)
				if off := math.Remainder(got-rec.angles[n], 2*math.Pi); math.Abs(off) > 1e-9 {
					t.Errorf("%s: rotor %d is at %g degrees, want %g", text, n, got/degree, rec.angles[n]/degree)
				}
			}
			if err := s.m.StereoMatches(x); err != nil {
				t.Errorf("%s: %v", text, err)
			}
		}
	}
}

// Bonds come out as long as they are in crystals and the gas phase, within the
// 0.12 angstrom of data/bonds_angles.json (F. H. Allen et al., J. Chem. Soc.
// Perkin Trans. 2 1987, S1, and gas-phase values for bonds to hydrogen).
func TestBondLengths(t *testing.T) {
	table, err := bondLengths()
	if err != nil {
		t.Fatal(err)
	}
	for _, text := range drugs {
		m := parse(t, text)
		o := Defaults()
		o.Max, o.Relaxations = 1, 6
		res, err := Conformers(context.Background(), m, text, o)
		if err != nil {
			t.Fatal(err)
		}
		h := hybrids(m)
		for k, b := range m.Bonds() {
			want := bondLength(table, m, h, k)
			got := geom.Distance(res.Conformers[0].X, b.A, b.B)
			if math.Abs(got-want) > 0.12*units.Angstrom {
				t.Errorf("%s: bond %s-%s is %.3f angstrom, want %.3f", text, atomLabel(m, b.A), atomLabel(m, b.B),
					got/units.Angstrom, want/units.Angstrom)
			}
		}
	}
}

// No two atoms four bonds or more apart are closer than the clash screen says.
func TestDrawsDoNotClash(t *testing.T) {
	s := searchOf(t, drugs[0])
	x := make([]float64, 3*s.m.NumAtoms())
	for k := range 50 {
		if _, ok := s.sampler.draw(stream(3, "x", streamDraw, k), nil, x); ok && s.collides(x) {
			t.Errorf("draw %d has atoms on top of each other", k)
		}
	}
}

func TestClashScreen(t *testing.T) {
	m := parse(t, "CCCCCC")
	s := newClashScreen(m)
	x := make([]float64, 3*m.NumAtoms())
	// Van der Waals radius of carbon 1.70 angstrom (Bondi 1964): contacts from
	// 0.62 * 3.4 = 2.11 angstrom are let through, and cost below 2.89.
	if r := element.VdwRadius(6) / units.Angstrom; math.Abs(r-1.70) > 1e-9 {
		t.Fatalf("radius of carbon %g angstrom, want 1.70", r)
	}
	for _, c := range []struct {
		distance float64 // angstrom
		crowding float64 // angstrom^2
	}{
		{2.0, math.Inf(1)}, {2.2, (2.89 - 2.2) * (2.89 - 2.2)}, {3.0, 0},
	} {
		x[3*5] = c.distance * units.Angstrom
		got := s.between(x, []int{0}, []int{5}) / (units.Angstrom * units.Angstrom)
		if got != c.crowding && math.Abs(got-c.crowding) > 1e-9 {
			t.Errorf("two carbons at %g angstrom: %g, want %g", c.distance, got, c.crowding)
		}
	}
	if got := s.between(x, []int{0}, []int{3}); got != 0 {
		t.Errorf("atoms three bonds apart crowd each other: %g", got)
	}
}
