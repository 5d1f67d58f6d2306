package handbook

import (
	"math"
	"slices"

	"torsieve/internal/geom"
	"torsieve/molecule"
)

const degree = math.Pi / 180

// A dihedral is an angle i-j-k-l. Atoms count as in the SMILES.
type dihedral [4]int

func (d dihedral) of(x []float64) float64 { return geom.Dihedral(x, d[0], d[1], d[2], d[3]) / degree }

// A turn is a dihedral, the degrees that it has or is to have, and how far a
// minimum may be from them and still count.
type turn struct {
	dihedral
	degrees, slack float64
}

// usual slack: the neighbouring minimum of a three-fold rotor is 120 degrees
// away, and methods differ by some ten.
const usual = 35

func at(i, j, k, l int, degrees float64) turn { return turn{dihedral{i, j, k, l}, degrees, usual} }

// A shape is what some dihedrals of a molecule are. An empty one is any shape.
type shape []turn

// along returns the turns of a chain whose atoms are numbered from first on.
func along(first int, degrees ...float64) shape {
	var s shape
	for n, d := range degrees {
		i := first + n
		s = append(s, at(i, i+1, i+2, i+3, d))
	}
	return s
}

// under is the dihedral of the atoms that perm maps d's to.
func (d dihedral) under(perm []int) dihedral {
	return dihedral{perm[d[0]], perm[d[1]], perm[d[2]], perm[d[3]]}
}

// fit looks for the relabelling under which x has shape s: as it is (hand 1) or,
// for a molecule that is its own mirror image, as the mirror image (hand -1).
func (sub *subject) fit(x []float64, s shape) (perm []int, hand float64, ok bool) {
	for _, perm := range sub.same {
		if s.fits(x, perm, 1) {
			return perm, 1, true
		}
	}
	for _, perm := range sub.mirror {
		if s.fits(x, perm, -1) {
			return perm, -1, true
		}
	}
	return nil, 0, false
}

func (sub *subject) has(x []float64, s shape) bool {
	_, _, ok := sub.fit(x, s)
	return ok
}

func (s shape) fits(x []float64, perm []int, hand float64) bool {
	for _, t := range s {
		if math.Abs(math.Remainder(hand*t.under(perm).of(x)-t.degrees, 360)) > t.slack {
			return false
		}
	}
	return true
}

// manyRelabellings bounds the search for symmetry.
const manyRelabellings = 50000

// relabellings are the symmetries of the molecule's graph, as maps of all atoms:
// those that keep its stated stereo and those that invert it. Hydrogens take
// part only where a shape speaks of them.
func relabellings(m *molecule.Molecule, hydrogens bool) (same, mirror [][]int) {
	var atoms []int
	for i, z := range m.Numbers() {
		if z > 1 || hydrogens {
			atoms = append(atoms, i)
		}
	}
	keeping, _ := m.Automorphisms(atoms, manyRelabellings)
	inverting, _ := m.MirrorAutomorphisms(atoms, manyRelabellings)
	return mapsOf(m, atoms, keeping), mapsOf(m, atoms, inverting)
}

func mapsOf(m *molecule.Molecule, atoms []int, perms [][]int) [][]int {
	maps := make([][]int, len(perms))
	for n, perm := range perms {
		maps[n] = make([]int, m.NumAtoms())
		for k, a := range atoms {
			maps[n][a] = perm[k]
		}
	}
	return maps
}

// bring turns l's side of each dihedral to its degrees, where the bond is in no
// ring.
func bring(m *molecule.Molecule, x []float64, s shape) {
	for _, t := range s {
		i, j, k, l := t.dihedral[0], t.dihedral[1], t.dihedral[2], t.dihedral[3]
		if bond, ok := m.BondBetween(j, k); !ok || m.BondInRing(bond) {
			continue
		}
		side := []int{k}
		for n := 0; n < len(side); n++ {
			for _, a := range m.Neighbours(side[n]) {
				if a != j && !slices.Contains(side, a) {
					side = append(side, a)
				}
			}
		}
		geom.RotateAbout(x, j, k, side, t.degrees*degree-geom.Dihedral(x, i, j, k, l))
	}
}
