package molecule_test

import (
	"encoding/csv"
	"encoding/json"
	"math/rand/v2"
	"os"
	"strconv"
	"testing"

	"torsieve/molecule"
	"torsieve/molecule/smiles"
)

func parse(t testing.TB, s string) *molecule.Molecule {
	t.Helper()
	m, _, err := smiles.Parse(s)
	if err != nil {
		t.Fatalf("%s: %v", s, err)
	}
	return m
}

// A ligand is a line of testdata/reference/recovery/ligands.csv.
type ligand struct {
	id, smiles, formula            string
	charge, rotatable, rings       int
	tetrahedralStereo, doubleBonds int
}

func ligands(t testing.TB) []ligand {
	t.Helper()
	f, err := os.Open("../testdata/reference/recovery/ligands.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var list []ligand
	for _, row := range rows[1:] {
		var n [5]int
		for i := range n {
			if n[i], err = strconv.Atoi(row[3+i]); err != nil {
				t.Fatal(err)
			}
		}
		list = append(list, ligand{row[0], row[1], row[2], n[0], n[1], n[2], n[3], n[4]})
	}
	if len(list) != 126 {
		t.Fatalf("%d ligands, want 126", len(list))
	}
	return list
}

// vectorSMILES returns the strings of testdata/reference/formats/smiles.json
// that are molecules.
func vectorSMILES(t testing.TB) []string {
	t.Helper()
	data, err := os.ReadFile("../testdata/reference/formats/smiles.json")
	if err != nil {
		t.Fatal(err)
	}
	var v struct {
		Molecules []struct{ SMILES, Expect string }
		Relations map[string][][]string
	}
	if err := json.Unmarshal(data, &v); err != nil {
		t.Fatal(err)
	}
	var list []string
	for _, m := range v.Molecules {
		if m.Expect != "refuse" {
			list = append(list, m.SMILES)
		}
	}
	return list
}

// shuffled builds m again with its atoms and bonds in another order, all bonds
// drawn in Kekule form.
func shuffled(t testing.TB, m *molecule.Molecule, random *rand.Rand) *molecule.Molecule {
	t.Helper()
	at := random.Perm(m.NumAtoms()) // new index of each atom
	old := make([]int, len(at))
	for i, n := range at {
		old[n] = i
	}
	b := molecule.NewBuilder()
	for _, i := range old {
		a := m.Atom(i)
		b.AddAtom(molecule.BuilderAtom{Number: a.Number, Charge: a.Charge, Isotope: a.Isotope, Radical: a.Radical})
	}
	for _, k := range random.Perm(len(m.Bonds())) {
		bond := m.Bond(k)
		if _, err := b.AddBond(at[bond.B], at[bond.A], bond.Order); err != nil {
			t.Fatal(err)
		}
	}
	for _, c := range m.Centres() {
		order := make([]int, 4)
		for n, j := range c.Neighbours {
			order[n] = molecule.LonePair
			if j != molecule.LonePair {
				order[n] = at[j]
			}
		}
		p := c.Parity
		i, j := random.IntN(4), random.IntN(4)
		if i != j {
			order[i], order[j] = order[j], order[i]
			p = -p
		}
		b.SetCentre(at[c.Atom], order, p)
	}
	for _, d := range m.StereoBonds() {
		if d.Known {
			b.SetDoubleBond(at[d.K], at[d.J], at[d.B], at[d.A], d.Cis)
		}
	}
	again, _, err := b.Build()
	if err != nil {
		t.Fatal(err)
	}
	return again
}
