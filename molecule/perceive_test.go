package molecule_test

import (
	"math"
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"

	"torsieve/internal/element"
	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/molecule/load"
	"torsieve/molecule/smiles"
)

// published reads structures with their published bonds and SMILES (sources in
// testdata/reference/formats/README.md).
func published(t *testing.T) (records []load.Record) {
	t.Helper()
	r, err := load.Open("../testdata/reference/formats/conformers.sdf.gz", load.Options{})
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	for {
		rec, err := r.Next()
		if err != nil {
			break
		}
		if rec.Err != nil {
			t.Fatal(rec.Err)
		}
		records = append(records, rec)
	}
	if len(records) != 180 {
		t.Fatalf("%d records, want 180", len(records))
	}
	return records
}

// Positions and the total charge alone give the published molecule, stereo
// included. Of a charged one another resonance form may come out, with the
// charge at another atom of an amidine.
func TestPerceiveFindsPublishedMolecules(t *testing.T) {
	charged, other := 0, 0
	for _, rec := range published(t) {
		want := rec.Mol
		m, warnings, err := molecule.Perceive(want.Atoms(), rec.X, want.Charge(), 0)
		if err != nil {
			t.Errorf("%s: %v", rec.ID, err)
			continue
		}
		if want.Charge() != 0 {
			charged++
		}
		if m.SMILES() == want.SMILES() && len(warnings) == 0 {
			continue
		}
		if want.Charge() != 0 && m.Formula() == want.Formula() {
			other++
			t.Logf("%s: %s drawn as %s", rec.ID, want.SMILES(), m.SMILES())
			continue
		}
		t.Errorf("%s: got %s, want %s; %q", rec.ID, m.SMILES(), want.SMILES(), warnings)
	}
	if t.Logf("%d charged molecules, %d drawn in another way", charged, other); other > charged/3 {
		t.Error("too many charged molecules are drawn in another way")
	}
}

// The configuration that coordinates have is the one of the published SMILES,
// where that states any.
func TestCoordinatesHaveThePublishedConfiguration(t *testing.T) {
	for _, rec := range published(t) {
		for _, w := range rec.Warnings {
			t.Errorf("%s: %s", rec.ID, w)
		}
		if err := rec.Mol.StereoMatches(rec.X); err != nil {
			t.Errorf("%s: %v", rec.ID, err)
		}
		m, _, err := smiles.Parse(rec.Fields[0].Value)
		if err != nil {
			t.Errorf("%s: %v", rec.ID, err)
			continue
		}
		if m.Formula() != rec.Mol.Formula() || m.Charge() != rec.Mol.Charge() {
			t.Errorf("%s: SMILES has %s, the record %s", rec.ID, m.Formula(), rec.Mol.Formula())
		}
	}
}

// Neither the order of the atoms nor the place and direction of the molecule
// matters; a mirror image has the other configuration.
func TestPerceiveLaws(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	for n, rec := range published(t) {
		if n%6 != 0 || rec.Mol.Charge() != 0 {
			continue
		}
		order := rng.Perm(rec.Mol.NumAtoms())
		var atoms []molecule.Atom
		var x, mirrored []float64
		sin, cos := math.Sincos(rng.Float64() * 6)
		for _, i := range order {
			a, b, c := rec.X[3*i], rec.X[3*i+1], rec.X[3*i+2]
			atoms = append(atoms, rec.Mol.Atom(i))
			x = append(x, cos*a-sin*c+11, sin*a+cos*c-5, -b+3)
			mirrored = append(mirrored, -a, b, c)
		}
		m, _, err := molecule.Perceive(atoms, x, 0, 0)
		if err != nil || m.SMILES() != rec.Mol.SMILES() {
			t.Errorf("%s: moved and renumbered: error %v", rec.ID, err)
		}
		image, _, err := molecule.Perceive(atoms, mirrored, 0, 0)
		if err != nil || (image.SMILES() != rec.Mol.SMILES()) != rec.Mol.Chiral() {
			t.Errorf("%s: mirrored: error %v, %s", rec.ID, err, image.SMILES())
		}
	}
}

// Small molecules with bond lengths in angstrom (CRC Handbook of Chemistry and
// Physics, section 9, from memory, rounded) and their usual Lewis structures.
func TestPerceiveSmallMolecules(t *testing.T) {
	for _, tc := range []struct {
		name, atoms  string
		charge, mult int
		want         string
	}{
		{"nitrogen", "N 0 0 0 N 0 0 1.10", 0, 0, "N#N"},
		{"carbon monoxide", "C 0 0 0 O 0 0 1.13", 0, 0, "[C-]#[O+]"},
		{"carbon dioxide", "C 0 0 0 O 0 0 1.16 O 0 0 -1.16", 0, 0, "O=C=O"},
		{"hydrogen cyanide", "C 0 0 0 N 0 0 1.15 H 0 0 -1.07", 0, 0, "C#N"},
		{"hydrogen isocyanide", "N 0 0 0 C 0 0 1.17 H 0 0 -0.99", 0, 0, "[C-]#[NH+]"},
		{"cyanide", "C 0 0 0 N 0 0 1.18", -1, 0, "[C-]#N"},
		{"azide", "N 0 0 0 N 0 0 1.18 N 0 0 -1.18", -1, 0, "[N-]=[N+]=[N-]"},
		{"sulfur dioxide", "S 0 0 0 O 1.23 0 0.72 O -1.23 0 0.72", 0, 0, "O=S=O"},
		{"ozone", "O 0 0 0 O 1.09 0 0.67 O -1.09 0 0.67", 0, 0, "[O-][O+]=O"},
		{"hydroxide", "O 0 0 0 H 0 0 0.97", -1, 0, "[OH-]"},
		{"hydroxyl", "O 0 0 0 H 0 0 0.97", 0, 2, "[OH]"},
		{"oxygen, triplet", "O 0 0 0 O 0 0 1.21", 0, 3, "[O][O]"},
		{"hydrogen", "H 0 0 0 H 0 0 0.74", 0, 0, "[H][H]"},
		{"lithium fluoride ions", "Li 0 0 0 F 0 0 4", 0, 0, "[Li+].[F-]"},
		{"proton", "H 0 0 0", 1, 0, "[H+]"},
		{"helium", "He 0 0 0", 0, 0, "[He]"},
		{"water far from sodium", "O 0 0 0 H 0.76 0 0.59 H -0.76 0 0.59 Na 0 0 -5", 1, 0, "O.[Na+]"},
		{"ammonium", "N 0 0 0 H 0.59 0.59 0.59 H -0.59 -0.59 0.59 H -0.59 0.59 -0.59 H 0.59 -0.59 -0.59", 1, 0, "[NH4+]"},
		{"tetrafluoroborate", "B 0 0 0 F 0.81 0.81 0.81 F -0.81 -0.81 0.81 F -0.81 0.81 -0.81 F 0.81 -0.81 -0.81", -1, 0, "F[B-](F)(F)F"},
		{"perchlorate", "Cl 0 0 0 O 0.83 0.83 0.83 O -0.83 -0.83 0.83 O -0.83 0.83 -0.83 O 0.83 -0.83 -0.83", -1, 0, "[O-]Cl(=O)(=O)=O"},
		{"sulfate", "S 0 0 0 O 0.86 0.86 0.86 O -0.86 -0.86 0.86 O -0.86 0.86 -0.86 O 0.86 -0.86 -0.86", -2, 0, "[O-]S(=O)(=O)[O-]"},
		{"hexafluorophosphate", "P 0 0 0 F 1.6 0 0 F -1.6 0 0 F 0 1.6 0 F 0 -1.6 0 F 0 0 1.6 F 0 0 -1.6", -1, 0, "F[P-](F)(F)(F)(F)F"},
		{"xenon difluoride", "Xe 0 0 0 F 0 0 1.98 F 0 0 -1.98", 0, 0, "F[Xe]F"},
		{"carbonate", "C 0 0 0 O 1.29 0 0 O -0.645 1.117 0 O -0.645 -1.117 0", -2, 0, "[O-]C(=O)[O-]"},
		{"nitrate", "N 0 0 0 O 1.25 0 0 O -0.625 1.083 0 O -0.625 -1.083 0", -1, 0, "[O-][N+](=O)[O-]"},
		// One bond per electron pair cannot show the bridges (1.77, 1.33, 1.19).
		{"diborane", "B 0 0 0.885 B 0 0 -0.885 H 0 0.99 0 H 0 -0.99 0 " +
			"H 1.03 0 1.48 H -1.03 0 1.48 H 1.03 0 -1.48 H -1.03 0 -1.48", 0, 0, "B.B"},
		// The far carbons of the cage are 1.87 apart, nearer than some bonds.
		{"bicyclo[1.1.1]pentane", "C 0 0 0.935 C 0 0 -0.935 H 0 0 2.03 H 0 0 -2.03 " +
			"C 1.23 0 0 H 1.8 0 0.92 H 1.8 0 -0.92 C -0.615 1.065 0 H -0.9 1.56 0.92 H -0.9 1.56 -0.92 " +
			"C -0.615 -1.065 0 H -0.9 -1.56 0.92 H -0.9 -1.56 -0.92", 0, 0, "C1C2CC1C2"},
	} {
		t.Run(tc.name, func(t *testing.T) {
			atoms, x := parseAtoms(t, tc.atoms)
			m, _, err := molecule.Perceive(atoms, x, tc.charge, tc.mult)
			if err != nil {
				t.Fatal(err)
			}
			want, _, err := smiles.Parse(tc.want)
			if err != nil {
				t.Fatal(err)
			}
			if m.SMILES() != want.SMILES() {
				t.Errorf("got %s, want %s", m.SMILES(), want.SMILES())
			}
		})
	}
}

func TestPerceiveRefusals(t *testing.T) {
	for _, tc := range []struct {
		atoms        string
		charge, mult int
		want         string
	}{
		{"C 0 0 0 C 0 0 0.3", 0, 0, "atoms 1 (C) and 2 (C) are 0.300 angstrom apart, closer than any bond"},
		{"H 0 0 0", 2, 0, "charge +2 is more than all the nuclei have"},
		{"O 0 0 0 H 0 0 0.97", 0, 1, "9 electrons (charge +0) cannot have multiplicity 1"},
		{"H 0 0 0 H 0 0 0.74", 0, 5, "2 electrons (charge +0) cannot have multiplicity 5"},
		{"He 0 0 0 He 0 0 5", -7, 0, "no bond orders and formal charges fit a total charge of -7"},
	} {
		atoms, x := parseAtoms(t, tc.atoms)
		if _, _, err := molecule.Perceive(atoms, x, tc.charge, tc.mult); err == nil || err.Error() != tc.want {
			t.Errorf("%s: error %v, want %s", tc.atoms, err, tc.want)
		}
	}
}

// The wrong charge is not taken in silence.
func TestPerceiveDoubts(t *testing.T) {
	atoms, x := parseAtoms(t, "O 0 0 0 H 0 0 0.97")
	_, warnings, err := molecule.Perceive(atoms, x, 0, 0)
	if err != nil || !strings.Contains(strings.Join(warnings, ";"), "atom 1 (O) is left with an unpaired electron") {
		t.Errorf("warnings %q, error %v", warnings, err)
	}
}

func parseAtoms(t *testing.T, s string) (atoms []molecule.Atom, x []float64) {
	t.Helper()
	words := strings.Fields(s)
	for i := 0; i < len(words); i += 4 {
		z, ok := element.Number(words[i])
		if !ok {
			t.Fatal(words[i])
		}
		atoms = append(atoms, molecule.Atom{Number: z})
		for _, w := range words[i+1 : i+4] {
			v, err := strconv.ParseFloat(w, 64)
			if err != nil {
				t.Fatal(err)
			}
			x = append(x, v*units.Angstrom)
		}
	}
	return atoms, x
}
