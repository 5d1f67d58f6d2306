// Package drawing lays a molecule out on paper: rings as regular polygons,
// chains as zigzags, wedges for stated centres. It knows the graph alone, not
// the coordinates of any conformer.
//
// Lengths are in bond lengths, the y axis points up.
package drawing

import "torsieve/molecule"

// A Drawing is a molecule on paper. Hydrogens that a label or a plain carbon
// implies are not among its atoms.
type Drawing struct {
	Atoms []Atom
	Bonds []Bond
}

// An Atom is drawn at X, Y, with a label unless it is a plain carbon.
type Atom struct {
	Of    int // index in the molecule
	X, Y  float64
	Label Label
}

// A Bond joins two drawn atoms. Of a marked bond A is the narrow end.
type Bond struct {
	A, B  int // indices into Atoms
	Order int
	Mark  Mark
	Side  float64 // of a double bond: the side of the second line, seen along A-B: 1 left, -1 right, 0 both
	Note  string  // what the layout cannot show: "trans" in a ring
}

// A Mark says how a bond leaves the paper.
type Mark int

// The marks of bonds.
const (
	Plain Mark = iota
	Wedge      // B is nearer to the reader
	Hash       // B is farther away
)

// Of lays m out. The result depends on the order of m's atoms and on nothing
// else.
func Of(m *molecule.Molecule) Drawing {
	s := newSketch(m)
	s.placeRingSystems()
	s.assemble()
	s.setDoubleBonds()
	s.tidy()
	s.level()
	s.besideEachOther()
	return s.drawing()
}

// A sketch is a drawing in the making. Points of the plane are complex numbers:
// a product turns, a conjugate mirrors.
type sketch struct {
	m      *molecule.Molecule
	atoms  []int   // drawn ones
	next   [][]int // drawn neighbours, by atom of the molecule
	at     []complex128
	placed []bool
	turn   []float64      // of chain atoms: to which side the chain bent on the way in
	system []int          // ring system of each atom, -1 for none
	local  [][]complex128 // by ring system: its atoms' places, by atom of the molecule
}

func newSketch(m *molecule.Molecule) *sketch {
	n := m.NumAtoms()
	s := &sketch{
		m: m, next: make([][]int, n), at: make([]complex128, n), placed: make([]bool, n),
		turn: make([]float64, n), system: make([]int, n),
	}
	shown := shownAtoms(m)
	for i := range n {
		s.system[i] = -1
		if !shown[i] {
			continue
		}
		s.atoms = append(s.atoms, i)
		for _, j := range m.Neighbours(i) {
			if shown[j] {
				s.next[i] = append(s.next[i], j)
			}
		}
	}
	return s
}

// shownAtoms are the heavy ones and the hydrogens that say something: isotopes,
// charged and bridging ones, those without a heavy neighbour, and those that
// carry the wedge of a centre where no other bond can.
func shownAtoms(m *molecule.Molecule) []bool {
	shown := make([]bool, m.NumAtoms())
	for i, a := range m.Atoms() {
		around := m.Neighbours(i)
		shown[i] = a.Number != 1 || a.Isotope != 0 || a.Charge != 0 || len(around) != 1 || m.Atom(around[0]).Number == 1
	}
	for _, c := range m.Centres() {
		if !needsHydrogen(m, c, shown) {
			continue
		}
		for _, j := range c.Neighbours {
			if j >= 0 {
				shown[j] = true
			}
		}
	}
	return shown
}

// needsHydrogen says whether the wedge of a centre would otherwise have to be a
// bond between rings, or there are not three bonds to read it from.
func needsHydrogen(m *molecule.Molecule, c molecule.Centre, shown []bool) bool {
	drawn, free := 0, 0
	for _, j := range c.Neighbours {
		if j < 0 || !shown[j] {
			continue
		}
		drawn++
		if k, _ := m.BondBetween(c.Atom, j); !m.BondInRing(k) {
			free++
		}
	}
	return c.Parity != 0 && (drawn < 3 || free == 0)
}
