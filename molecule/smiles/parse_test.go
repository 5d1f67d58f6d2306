package smiles

import (
	"testing"

	"torsieve/molecule"
)

func TestFacts(t *testing.T) {
	for _, v := range readVectors(t).Molecules {
		if v.Expect == "refuse" {
			continue
		}
		t.Run(v.ID, func(t *testing.T) {
			m := mustParse(t, v.SMILES)
			check := func(what string, got, want any) {
				if got != want {
					t.Errorf("%s: %s %v, want %v", v.SMILES, what, got, want)
				}
			}
			check("formula", m.Formula(), v.Formula)
			check("atoms", m.NumAtoms(), v.Atoms)
			check("heavy atoms", m.HeavyAtoms(), v.HeavyAtoms)
			check("charge", m.Charge(), v.Charge)
			check("fragments", len(m.Fragments()), v.Fragments)
			check("rings", m.RingCount(), v.Rings)
			aromatic := 0
			for _, a := range m.Atoms() {
				if a.Aromatic {
					aromatic++
				}
			}
			check("aromatic atoms", aromatic, v.AromaticAtoms)
			checkStereo(t, v, m)
		})
	}
}

// checkStereo compares the stereo elements with the conventions of the file:
// stated ones count if they matter, unstated ones only at carbon with four
// different neighbours.
func checkStereo(t *testing.T, v vector, m *molecule.Molecule) {
	stated, unstated, bonds := 0, 0, 0
	for _, c := range m.Centres() {
		switch {
		case c.Parity != 0:
			stated++
		case m.Atom(c.Atom).Number == 6:
			unstated++
		}
	}
	for _, b := range m.StereoBonds() {
		if b.Known {
			bonds++
		}
	}
	if stated != v.TetrahedralStereo || unstated != v.UnstatedTetrahedral || bonds != v.DoubleBondStereo {
		t.Errorf("%s: %d stated centres, %d unstated, %d double bonds; want %d, %d, %d",
			v.SMILES, stated, unstated, bonds, v.TetrahedralStereo, v.UnstatedTetrahedral, v.DoubleBondStereo)
	}
}

func TestRefusals(t *testing.T) {
	for _, v := range readVectors(t).Molecules {
		if v.Expect != "refuse" {
			continue
		}
		m, _, err := Parse(v.SMILES)
		if err == nil {
			t.Errorf("%s: read as %s", v.SMILES, m.Formula())
			continue
		}
		t.Log(v.SMILES, "|", v.MessageMustName, "|", err)
	}
}
