package smiles

import (
	"errors"
	"testing"
)

// Whatever comes in: no panic, an error that knows its place, and what is read
// is written as a string that reads back to the same string.
func FuzzParse(f *testing.F) {
	v := readVectors(f)
	for _, m := range v.Molecules {
		f.Add(m.SMILES)
	}
	for _, s := range []string{
		"C/C=C/C=CC=C/C", "F/C=C1/CCCC/C1=C/F", "[H]/C(C)=C/C", "C1=CC=CC=CC=CC=C1", "N1=NN=NN=1", "c1ccc2c(c1)c1ccccc21",
		"[nH]1c2ccccc2c2ccccc12", "C[N+]12CCC(CC1)CC2", "[O-][S@+](C)CC", "O=P(O)(O)OP(=O)([O-])O", "[2H][C@](F)(Cl)Br",
		"C[Si@](F)(Cl)Br", "CN1C2CCC1CC(O)C2", "b1ccccc1", "[se]1cccc1", "[as]1ccccc1", "[Cu+2].[O-]C#N", "C%99CC%99",
		"OC1C(O)C(O)C(O)C(O)C1O", "CC(=N)N", "CN=C(N)NC", "N#N=C", "[N-]=[N+]=NC", "O=N1=CC=CC=C1", "[H][H].[H+].[2H]O[2H]",
	} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		m, _, err := ParseLimit(s, 60)
		if err != nil {
			var e *Error
			if !errors.As(err, &e) || e.Pos < 0 || e.Pos > len(s)+1 {
				t.Fatalf("%q: error without a place: %v", s, err)
			}
			return
		}
		text := m.SMILES()
		again, _, err := Parse(text)
		if err != nil {
			t.Fatalf("%q is written as %q, which cannot be read: %v", s, text, err)
		}
		if got := again.SMILES(); got != text {
			t.Fatalf("%q is written as %q, which is written as %q", s, text, got)
		}
		if m.Formula() != again.Formula() || m.Charge() != again.Charge() || m.Multiplicity() != again.Multiplicity() {
			t.Fatalf("%q: %s, charge %d, multiplicity %d; read back %s, %d, %d", s,
				m.Formula(), m.Charge(), m.Multiplicity(), again.Formula(), again.Charge(), again.Multiplicity())
		}
		m.Rotors()
		m.Chiral()
	})
}
