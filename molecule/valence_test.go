package molecule_test

import (
	"strings"
	"testing"

	"torsieve/molecule"
)

// One heavy atom with n single bonds to methyl groups, hydrogens filled up:
// usual valences as OpenSMILES 1.0 section 3.1.5 lists them, and those of the
// isoelectronic neutral atom for charged ones.
func TestFilledHydrogens(t *testing.T) {
	for _, tc := range []struct{ number, charge, bonds, want int }{
		{5, 0, 0, 3}, {6, 0, 0, 4}, {6, 0, 3, 1}, {7, 0, 0, 3}, {7, 0, 3, 0}, {8, 0, 1, 1},
		{15, 0, 0, 3}, {15, 0, 4, 1}, {16, 0, 0, 2}, {16, 0, 3, 1}, {16, 0, 5, 1}, {17, 0, 0, 1}, {17, 0, 1, 0},
		{7, 1, 2, 2}, {7, -1, 1, 1}, {8, 1, 1, 2}, {8, -1, 0, 1}, {6, 1, 2, 1}, {6, -1, 2, 1}, {5, -1, 2, 2}, {14, 0, 2, 2},
		{11, 0, 0, 0}, {11, 1, 0, 0}, {26, 2, 0, 0}, {10, 0, 0, 0},
	} {
		b := molecule.NewBuilder()
		b.AddAtom(molecule.BuilderAtom{Number: tc.number, Charge: tc.charge, Hydrogens: molecule.FillHydrogens})
		for range tc.bonds {
			if _, err := b.AddBond(0, b.AddAtom(carbon()), 1); err != nil {
				t.Fatal(err)
			}
		}
		m, _, err := b.Build()
		if err != nil {
			t.Errorf("%+v: %v", tc, err)
			continue
		}
		if got := m.NumAtoms() - 1 - 4*tc.bonds; got != tc.want {
			t.Errorf("atomic number %d, charge %+d, %d bonds: %d hydrogens, want %d", tc.number, tc.charge, tc.bonds, got, tc.want)
		}
	}
}

// Multiplicities of small species (Herzberg, Electronic Spectra of Polyatomic
// Molecules, 1966, for the radicals), as far as a graph can tell.
func TestMultiplicity(t *testing.T) {
	for s, want := range map[string]int{
		"C": 1, "[CH3]": 2, "[CH2]": 3, "[O]": 3, "[N]": 4, "[H]": 2, "[H+]": 1, "[He]": 1, "[Na]": 2, "[Na+]": 1, "[Cl]": 2, "[Cl-]": 1,
		"[N]=O": 2, "[O][O]": 3, "[OH]": 2, "[C-]#[O+]": 1, "[NH4+]": 1, "c1cccc[c]1": 2, "CC(C)(C)N(C(C)(C)C)[O]": 2,
		"[Fe+2]": 1, "[Cu+2]": 2, "OC(=O)c1ccccc1.[Na]": 2, "F[P-](F)(F)(F)(F)F": 1, "Cl(=O)(=O)(=O)[O-]": 1, "C[Mg]Br": 1,
	} {
		if m := parse(t, s); m.Multiplicity() != want {
			t.Errorf("%s: multiplicity %d, want %d", s, m.Multiplicity(), want)
		}
	}
}

// Two ways of drawing one electron structure are one molecule.
func TestNormalisedDrawings(t *testing.T) {
	for _, pair := range [][2]string{
		{"CN(=O)=O", "C[N+](=O)[O-]"},
		{"CN=N#N", "CN=[N+]=[N-]"},
		{"C=N#N", "C=[N+]=[N-]"},
		{"CN(C)(C)=O", "C[N+](C)(C)[O-]"},
		{"O=n1ccccc1", "[O-][n+]1ccccc1"},
		{"CC#N=O", "CC#[N+][O-]"},
		{"C[S+](C)[O-]", "CS(C)=O"},
		{"C[S+2](C)([O-])[O-]", "CS(C)(=O)=O"},
		{"[O-][Cl+3]([O-])([O-])[O-]", "[O-]Cl(=O)(=O)=O"},
		{"C[P+](C)(C)[O-]", "CP(C)(C)=O"},
	} {
		if a, b := parse(t, pair[0]).SMILES(), parse(t, pair[1]).SMILES(); a != b {
			t.Errorf("%s is %s, %s is %s", pair[0], a, pair[1], b)
		}
	}
}

func TestBuilderRefusals(t *testing.T) {
	build := func(change func(b *molecule.Builder) error) error {
		b := molecule.NewBuilder()
		b.AddAtom(carbon())
		b.AddAtom(carbon())
		if err := change(b); err != nil {
			return err
		}
		_, _, err := b.Build()
		return err
	}
	for want, change := range map[string]func(b *molecule.Builder) error{
		"atom 2 is bonded to itself": func(b *molecule.Builder) error { _, err := b.AddBond(1, 1, 1); return err },
		"has two bonds to atom 2": func(b *molecule.Builder) error {
			b.AddBond(0, 1, 1)
			_, err := b.AddBond(1, 0, 1)
			return err
		},
		"has a bond of order 5": func(b *molecule.Builder) error { _, err := b.AddBond(0, 1, 5); return err },
		"has no element": func(b *molecule.Builder) error {
			b.AddAtom(molecule.BuilderAtom{Number: 119})
			return nil
		},
		"has charge +7, which is not possible": func(b *molecule.Builder) error {
			b.AddAtom(molecule.BuilderAtom{Number: 6, Charge: 7})
			return nil
		},
	} {
		if err := build(change); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%v, want %q", err, want)
		}
	}
	if _, _, err := molecule.NewBuilder().Build(); err == nil {
		t.Error("a molecule without atoms")
	}
}

func TestSubset(t *testing.T) {
	m := parse(t, "C[C@H](N)C(=O)[O-].C[N+](C)(C)C/C=C/Cl")
	for f, want := range []string{"C[C@H](N)C([O-])=O", "C[N+](C)(C)C/C=C/Cl"} {
		part, err := m.Subset(m.Fragments()[f])
		if err != nil {
			t.Fatal(err)
		}
		if got, again := part.SMILES(), parse(t, want).SMILES(); got != again {
			t.Errorf("fragment %d is %s, want %s", f, got, again)
		}
	}
	if _, err := m.Subset([]int{0, 1}); err == nil || !strings.Contains(err.Error(), "would be cut") {
		t.Errorf("a cut bond: %v", err)
	}
}

func TestTopologicalDistance(t *testing.T) {
	m := parse(t, "CC1CCCCC1.O")
	for _, tc := range [][3]int{{0, 0, 0}, {0, 1, 1}, {0, 4, 4}, {0, 6, 2}, {2, 5, 3}, {0, 7, -1}} {
		if got := m.TopologicalDistance(tc[0], tc[1]); got != tc[2] {
			t.Errorf("from %d to %d: %d, want %d", tc[0], tc[1], got, tc[2])
		}
	}
}
