package xyz

import (
	"bufio"
	"fmt"
	"io"
	"math"
	"strings"

	"torsieve/internal/element"
	"torsieve/internal/units"
)

// Out is a structure to be written.
type Out struct {
	Numbers      []int     // atomic numbers
	X            []float64 // bohr, 3N
	Charge       int
	Multiplicity int // 0: not written
	ID           string
	Energy       float64 // hartree; not written if it is NaN
	Keys         []Key   // further pairs, in this order
}

// A Key is one key=value pair of the comment line.
type Key struct{ Name, Value string }

// Write writes one frame of an extended XYZ file, positions in angstrom with
// eight decimals. It panics if X and Numbers do not fit, and returns an error
// for a coordinate that is not finite and for errors of w.
func Write(w io.Writer, o Out) error {
	if len(o.X) != 3*len(o.Numbers) {
		panic("xyz: coordinates and atomic numbers differ in length")
	}
	for i, c := range o.X {
		if math.IsNaN(c) || math.IsInf(c, 0) {
			return fmt.Errorf("xyz: atom %d has no finite position", i/3+1)
		}
	}
	out := bufio.NewWriter(w)
	fmt.Fprintf(out, "%d\n%s\n", len(o.Numbers), o.comment())
	for i, z := range o.Numbers {
		x := o.X[3*i:]
		fmt.Fprintf(out, "%-2s %15.8f %15.8f %15.8f\n", element.Symbol(z),
			x[0]/units.Angstrom, x[1]/units.Angstrom, x[2]/units.Angstrom)
	}
	return out.Flush()
}

func (o Out) comment() string {
	pairs := []string{"Properties=species:S:1:pos:R:3"}
	if o.ID != "" {
		pairs = append(pairs, "id="+quote(o.ID))
	}
	pairs = append(pairs, fmt.Sprintf("charge=%d", o.Charge))
	if o.Multiplicity > 0 {
		pairs = append(pairs, fmt.Sprintf("multiplicity=%d", o.Multiplicity))
	}
	if !math.IsNaN(o.Energy) {
		pairs = append(pairs, fmt.Sprintf("energy_hartree=%.10f", o.Energy))
	}
	for _, k := range o.Keys {
		pairs = append(pairs, k.Name+"="+quote(k.Value))
	}
	return strings.Join(append(pairs, `pbc="F F F"`), " ")
}

// quote puts a value between quotes where the format wants it.
func quote(s string) string {
	if s != "" && !strings.ContainsAny(s, " \t\r\n=\",[]{}\\") {
		return s
	}
	return `"` + strings.NewReplacer(`\`, `\\`, `"`, `\"`, "\n", `\n`, "\r", " ").Replace(s) + `"`
}
