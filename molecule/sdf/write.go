package sdf

import (
	"bufio"
	"fmt"
	"io"
	"math"
	"strings"

	"torsieve/internal/element"
	"torsieve/internal/units"
	"torsieve/molecule"
)

// Out is a record to be written.
type Out struct {
	Mol     *molecule.Molecule
	X       []float64 // bohr, 3N
	Title   string
	Comment string // third line of the header
	Fields  []Field
}

// largestV2000 is what three columns hold, for atoms and for bonds.
const largestV2000 = 999

// largestColumn in angstrom is what a column of ten with four decimals holds.
const largestColumn = 9999

// Write writes one record of an SD file: V2000 with four decimals of an
// angstrom, or V3000 with six where there are more than 999 atoms or bonds.
// Bonds have the orders of a Kekule form. The second line holds no date, so
// that equal records are equal bytes.
//
// It panics if X and Mol do not fit. It returns an error for a coordinate that
// is not finite or too large and for errors of w.
func Write(w io.Writer, o Out) error {
	if len(o.X) != 3*o.Mol.NumAtoms() {
		panic("sdf: coordinates and atoms differ in number")
	}
	for i, c := range o.X {
		if !(math.Abs(c) < largestColumn*units.Angstrom) {
			return fmt.Errorf("sdf: %q: atom %d has no position that can be written", o.Title, i/3+1)
		}
	}
	out := bufio.NewWriter(w)
	// Initials (2 columns, empty), program (8), date and time (10, empty), 3D.
	fmt.Fprintf(out, "%s\n  torsieve          3D\n%s\n", headerLine(o.Title), headerLine(o.Comment))
	if o.Mol.NumAtoms() > largestV2000 || len(o.Mol.Bonds()) > largestV2000 {
		writeV3000(out, o)
	} else {
		writeV2000(out, o)
	}
	fmt.Fprintln(out, "M  END")
	for _, f := range o.Fields {
		writeField(out, f)
	}
	fmt.Fprintln(out, "$$$$")
	return out.Flush()
}

func writeV2000(out io.Writer, o Out) {
	m := o.Mol
	fmt.Fprintf(out, "%3d%3d  0  0%3d  0  0  0  0  0999 V2000\n", m.NumAtoms(), len(m.Bonds()), chiralFlag(m))
	stated := statedValences(m)
	for i, a := range m.Atoms() {
		x := o.X[3*i:]
		fmt.Fprintf(out, "%10.4f%10.4f%10.4f %-3s 0  0  0  0  0%3d  0  0  0%3d  0  0\n",
			angstrom(x[0], 1e4), angstrom(x[1], 1e4), angstrom(x[2], 1e4), element.Symbol(a.Number), stated[i], columnClass(a.Class))
	}
	for k, b := range m.Bonds() {
		code := 0
		if unstated(m, k) {
			code = 3
		}
		fmt.Fprintf(out, "%3d%3d%3d%3d\n", b.A+1, b.B+1, b.Order, code)
	}
	writePairs(out, "M  CHG", m, func(a molecule.Atom) int { return a.Charge })
	writePairs(out, "M  ISO", m, func(a molecule.Atom) int { return a.Isotope })
	writePairs(out, "M  RAD", m, radicalCode)
}

// writePairs writes eight atoms a line with a property that is not zero.
func writePairs(out io.Writer, key string, m *molecule.Molecule, value func(molecule.Atom) int) {
	var pairs []string
	for i, a := range m.Atoms() {
		if v := value(a); v != 0 {
			pairs = append(pairs, fmt.Sprintf(" %3d %3d", i+1, v))
		}
	}
	for len(pairs) > 0 {
		n := min(8, len(pairs))
		fmt.Fprintf(out, "%s%3d%s\n", key, n, strings.Join(pairs[:n], ""))
		pairs = pairs[n:]
	}
}
