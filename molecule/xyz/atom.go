package xyz

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"torsieve/internal/element"
	"torsieve/internal/textline"
	"torsieve/internal/units"
	"torsieve/molecule"
)

// maxCoordinate in angstrom: nothing in a molecule is farther from the origin
// of its file.
const maxCoordinate = 1e5

// addAtom reads one atom line.
func (f *Frame) addAtom(i int, words []string, c columns) error {
	if len(words) < c.needed {
		return fmt.Errorf("atom %d: %d columns wanted, %d found", i+1, c.needed, len(words))
	}
	a, err := parseSymbol(words[c.species])
	if err != nil {
		return fmt.Errorf("atom %d: %w", i+1, err)
	}
	for k := range 3 {
		text := words[c.position+k]
		v, err := strconv.ParseFloat(text, 64)
		if err != nil || math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("atom %d: coordinate is not a number: %s", i+1, textline.Quote(text))
		}
		if math.Abs(v) > maxCoordinate {
			return fmt.Errorf("atom %d: coordinate %g is out of range", i+1, v)
		}
		f.X = append(f.X, v*units.Angstrom)
	}
	f.Atoms = append(f.Atoms, a)
	return nil
}

// parseSymbol reads a symbol in any case, or an atomic number. D and T are
// hydrogen.
func parseSymbol(s string) (molecule.Atom, error) {
	if z, err := strconv.Atoi(s); err == nil {
		if z < 1 || z > element.MaxZ {
			return molecule.Atom{}, fmt.Errorf("%d is no atomic number", z)
		}
		return molecule.Atom{Number: z}, nil
	}
	switch s {
	case "D":
		return molecule.Atom{Number: 1, Isotope: 2}, nil
	case "T":
		return molecule.Atom{Number: 1, Isotope: 3}, nil
	}
	z, ok := element.Number(strings.ToUpper(s[:1]) + strings.ToLower(s[1:]))
	if !ok {
		return molecule.Atom{}, fmt.Errorf("unknown element %s", textline.Quote(s))
	}
	return molecule.Atom{Number: z}, nil
}
