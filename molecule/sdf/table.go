package sdf

import (
	"fmt"
	"math"
	"strings"

	"torsieve/internal/element"
	"torsieve/internal/textline"
)

// A table is a connection table as it stands in the file, V2000 or V3000.
type table struct {
	title, program, comment string
	atoms                   []tableAtom
	bonds                   []tableBond
	warnings                []string
}

type tableAtom struct {
	number  int // atomic number
	x       [3]float64
	charge  int
	isotope int // mass number, 0 where not stated
	radical int // unpaired electrons, -1 for a singlet carbene
	valence int // stated number of bonds with hydrogens, -1 where not stated
	class   int
}

type tableBond struct {
	a, b int // indices from 0; a is the narrow end of a wedge
	kind int // 1, 2, 3 or 4 (aromatic)
	mark mark
}

// A mark is what a bond's drawing says about configuration.
type mark int

const (
	plain  mark = iota
	wedge       // b is nearer to the viewer than a
	hash        // b is farther away
	wavy        // a's configuration is not known
	either      // a double bond that may be cis or trans
)

// A fault is what is wrong with a record, and where.
type fault struct {
	line int // 0: the record as a whole
	msg  string
}

func (f *fault) Error() string { return f.msg }

func faultf(line int, format string, args ...any) *fault {
	return &fault{line: line, msg: fmt.Sprintf(format, args...)}
}

// maxCharge is the largest formal charge that the format provides for.
const maxCharge = 15

func (t *table) warnf(format string, args ...any) {
	t.warnings = append(t.warnings, fmt.Sprintf(format, args...))
}

// setSymbol reads the symbol of atom i (from 0).
func (t *table) setSymbol(i, line int, symbol string) error {
	a := &t.atoms[i]
	switch symbol {
	case "D":
		a.number, a.isotope = 1, 2
		return nil
	case "T":
		a.number, a.isotope = 1, 3
		return nil
	}
	z, ok := element.Number(titleCase(symbol))
	if !ok {
		return faultf(line, "atom %d: %s is no element; query and placeholder atoms cannot be used", i+1, textline.Quote(symbol))
	}
	a.number = z
	return nil
}

func titleCase(s string) string {
	if s == "" {
		return s
	}
	return strings.ToUpper(s[:1]) + strings.ToLower(s[1:])
}

// setPosition checks the coordinates of atom i, in angstrom.
func (t *table) setPosition(i, line int, x [3]float64) error {
	for _, c := range x {
		if math.IsNaN(c) || math.IsInf(c, 0) {
			return faultf(line, "atom %d: coordinate is not a number", i+1)
		}
		if math.Abs(c) > maxCoordinate {
			return faultf(line, "atom %d: coordinate %g is out of range", i+1, c)
		}
	}
	t.atoms[i].x = x
	return nil
}

// maxCoordinate in angstrom is more than ten columns with four decimals hold.
const maxCoordinate = 1e5

// setCharge checks and sets the formal charge of atom i.
func (t *table) setCharge(i, line, charge int) error {
	if charge > maxCharge || charge < -maxCharge || charge > t.atoms[i].number {
		return faultf(line, "charge %+d on atom %d is not possible", charge, i+1)
	}
	t.atoms[i].charge = charge
	return nil
}

// setIsotope checks and sets the mass number of atom i.
func (t *table) setIsotope(i, line, mass int) error {
	if z := t.atoms[i].number; mass < z || mass > 3*z+3 {
		return faultf(line, "atom %d: no isotope of %s has mass number %d", i+1, element.Symbol(z), mass)
	}
	t.atoms[i].isotope = mass
	return nil
}

// setRadical translates the format's code: 1 singlet, 2 doublet, 3 triplet.
func (t *table) setRadical(i, line, code int) error {
	unpaired, ok := map[int]int{0: 0, 1: -1, 2: 1, 3: 2}[code]
	if !ok {
		return faultf(line, "atom %d: radical code %d, want 0 to 3", i+1, code)
	}
	t.atoms[i].radical = unpaired
	return nil
}

// addBond checks bond number k (from 1) of atoms a and b (from 1).
func (t *table) addBond(k, line, a, b, kind int, m mark) error {
	for _, atom := range [2]int{a, b} {
		if atom < 1 || atom > len(t.atoms) {
			return faultf(line, "bond %d names atom %d, there are %d", k, atom, len(t.atoms))
		}
	}
	switch {
	case a == b:
		return faultf(line, "bond %d joins atom %d to itself", k, a)
	case kind >= 5 && kind <= 8:
		return faultf(line, "bond %d has query type %d; a molecule needs 1, 2, 3 or 4", k, kind)
	case kind < 1 || kind > 8:
		return faultf(line, "bond %d has type %d; want 1, 2, 3 or 4 (aromatic)", k, kind)
	}
	if kind != 2 && m == either || kind == 2 && m == wavy {
		m = plain
	}
	t.bonds = append(t.bonds, tableBond{a: a - 1, b: b - 1, kind: kind, mark: m})
	return nil
}
