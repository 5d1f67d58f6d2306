package page

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"torsieve/internal/element"
	"torsieve/internal/geom"
	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/screen"
)

// A turn is a torsion that tells conformers apart.
type turn struct {
	Name   string `json:"name"` // of its four atoms
	Atoms  [4]int `json:"atoms"`
	Period int    `json:"period"` // of the graph: this many angles of a full turn mean the same
	Ring   bool   `json:"ring"`   // a bond of a ring of seven and more atoms
	Angles []int  `json:"angles"` // by rank, degrees from -180 to 180
}

// A pucker is the shape of a ring of five or six atoms by D. Cremer, J. A.
// Pople, J. Am. Chem. Soc. 1975, 97, 1354: of six, amplitude Q, theta and phi
// (eqs. 15-17), of five q and phi.
type pucker struct {
	Name      string   `json:"name"`
	Atoms     []int    `json:"atoms"`
	Amplitude []number `json:"amplitude"`       // angstrom
	Theta     []int    `json:"theta,omitempty"` // degrees, 0 and 180 are chairs
	Phase     []int    `json:"phase"`           // degrees, 0 to 359
}

// What a page draws of one ligand.
const (
	mostTurns = 24
	mostRings = 8
)

// turns measures the rotors, and the bonds of large rings.
func (f *figures) turns(r *screen.Result, kept []int) {
	m := r.Mol
	for _, t := range turnsOf(m) {
		if len(f.Turns) == mostTurns {
			f.FiguresLeft++
			continue
		}
		for _, i := range kept {
			a := t.Atoms
			angle := geom.Dihedral(r.Conformers[i].X, a[0], a[1], a[2], a[3])
			t.Angles = append(t.Angles, degrees(angle))
		}
		f.Turns = append(f.Turns, t)
	}
}

func degrees(radians float64) int { return int(math.Round(radians * 180 / math.Pi)) }

func turnsOf(m *molecule.Molecule) []turn {
	var list []turn
	for _, rotor := range m.Rotors() {
		if !rotor.Idle {
			list = append(list, newTurn(m, rotor.J, rotor.K, leastCommon(rotor.PeriodJ, rotor.PeriodK), false))
		}
	}
	for k, b := range m.Bonds() {
		if b.Order == 1 && !b.Aromatic && m.SmallestRing(k) > 6 {
			list = append(list, newTurn(m, b.A, b.B, 1, true))
		}
	}
	return list
}

func newTurn(m *molecule.Molecule, j, k, period int, ring bool) turn {
	atoms := [4]int{reference(m, j, k, ring), j, k, reference(m, k, j, ring)}
	return turn{Name: named(m, atoms[:]), Atoms: atoms, Period: period, Ring: ring}
}

// reference is the neighbour of i that its side of a torsion is measured from:
// along a ring the ring's, else the first heavy one.
func reference(m *molecule.Molecule, i, other int, ring bool) int {
	best := -1
	for n, j := range m.Neighbours(i) {
		if j == other {
			continue
		}
		if ring && m.BondInRing(m.NeighbourBonds(i)[n]) {
			return j
		}
		if best < 0 || m.Atom(best).Number == 1 && m.Atom(j).Number > 1 {
			best = j
		}
	}
	return best
}

func named(m *molecule.Molecule, atoms []int) string {
	names := make([]string, len(atoms))
	for n, i := range atoms {
		names[n] = atomName(m, i)
	}
	return strings.Join(names, "–")
}

// atomName names an atom as all outputs do: symbol, and number from 1.
func atomName(m *molecule.Molecule, i int) string {
	return fmt.Sprintf("%s%d", element.Symbol(m.Atom(i).Number), i+1)
}

func leastCommon(a, b int) int {
	n := max(a, b)
	for n%a != 0 || n%b != 0 {
		n++
	}
	return n
}

// rings measures the puckers of rings that are not flat by nature.
func (f *figures) rings(r *screen.Result, kept []int) {
	for _, ring := range r.Mol.Rings() {
		if !puckers(r.Mol, ring) {
			continue
		}
		if len(f.Rings) == mostRings {
			f.FiguresLeft++
			continue
		}
		p := pucker{Name: named(r.Mol, ring), Atoms: slices.Clone(ring)}
		for _, i := range kept {
			p.add(r.Conformers[i].X)
		}
		f.Rings = append(f.Rings, p)
	}
}

// puckers says whether a ring has five or six atoms and no aromatic one.
func puckers(m *molecule.Molecule, ring []int) bool {
	if len(ring) != 5 && len(ring) != 6 {
		return false
	}
	return !slices.ContainsFunc(ring, func(i int) bool { return m.Atom(i).Aromatic })
}

func (p *pucker) add(x []float64) {
	var ring []float64
	for _, i := range p.Atoms {
		ring = append(ring, x[3*i:3*i+3]...)
	}
	c := geom.PuckeringOf(ring)
	p.Amplitude = append(p.Amplitude, number(c.Total()/units.Angstrom))
	p.Phase = append(p.Phase, (degrees(c.Phase[0])+360)%360)
	if len(p.Atoms) == 6 {
		p.Theta = append(p.Theta, degrees(math.Atan2(c.Amplitude[0], c.Amplitude[1])))
	}
}
