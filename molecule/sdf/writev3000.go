package sdf

import (
	"fmt"
	"io"

	"torsieve/internal/element"
)

func writeV3000(out io.Writer, o Out) {
	m := o.Mol
	fmt.Fprintf(out, "  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\n")
	fmt.Fprintf(out, "M  V30 COUNTS %d %d 0 0 %d\nM  V30 BEGIN ATOM\n", m.NumAtoms(), len(m.Bonds()), chiralFlag(m))
	stated := statedValences(m)
	for i, a := range m.Atoms() {
		x := o.X[3*i:]
		fmt.Fprintf(out, "M  V30 %d %s %.6f %.6f %.6f %d", i+1, element.Symbol(a.Number),
			angstrom(x[0], 1e6), angstrom(x[1], 1e6), angstrom(x[2], 1e6), a.Class)
		valence := stated[i]
		if valence == 15 {
			valence = -1
		}
		for _, p := range []struct {
			key   string
			value int
		}{{"CHG", a.Charge}, {"RAD", radicalCode(a)}, {"MASS", a.Isotope}, {"VAL", valence}} {
			if p.value != 0 {
				fmt.Fprintf(out, " %s=%d", p.key, p.value)
			}
		}
		fmt.Fprintln(out)
	}
	fmt.Fprintf(out, "M  V30 END ATOM\nM  V30 BEGIN BOND\n")
	for k, b := range m.Bonds() {
		fmt.Fprintf(out, "M  V30 %d %d %d %d", k+1, b.Order, b.A+1, b.B+1)
		if unstated(m, k) {
			fmt.Fprint(out, " CFG=2")
		}
		fmt.Fprintln(out)
	}
	fmt.Fprintf(out, "M  V30 END BOND\nM  V30 END CTAB\n")
}
