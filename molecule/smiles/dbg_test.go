package smiles

import "testing"

func TestDbg(t *testing.T) {
	for _, s := range []string{"C/C=C(/C)F", "COc1c(C)c2COC(=O)c2c(O)c1C\\C=C(/C)CCC([O-])=O", "C\\C=C(/C)F", "C/C=C(\\C)F"} {
		m, _, err := Parse(s)
		t.Log(s, m.SMILES(), err, m.StereoBonds())
	}
}
