package molecule_test

import (
	"slices"
	"testing"
)

func TestLigandFacts(t *testing.T) {
	for _, l := range ligands(t) {
		m := parse(t, l.smiles)
		if m.RotatableBonds() != l.rotatable || m.Formula() != l.formula || m.Charge() != l.charge || m.RingCount() != l.rings {
			t.Errorf("%s: %d rotatable bonds, %s, charge %+d, %d rings; want %d, %s, %+d, %d", l.id,
				m.RotatableBonds(), m.Formula(), m.Charge(), m.RingCount(), l.rotatable, l.formula, l.charge, l.rings)
		}
		centres, bonds := 0, 0
		for _, c := range m.Centres() {
			if c.Parity != 0 {
				centres++
			}
		}
		for _, b := range m.StereoBonds() {
			if b.Known {
				bonds++
			}
		}
		switch l.id {
		case "2ZMI": // ten marks, three of them in the adamantyl group without meaning
			l.tetrahedralStereo -= 3
		case "3ODU": // the marked C=N+ is that of a delocalised isothiouronium
			l.doubleBonds--
		}
		if centres != l.tetrahedralStereo || bonds != l.doubleBonds || m.UnspecifiedStereo() != 0 {
			t.Errorf("%s: %d centres, %d double bonds, %d not stated; want %d, %d, 0",
				l.id, centres, bonds, m.UnspecifiedStereo(), l.tetrahedralStereo, l.doubleBonds)
		}
	}
}

// Symmetry of the ends of a bond, from the point group of the group at each
// end: C3 for methyl and CF3, C2 in the plane for phenyl and carboxylate.
func TestRotorPeriods(t *testing.T) {
	for _, tc := range []struct {
		smiles    string
		periods   [2]int // of the first rotor, the larger first
		idle      bool
		amideLike bool
	}{
		{"Cc1ccccc1", [2]int{3, 2}, true, false},
		{"CC(F)(F)F", [2]int{3, 3}, true, false},
		{"c1ccccc1-c1ccccc1", [2]int{2, 2}, false, false},
		{"c1ccccc1-c1ccccc1Cl", [2]int{2, 1}, false, false},
		{"[O-]C(=O)c1ccccc1", [2]int{2, 2}, false, false},
		{"O=[N+]([O-])c1ccccc1Cl", [2]int{2, 1}, false, false},
		{"OC=O", [2]int{1, 1}, false, false},
		{"NC=O", [2]int{2, 1}, false, true},
		{"NC(N)=[NH2+]", [2]int{2, 2}, false, true},
		{"OS(=O)(=O)c1ccccc1", [2]int{1, 1}, false, false},
		{"NN", [2]int{1, 1}, false, false},
	} {
		m := parse(t, tc.smiles)
		if len(m.Rotors()) == 0 {
			t.Errorf("%s: no rotor", tc.smiles)
			continue
		}
		r := m.Rotors()[0]
		periods := [2]int{max(r.PeriodJ, r.PeriodK), min(r.PeriodJ, r.PeriodK)}
		if periods != tc.periods || r.Idle != tc.idle || r.AmideLike != tc.amideLike {
			t.Errorf("%s: periods %v, idle %v, amide-like %v; want %v, %v, %v",
				tc.smiles, periods, r.Idle, r.AmideLike, tc.periods, tc.idle, tc.amideLike)
		}
	}
}

// Turning a rotor moves one side of the bond: the smaller one, whole.
func TestRotorsMoveTheSmallerSide(t *testing.T) {
	for _, l := range ligands(t) {
		m := parse(t, l.smiles)
		for _, r := range m.Rotors() {
			if m.InRing(r.J) && m.InRing(r.K) && m.BondInRing(r.Bond) || 2*(len(r.Moving)+1) > m.NumAtoms() || slices.Contains(r.Moving, r.J) {
				t.Fatalf("%s: rotor %+v", l.id, r)
			}
			for _, i := range r.Moving {
				for _, j := range m.Neighbours(i) {
					if j != r.K && !slices.Contains(r.Moving, j) {
						t.Fatalf("%s: rotor %+v leaves atom %d behind", l.id, r, j)
					}
				}
			}
		}
	}
}

func TestLinearEndsDoNotTurn(t *testing.T) {
	for s, want := range map[string]int{
		"CC#N": 0, "C=C=CC#C": 0, "CN=[N+]=[N-]": 1, "CC#CC": 0, "C=C=CCO": 2,
	} {
		if m := parse(t, s); len(m.Rotors()) != want {
			t.Errorf("%s: %+v, want %d", s, m.Rotors(), want)
		}
	}
}
