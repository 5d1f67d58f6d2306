package screen

import (
	"errors"
	"slices"
	"strings"
	"testing"

	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/molecule/load"
	"torsieve/molecule/smiles"
)

// What makes no ensemble is refused with the reason.
func TestIntakeRefuses(t *testing.T) {
	for _, tc := range []struct{ smiles, reason string }{
		{"[CH2]CC", "odd number of electrons (25)"},
		{"[H+]", "no electrons"},
		{"[O][O]", "multiplicity 3"},
		{"[Na+].[O-]C(=O)C", "2 fragments (Na+ + C2H3O2-)"},
		{"C[Zn]C", "Zn: metals and their complexes"},
		{"[Na+]", "Na: metals"},
		{"[Cl-].[Cl-].[Fe+2]", "Fe: metals"},
		{strings.Repeat("C", 200), "602 atoms are over the limit of 500"},
		{"CC(O)F", "stereo not stated: centre C2"},
		{"CC=CC", "stereo not stated: double bond C2=C3"},
	} {
		l := ligandsOf(t, NewIntake(), tc.smiles)[0]
		if l.Err == nil || l.Status != Refused || !strings.Contains(l.Err.Error(), tc.reason) {
			t.Errorf("%.30s: status %q, error %v: want %q", tc.smiles, l.Status, l.Err, tc.reason)
		}
	}
}

func TestIntakeTakes(t *testing.T) {
	for _, s := range []string{"[He]", "[H][H]", "C", "C[N+](=O)[O-]", "[NH3+]CC(=O)[O-]", "C[C@H](O)F", "C/C=C/C", "[nH]1cccc1", "[Si](C)(C)(C)C", "B(O)(O)c1ccccc1"} {
		for _, l := range ligandsOf(t, NewIntake(), s) {
			if l.Err != nil || l.SMILES == "" {
				t.Errorf("%s: %v, structure %q", s, l.Err, l.SMILES)
			}
		}
	}
}

// Counter-ions of the main groups go, with a word; metal complexes are never
// taken apart.
func TestIntakeStripsSalts(t *testing.T) {
	for _, tc := range []struct{ smiles, formula, warning, reason string }{
		{"[Na+].CC(=O)[O-]", "C2H3O2", "salt: kept C2H3O2-, dropped Na+", ""},
		{"CC[NH3+].[Cl-]", "C2H8N", "salt: kept C2H8N+, dropped Cl-", ""},
		{"O.O.CCO", "C2H6O", "salt: kept C2H6O, dropped H2O + H2O", ""},
		{"[Cl-].[Cl-].[Fe+2]", "", "", "Fe: metals"},
		{"[Na+].[Cl-]", "", "", "none of them organic"},
	} {
		in := NewIntake()
		in.StripSalts = true
		l := ligandsOf(t, in, tc.smiles)[0]
		if tc.reason != "" {
			if l.Err == nil || !strings.Contains(l.Err.Error(), tc.reason) {
				t.Errorf("%s: %v, want %q", tc.smiles, l.Err, tc.reason)
			}
			continue
		}
		if l.Err != nil || l.Mol.Formula() != tc.formula || !slices.Contains(l.Warnings, tc.warning) {
			t.Errorf("%s: %v, %s, %q", tc.smiles, l.Err, l.Mol.Formula(), l.Warnings)
		}
	}
}

// The coordinates of the fragment that stays come along.
func TestIntakeStripsCoordinates(t *testing.T) {
	m := parsed(t, "[F-].C")
	in := NewIntake()
	in.StripSalts = true
	x := []float64{50, 50, 50, 0, 0, 0}
	corners := [][3]float64{{1, 1, 1}, {1, -1, -1}, {-1, 1, -1}, {-1, -1, 1}}
	for _, c := range corners {
		x = append(x, 1.2*c[0], 1.2*c[1], 1.2*c[2])
	}
	l := in.Take("a.sdf", load.Record{Mol: m, X: x, ID: "a"})[0]
	if l.Err != nil || len(l.Starts) != 1 || !slices.Equal(l.Starts[0], x[3:]) {
		t.Errorf("%v, starts %v", l.Err, l.Starts)
	}
}

// Unstated stereo becomes all isomers, each with the parent's id and a number.
func TestIntakeExpandsStereo(t *testing.T) {
	in := NewIntake()
	in.ExpandStereo = true
	out := ligandsOf(t, in, "CC(O)F", "CC(F)C(F)C", "CCO")
	var ids, structures []string
	for i, l := range out {
		if l.Err != nil || l.Order != i {
			t.Errorf("%s: %v, place %d of %d", l.ID, l.Err, l.Order, i)
		}
		ids, structures = append(ids, l.ID), append(structures, l.SMILES)
	}
	// 2,3-difluorobutane has three isomers: two enantiomers and a meso form.
	want := []string{"CC(O)F~1", "CC(O)F~2", "CC(F)C(F)C~1", "CC(F)C(F)C~2", "CC(F)C(F)C~3", "CCO"}
	if !slices.Equal(ids, want) {
		t.Errorf("ids %q, want %q", ids, want)
	}
	slices.Sort(structures)
	if len(slices.Compact(structures)) != len(want) {
		t.Errorf("some isomers are alike: %q", structures)
	}
	if out[0].Parent != "CC(O)F" || !strings.Contains(strings.Join(out[0].Warnings, ";"), "isomer 1 of 2") {
		t.Errorf("the first isomer: parent %q, warnings %q", out[0].Parent, out[0].Warnings)
	}
}

func TestIntakeRefusesTooManyIsomers(t *testing.T) {
	in := NewIntake()
	in.ExpandStereo = true
	l := ligandsOf(t, in, "CC(F)C(F)C(F)C(F)C(F)Cl")[0]
	if l.Err == nil || l.Status != Refused {
		t.Errorf("32 isomers: %v", l.Err)
	}
}

// A repeated id is renamed, and both places are named.
func TestIntakeNamesOnce(t *testing.T) {
	in := NewIntake()
	var ids []string
	var last *Ligand
	for i, id := range []string{"lig", "lig-2", "lig", "lig", ""} {
		m := parsed(t, "CCO")
		last = in.Take("a.smi", load.Record{Mol: m, ID: id, Line: i + 1, Record: i + 1})[0]
		ids = append(ids, last.ID)
		if i == 2 {
			if w := strings.Join(last.Warnings, ";"); !strings.Contains(w, "a.smi:1") || !strings.Contains(w, "a.smi:3") {
				t.Errorf("the warning names not both places: %q", w)
			}
		}
	}
	if want := []string{"lig", "lig-2", "lig-3", "lig-4", "record-5"}; !slices.Equal(ids, want) {
		t.Errorf("ids %q, want %q", ids, want)
	}
}

// A record that could not be read stays in the list.
func TestIntakeKeepsBadRecords(t *testing.T) {
	cause := &molecule.ParseError{File: "a.smi", Line: 4, Record: 3, ID: "odd", Msg: "ring bond 1 is never closed"}
	l := NewIntake().Take("a.smi", load.Record{Line: 4, Record: 3, Err: cause})[0]
	if l.ID != "odd" || l.Status != Unreadable || !errors.Is(l.Err, cause) {
		t.Errorf("%q, %s, %v", l.ID, l.Status, l.Err)
	}
}

// Shapes that come with the input are starts, unless atoms lie on one another.
func TestIntakeStarts(t *testing.T) {
	m := parsed(t, "[H][H]")
	near := []float64{0, 0, 0, 0, 0, 0.1 * units.Angstrom}
	far := []float64{0, 0, 0, 0, 0, 0.74 * units.Angstrom}
	if l := NewIntake().Take("a.sdf", load.Record{Mol: m, X: near, ID: "a"})[0]; l.Err == nil || !strings.Contains(l.Err.Error(), "same place") {
		t.Errorf("atoms on one another: %v", l.Err)
	}
	if l := NewIntake().Take("a.sdf", load.Record{Mol: m, X: far, ID: "a"})[0]; l.Err != nil || len(l.Starts) != 1 {
		t.Errorf("%v, %d starts", l.Err, len(l.Starts))
	}
}

func TestWarnOfCharges(t *testing.T) {
	for _, tc := range []struct{ solvent, smiles, want string }{
		{"", "[NH3+]CC(=O)[O-]", "zwitterion"},
		{"", "CC(=O)[O-]", "charge -1 in the gas phase"},
		{"", "C[N+](=O)[O-]", ""},
		{"", "C[S+](C)[O-]", ""},
		{"", "CCO", ""},
		{"", "CC(=O)O", ""},
		{"water", "[NH3+]CC(=O)[O-]", ""},
		{"hexane", "CC(=O)O", ""},
		// near pH 7, by pKa (common practice): acids below 5, amines above 9
		{"water", "CC(=O)O", "carboxylic acid is drawn neutral"},
		{"water", "CS(=O)(=O)O", "sulfonic acid is drawn neutral"},
		{"water", "COP(=O)(O)OC", "acid of phosphorus is drawn neutral"},
		{"water", "CCN(C)C", "aliphatic amine is drawn neutral"},
		{"water", "NC(=N)NC", "amidine or guanidine is drawn neutral"},
		{"water", "CC(=O)NC", ""},                 // amide
		{"water", "CN(C)c1ccccc1", ""},            // aniline
		{"water", "C[N+](C)(C)C", ""},             // no proton to take
		{"water", "CC[NH+](C)C", ""},              // drawn as it is
		{"water", "CS(=O)(=O)NC", ""},             // sulfonamide
		{"water", "CC(=O)OC", ""},                 // ester
		{"water", "Oc1ccccc1", ""},                // phenol, pKa 10
		{"water", "c1ccncc1", ""},                 // pyridine, pKa 5
		{"water", "CN1CCOCC1", "aliphatic amine"}, // morpholine, pKa 7.4 and above
	} {
		in := NewIntake()
		in.Solvent = tc.solvent
		got := strings.Join(ligandsOf(t, in, tc.smiles)[0].Warnings, ";")
		if tc.want == "" && got != "" || !strings.Contains(got, tc.want) {
			t.Errorf("%s in %q: warnings %q, want %q", tc.smiles, tc.solvent, got, tc.want)
		}
	}
}

func parsed(t *testing.T, s string) *molecule.Molecule {
	t.Helper()
	m, _, err := smiles.Parse(s)
	if err != nil {
		t.Fatal(err)
	}
	return m
}
