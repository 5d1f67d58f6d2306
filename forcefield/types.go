package forcefield

import (
	"fmt"

	"torsieve/internal/element"
	"torsieve/molecule"
)

// A typing gives each atom of a molecule its type and each bond its order in
// the force field's sense.
//
// Types follow Rappe et al., J. Am. Chem. Soc. 1992, 114, 10024, section II.A;
// what the paper leaves open is decided here and said beside each rule.
type typing struct {
	m        *molecule.Molecule
	first    []string // types by an atom's own bonds
	names    []string // types after conjugation
	orders   []float64
	warnings []string
}

// perceive types m. The error is *Unsupported.
func perceive(m *molecule.Molecule) (*typing, error) {
	n := m.NumAtoms()
	t := &typing{m: m, first: make([]string, n), orders: make([]float64, len(m.Bonds()))}
	for i := range n {
		name := t.ownType(i)
		if name == "" {
			return nil, &Unsupported{Atom: i, Number: m.Atom(i).Number}
		}
		t.first[i] = name
	}
	for k, b := range m.Bonds() {
		t.orders[k] = t.order(b)
	}
	t.names = append([]string(nil), t.first...)
	t.conjugate()
	return t, nil
}

// types returns the table's rows.
func (t *typing) types() []*atomType {
	out := make([]*atomType, len(t.names))
	for i, name := range t.names {
		out[i] = typeTable().byName[name]
	}
	return out
}

// ownType is the type from an atom's own bonds alone, or "".
func (t *typing) ownType(i int) string {
	switch z := t.m.Atom(i).Number; z {
	case 1:
		return t.hydrogen(i)
	case 5:
		return t.boron(i)
	case 6:
		return t.carbon(i)
	case 7:
		return t.nitrogen(i)
	case 8:
		return t.oxygen(i)
	case 15:
		return t.phosphorus(i)
	case 16:
		return t.sulfur(i)
	default:
		return t.byCoordination(i, z)
	}
}

// byCoordination chooses among an element's types by the number of neighbours:
// up to four the first of the lower digit, else the first of the higher.
// Elements with one type get it. Metals are warned of.
func (t *typing) byCoordination(i, z int) string {
	var rows []*atomType
	if z > 0 && z < len(typeTable().byElement) {
		rows = typeTable().byElement[z]
	}
	if len(rows) == 0 {
		return ""
	}
	neighbours := len(t.m.Neighbours(i))
	best := rows[0]
	for _, a := range rows {
		if (a.digit() == '6') == (neighbours > 4) {
			best = a
			break
		}
	}
	switch {
	case element.IsMetal(z):
		t.warn(i, "a metal: its geometry and energy in the force field are rough")
	case neighbours > 4 || best.Class == classNone && neighbours > 1:
		t.warn(i, fmt.Sprintf("%d neighbours: the force field has no form of its own for them, angles there are rough", neighbours))
	}
	return best.Name
}

func (t *typing) warn(i int, what string) {
	t.warnings = append(t.warnings, fmt.Sprintf("atom %d (%s): %s", i+1, element.Symbol(t.m.Atom(i).Number), what))
}

func (t *typing) hydrogen(i int) string {
	borons := 0
	for _, j := range t.m.Neighbours(i) {
		if t.m.Atom(j).Number == 5 {
			borons++
		}
	}
	if borons == 2 {
		return "H_b"
	}
	return "H_"
}

func (t *typing) boron(i int) string {
	if len(t.m.Neighbours(i)) > 3 {
		return "B_3"
	}
	return "B_2"
}

// carbon: a cation with three neighbours is flat (own choice).
func (t *typing) carbon(i int) string {
	doubles, triples := t.multiples(i)
	a := t.m.Atom(i)
	switch {
	case a.Aromatic:
		return "C_R"
	case triples > 0 || doubles > 1:
		return "C_1"
	case doubles == 1 || a.Charge > 0 && len(t.m.Neighbours(i)) == 3:
		return "C_2"
	}
	return "C_3"
}

func (t *typing) phosphorus(i int) string {
	doubles, triples := t.multiples(i)
	n := len(t.m.Neighbours(i))
	if n > 4 {
		t.warn(i, fmt.Sprintf("%d neighbours: the force field has no form of its own for them, angles there are rough", n))
	}
	if n > 3 || n == 3 && doubles+triples > 0 {
		return "P_3+5"
	}
	return "P_3+3"
}

// sulfur: two neighbours and a double bond (sulfine, sulfur diimide) are bent
// as in a trigonal atom (own choice).
func (t *typing) sulfur(i int) string {
	doubles, triples := t.multiples(i)
	n := len(t.m.Neighbours(i))
	if n > 4 {
		t.warn(i, fmt.Sprintf("%d neighbours: the force field has no form of its own for them, angles there are rough", n))
	}
	switch {
	case t.m.Atom(i).Aromatic:
		return "S_R"
	case n >= 4:
		return "S_3+6"
	case n == 3:
		return "S_3+4"
	case doubles+triples > 0:
		return "S_2"
	}
	return "S_3+2"
}

// multiples counts the double and triple bonds of an atom in the Kekule form.
func (t *typing) multiples(i int) (doubles, triples int) {
	for _, k := range t.m.NeighbourBonds(i) {
		switch t.m.Bond(k).Order {
		case 2:
			doubles++
		case 3:
			triples++
		}
	}
	return doubles, triples
}

// terminalOxygen reports an oxygen with one neighbour only.
func (t *typing) terminalOxygen(i int) bool {
	return t.m.Atom(i).Number == 8 && len(t.m.Neighbours(i)) == 1
}

// doubleTo returns the atom of one of the given elements that i has a double
// bond to, or -1. Bonds of aromatic rings do not count.
func (t *typing) doubleTo(i int, numbers ...int) int {
	for n, j := range t.m.Neighbours(i) {
		b := t.m.Bond(t.m.NeighbourBonds(i)[n])
		if b.Order != 2 || b.Aromatic {
			continue
		}
		for _, z := range numbers {
			if t.m.Atom(j).Number == z {
				return j
			}
		}
	}
	return -1
}
