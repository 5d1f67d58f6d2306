package smiles

import (
	"encoding/json"
	"os"
	"testing"

	"torsieve/molecule"
)

// vectors is testdata/reference/formats/smiles.json: strings with the facts
// that follow from the OpenSMILES specification 1.0 (sections in the file).
type vectors struct {
	Molecules []vector
	Relations struct {
		Same, Enantiomers, Diastereomers, Different [][]string
	}
}

type vector struct {
	ID, SMILES, Expect, Formula string
	Atoms                       int
	HeavyAtoms                  int `json:"heavy_atoms"`
	Charge, Fragments, Rings    int
	AromaticAtoms               int `json:"aromatic_atoms"`
	TetrahedralStereo           int `json:"tetrahedral_stereo"`
	UnstatedTetrahedral         int `json:"unstated_tetrahedral"`
	DoubleBondStereo            int `json:"double_bond_stereo"`
	Isotopes                    []string
	MessageMustName             string `json:"message_must_name"`
}

func readVectors(t testing.TB) vectors {
	t.Helper()
	data, err := os.ReadFile("../../testdata/reference/formats/smiles.json")
	if err != nil {
		t.Fatal(err)
	}
	var v vectors
	if err := json.Unmarshal(data, &v); err != nil {
		t.Fatal(err)
	}
	return v
}

func mustParse(t testing.TB, s string) *molecule.Molecule {
	t.Helper()
	m, _, err := Parse(s)
	if err != nil {
		t.Fatalf("%s: %v", s, err)
	}
	return m
}
