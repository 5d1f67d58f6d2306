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

// writeField writes a data item. A blank line would end its value, so blank
// lines are left out, and what looks like the end of the record is moved in.
func writeField(out io.Writer, f Field) {
	name := strings.NewReplacer("<", "(", ">", ")", "\n", " ", "\r", " ").Replace(f.Name)
	fmt.Fprintf(out, ">  <%s>\n", name)
	for line := range strings.Lines(f.Value) {
		line = strings.TrimRight(line, " \t\r\n")
		if isDelimiter(line) {
			line = " " + line
		}
		if line != "" {
			fmt.Fprintln(out, line)
		}
	}
	fmt.Fprintln(out)
}

// headerLine makes s one line that cannot be taken for anything else.
func headerLine(s string) string {
	s = strings.NewReplacer("\n", " ", "\r", " ").Replace(s)
	if strings.HasPrefix(s, ">") || isDelimiter(s) {
		s = " " + s
	}
	return s
}

// angstrom converts x to 1/steps of an angstrom, without a negative zero.
func angstrom(x, steps float64) float64 {
	return math.Round(x/units.Angstrom*steps)/steps + 0
}

// columnClass is the atom class if three columns hold it, else 0.
func columnClass(class int) int {
	if class > largestV2000 {
		return 0
	}
	return class
}

func radicalCode(a molecule.Atom) int {
	switch a.Radical {
	case 1:
		return 2
	case 2:
		return 3
	}
	return 0
}

// chiralFlag is 1 where all centres are stated.
func chiralFlag(m *molecule.Molecule) int {
	flag := 0
	for _, c := range m.Centres() {
		if c.Parity == 0 {
			return 0
		}
		flag = 1
	}
	return flag
}

// unstated says whether bond k may be cis or trans.
func unstated(m *molecule.Molecule, k int) bool {
	for _, s := range m.StereoBonds() {
		if s.Bond == k && !s.Known {
			return true
		}
	}
	return false
}

// statedValences are the codes for atoms to which a reader would add hydrogen
// that is not there: the valence, 15 for none, and 0 for all other atoms.
func statedValences(m *molecule.Molecule) []int {
	codes := make([]int, m.NumAtoms())
	for i, a := range m.Atoms() {
		sum := 0
		for _, k := range m.NeighbourBonds(i) {
			sum += m.Bond(k).Order
		}
		if a.Radical == 1 || a.Radical == 2 { // the radical code says it
			if molecule.ImpliedHydrogens(a.Number, a.Charge, sum+a.Radical) <= 0 {
				continue
			}
		} else if molecule.ImpliedHydrogens(a.Number, a.Charge, sum) <= 0 {
			continue
		}
		if codes[i] = sum; sum == 0 {
			codes[i] = 15
		}
	}
	return codes
}
