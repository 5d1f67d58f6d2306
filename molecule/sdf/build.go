package sdf

import (
	"fmt"
	"math"
	"strings"

	"torsieve/internal/units"
	"torsieve/molecule"
)

// A shape says what the coordinates of a table are good for.
type shape int

const (
	nowhere shape = iota // all atoms at one place: no coordinates
	drawing              // a formula on paper: wedges hold the configuration
	space                // three-dimensional
)

// flatness in angstrom: what differs less in z lies in the plane of the paper.
const flatness = 1e-3

// shape decides by the coordinates; the dimension code of the second line
// (columns 21 and 22) only where they lie in a plane, as planar molecules do.
func (t *table) shape() shape {
	low, high := t.atoms[0].x, t.atoms[0].x
	for _, a := range t.atoms {
		for k, c := range a.x {
			low[k], high[k] = math.Min(low[k], c), math.Max(high[k], c)
		}
	}
	switch extent := [3]float64{high[0] - low[0], high[1] - low[1], high[2] - low[2]}; {
	case extent[2] > flatness:
		return space
	case len(t.atoms) > 1 && extent[0] <= flatness && extent[1] <= flatness:
		return nowhere
	}
	if len(t.atoms) == 1 || column(t.program, 20, 22) == "3D" && !t.hasMarks() {
		return space
	}
	return drawing
}

func (t *table) hasMarks() bool {
	for _, b := range t.bonds {
		if b.mark != plain {
			return true
		}
	}
	return false
}

// build makes the molecule and, where there are coordinates of all its atoms in
// space, X. What it adds to the record is Mol, X and Warnings.
func (t *table) build(rec *Record) error {
	b := molecule.NewBuilder()
	sum := t.valenceSums()
	for i, a := range t.atoms {
		atom := molecule.BuilderAtom{
			Number: a.number, Charge: a.charge, Isotope: a.isotope, Radical: max(0, a.radical), Class: a.class,
			Hydrogens: molecule.FillHydrogens,
		}
		switch {
		case a.valence >= 0:
			if atom.Hydrogens = a.valence - sum[i]; atom.Hydrogens < 0 {
				return faultf(0, "atom %d states valence %d and has bonds for %d", i+1, a.valence, sum[i])
			}
		case a.radical < 0: // a carbene: two electrons less to bind with
			atom.Hydrogens = max(0, molecule.ImpliedHydrogens(a.number, a.charge, sum[i])-2)
		}
		b.AddAtom(atom)
	}
	for k, bond := range t.bonds {
		if b.HasBond(bond.a, bond.b) {
			return faultf(0, "bond %d joins atoms %d and %d a second time", k+1, bond.a+1, bond.b+1)
		}
		order := bond.kind
		if order == 4 {
			order = molecule.AromaticOrder
		}
		if _, err := b.AddBond(bond.a, bond.b, order); err != nil {
			return err
		}
	}
	form := t.shape()
	notes := t.setStereo(b, form)
	m, warnings, err := b.Build()
	if err != nil {
		return err
	}
	rec.Mol = m
	rec.Warnings = append(rec.Warnings, warnings...)
	rec.Warnings = append(rec.Warnings, t.relevant(m, notes)...)
	if form == space {
		t.keepCoordinates(rec)
	}
	return nil
}

// valenceSums are sums of bond orders, an aromatic bond counted 3/2.
func (t *table) valenceSums() []int {
	twice := make([]int, len(t.atoms))
	for _, b := range t.bonds {
		order := 2 * b.kind
		if b.kind == 4 {
			order = 3
		}
		twice[b.a] += order
		twice[b.b] += order
	}
	for i := range twice {
		twice[i] /= 2
	}
	return twice
}

// keepCoordinates fills rec.X unless hydrogens had to be added, whose places are
// not known.
func (t *table) keepCoordinates(rec *Record) {
	if missing := rec.Mol.NumAtoms() - len(t.atoms); missing > 0 {
		rec.Warnings = append(rec.Warnings, fmt.Sprintf("the 3D record lacks %d hydrogens: they are added to the formula, and the coordinates are not used", missing))
		return
	}
	rec.X = make([]float64, 0, 3*len(t.atoms))
	for _, a := range t.atoms {
		for _, c := range a.x {
			rec.X = append(rec.X, c*units.Angstrom)
		}
	}
	t.compareWedges(rec)
}

// A note is a doubt about the configuration at an atom or a double bond, of
// interest only if there is one.
type note struct {
	atom, other int // other is -1 for a centre
	text        string
}

// relevant are the notes about elements that the molecule does have.
func (t *table) relevant(m *molecule.Molecule, notes []note) (texts []string) {
	for _, n := range notes {
		if n.other < 0 && hasCentre(m, n.atom) || n.other >= 0 && hasStereoBond(m, n.atom, n.other) {
			texts = append(texts, n.text)
		}
	}
	return texts
}

func hasCentre(m *molecule.Molecule, atom int) bool {
	for _, c := range m.Centres() {
		if c.Atom == atom {
			return true
		}
	}
	return false
}

func hasStereoBond(m *molecule.Molecule, i, j int) bool {
	for _, s := range m.StereoBonds() {
		if s.J == i && s.K == j || s.J == j && s.K == i {
			return true
		}
	}
	return false
}

// compareWedges warns where wedges of a 3D record say the opposite of its
// coordinates, which count.
func (t *table) compareWedges(rec *Record) {
	if !t.hasMarks() {
		return
	}
	var wrong []string
	neighbours := t.neighbours()
	for _, c := range rec.Mol.Centres() {
		drawn, _ := t.wedgeParity(c.Atom, neighbours[c.Atom])
		if drawn == 0 || c.Parity == 0 {
			continue
		}
		order := append([]int(nil), neighbours[c.Atom]...)
		if len(order) == 3 {
			order = append(order, molecule.LonePair)
		}
		if drawn*permutationSign(order, c.Neighbours[:]) != c.Parity {
			wrong = append(wrong, fmt.Sprint(c.Atom+1))
		}
	}
	if len(wrong) > 0 {
		rec.Warnings = append(rec.Warnings, fmt.Sprintf("the wedges contradict the 3D coordinates at atom %s; the coordinates count", strings.Join(wrong, ", ")))
	}
}

// permutationSign is +1 or -1 for an even or odd permutation from a to b, and 0
// where they do not hold the same.
func permutationSign(a, b []int) molecule.Parity {
	if len(a) != len(b) {
		return 0
	}
	a = append([]int(nil), a...)
	sign := molecule.Parity(1)
	for i, want := range b {
		at := -1
		for j := i; j < len(a); j++ {
			if a[j] == want {
				at = j
			}
		}
		if at < 0 {
			return 0
		}
		if at != i {
			a[i], a[at] = a[at], a[i]
			sign = -sign
		}
	}
	return sign
}
