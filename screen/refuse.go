package screen

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"torsieve/internal/element"
	"torsieve/molecule"
)

// MaxAtoms is the largest molecule that a run takes, hydrogens included. The
// quantum tiers need memory as the square and time as the cube of it.
const MaxAtoms = 500

// Refuse says why no ensemble can be computed for m, in words about the
// molecule, or returns nil. What a single tier cannot take, the tier says.
func Refuse(m *molecule.Molecule) error {
	switch n := m.NumAtoms(); {
	case n == 0:
		return errors.New("no atoms")
	case n > MaxAtoms:
		return fmt.Errorf("%d atoms are over the limit of %d", n, MaxAtoms)
	}
	if err := metals(m); err != nil {
		return err
	}
	if f := m.Fragments(); len(f) > 1 {
		return &FragmentsError{Formulas: formulas(m)}
	}
	switch e := m.Electrons(); {
	case e <= 0:
		return errors.New("no electrons")
	case e%2 == 1:
		return fmt.Errorf("open shell: odd number of electrons (%d)", e)
	case m.Multiplicity() != 1:
		return fmt.Errorf("open shell: multiplicity %d, only closed shells make an ensemble here", m.Multiplicity())
	}
	return nil
}

// A FragmentsError says that a record holds several molecules.
type FragmentsError struct{ Formulas []string }

func (e *FragmentsError) Error() string {
	return fmt.Sprintf("%d fragments (%s), one molecule is wanted", len(e.Formulas), strings.Join(e.Formulas, " + "))
}

// metals refuses metal complexes and bare metals. The alkali and alkaline earth
// counter-ions of a salt are let pass: they are told as fragments.
func metals(m *molecule.Molecule) error {
	several := len(m.Fragments()) > 1
	for i, a := range m.Atoms() {
		if !element.IsMetal(a.Number) {
			continue
		}
		if g := element.Group(a.Number); several && (g == 1 || g == 2) && len(m.Neighbours(i)) == 0 {
			continue
		}
		return fmt.Errorf("%s: metals and their complexes are outside the scope", element.Symbol(a.Number))
	}
	return nil
}

// formulas lists the fragments of m as formula and charge.
func formulas(m *molecule.Molecule) []string {
	var names []string
	for _, atoms := range m.Fragments() {
		name := fmt.Sprintf("%d atoms", len(atoms))
		if f, err := m.Subset(atoms); err == nil {
			name = f.Formula() + chargeMark(f.Charge())
		}
		names = append(names, name)
	}
	return names
}

// chargeMark writes a charge as chemists do: "", "+", "2-".
func chargeMark(q int) string {
	sign := "+"
	if q < 0 {
		sign, q = "-", -q
	}
	switch q {
	case 0:
		return ""
	case 1:
		return sign
	}
	return fmt.Sprintf("%d%s", q, sign)
}

// label names an atom as chemists do: "C3" is atom 3, a carbon.
func label(m *molecule.Molecule, i int) string {
	return fmt.Sprintf("%s%d", element.Symbol(m.Atom(i).Number), i+1)
}

func distance(x []float64, i, j int) float64 {
	return math.Hypot(math.Hypot(x[3*i]-x[3*j], x[3*i+1]-x[3*j+1]), x[3*i+2]-x[3*j+2])
}
