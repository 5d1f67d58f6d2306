package smiles

import (
	"errors"
	"strings"
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

// TestRefusals holds each message to its place in the string and to the words
// that say what message_must_name asks for.
func TestRefusals(t *testing.T) {
	want := map[string]string{ // by id of smiles.json
		"s200": "position 2: ring bond 1 is never closed",
		"s201": "position 3: the branch opened here is never closed",
		"s202": "position 3: a branch is closed here that was never opened",
		"s203": "position 2: the bracket opened here is never closed",
		"s204": "position 2: unknown element Xx",
		"s205": "position 3: dot with nothing after it",
		"s206": "the aromatic ring of 5 atoms (C5 C4 C1 C3 C2) has no Kekule form",
		"s207": "has no Kekule form: atom 5 (carbon) finds no partner for a double bond; a pyrrole-type nitrogen needs its hydrogen written, [nH]",
		"s208": "position 1: wildcard atom *",
		"s209": "position 10: ring bond 1 has two different bond orders: '=' and '-'",
		"s210": "position 1: atom 1 (carbon) has five bonds (valence 5): at most 4 fit without charge",
		"s211": "position 3: the / and \\ marks contradict each other at this end of a double bond",
		"s212": "position 3: two bond symbols in a row",
		"s213": "position 3: bond symbol '=' with nothing after it",
		"s214": "position 3: ring bond 1 joins an atom to itself",
		"s215": "position 10: ring bonds 1 and 2 join the same two atoms",
	}
	found := 0
	for _, v := range readVectors(t).Molecules {
		if v.Expect != "refuse" {
			continue
		}
		found++
		checkRefusal(t, v.SMILES, want[v.ID])
	}
	if found != len(want) {
		t.Errorf("%d refusals in the file, %d here", found, len(want))
	}
}

func checkRefusal(t *testing.T, s, want string) {
	t.Helper()
	m, _, err := Parse(s)
	if err == nil {
		t.Errorf("%q is read as %s", s, m.SMILES())
		return
	}
	var e *Error
	if !errors.As(err, &e) || e.Pos < 0 || e.Pos > len(s)+1 {
		t.Errorf("%q: error without a place: %v", s, err)
	}
	if want == "" || !strings.Contains(err.Error(), want) {
		t.Errorf("%q: %q, want %q in it", s, err, want)
	}
}

// What the specification knows and this program refuses, and grammar that the
// vectors leave out.
func TestMoreRefusals(t *testing.T) {
	for s, want := range map[string]string{
		"":                              "the string is empty",
		".C":                            "dot with nothing before it",
		"C..C":                          "dot with nothing before it",
		"C()C":                          "an empty branch",
		"(C)C":                          "a branch with no atom before it",
		"C=(C)C":                        "with a branch after it",
		"C(=)C":                         "bond symbol '=' with nothing after it",
		"C(C.)C":                        "dot with nothing after it",
		"=CC":                           "with no atom before it",
		"1CC1":                          "ring bond 1 with no atom before it",
		"C%1CC%1":                       "want two digits after %",
		"C$C":                           "quadruple bond $",
		"C C":                           "blank inside the string",
		"C]":                            "a bracket is closed here that was never opened",
		"[CH5":                          "the bracket opened here is never closed",
		"[C":                            "the bracket opened here is never closed",
		"[":                             "the bracket opened here is never closed",
		"[13]":                          "want an element symbol",
		"[D]":                           "heavy hydrogen is written [2H]",
		"[HH1]":                         "hydrogen that carries hydrogen",
		"[C@AL1](C)(N)(O)F":             "chirality class @AL",
		"[C@SP1](C)(N)(O)F":             "chirality class @SP",
		"[C@TB12](C)(N)(O)F":            "chirality class @TB",
		"[C@OH3](C)(N)(O)F":             "chirality class @OH",
		"[C@TH3](C)(N)(O)F":             "want @TH1 or @TH2",
		"[C+99]":                        "charge +99 is not possible",
		"[He+3]":                        "charge +3, which is not possible",
		"[CH4:]":                        "want a number after the colon",
		"Q":                             "no atom symbol outside brackets",
		"cc":                            "written as aromatic but lies in no ring",
		"C1CC1C1":                       "ring bond 1 is never closed",
		"CC1C1":                         "ring bond 1 joins two atoms that are bonded already",
		"F/C1=C/CCCCCCC\\1":             "",
		"CN(C)(C)C":                     "atom 2 (nitrogen) has four bonds (valence 4): at most 3 fit without charge",
		"C[O](C)C":                      "atom 2 (oxygen) has three bonds",
		"CF=C":                          "atom 2 (fluorine) has valence 3",
		"C[B](C)(C)C":                   "atom 2 (boron) has four bonds",
		"[CH3-]C":                       "atom 1 (carbon) has four bonds (valence 4): at most 3 fit with charge -1",
		"F/C=C/1CCCC\\1":                "",
		strings.Repeat("C", 50):         "",
		strings.Repeat("C", MaxAtoms+1): "more than 20000 atoms: over the limit",
	} {
		if want == "" {
			if _, _, err := Parse(s); err != nil {
				t.Errorf("%q: %v", s, err)
			}
			continue
		}
		checkRefusal(t, s, want)
	}
}

// A mark that means nothing is taken back and named.
func TestMarksWithoutMeaning(t *testing.T) {
	for s, want := range map[string]string{
		"C[C@H](C)C":           "position 2: the chirality mark at atom 2 means nothing here: ignored",
		"C[C@@H]1CCC(C)CC1":    "position 2: the chirality mark at atom 2 means nothing here: ignored",
		"CC[N@@](C)CCC":        "position 3: the chirality mark at atom 3 means nothing here: ignored",
		"[C@H2](F)Cl":          "position 1: chirality mark on an atom without four neighbours: ignored",
		"C/C=C(/C)C":           "position 3: the / and \\ marks at the double bond between atoms 2 and 3 mean nothing here: ignored",
		"CC/CC":                "position 4: / or \\ mark away from any double bond: ignored",
		"C1C[C@@H]2CC[C@H]1C2": "the chirality mark at atom 3 means nothing here",
	} {
		m, warnings, err := Parse(s)
		if err != nil || len(warnings) == 0 || !strings.Contains(warnings[0], want) {
			t.Errorf("%s: %v, %v, want %q", s, warnings, err, want)
			continue
		}
		if text := m.SMILES(); strings.ContainsAny(text, "@/\\") {
			t.Errorf("%s: written as %s", s, text)
		}
	}
}
