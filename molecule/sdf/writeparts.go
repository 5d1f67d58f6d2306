package sdf

import (
	"fmt"
	"io"
	"math"
	"strings"

	"torsieve/internal/units"
	"torsieve/molecule"
)

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
