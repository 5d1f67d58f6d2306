package ensemble

import (
	"torsieve/internal/geom"
	"torsieve/internal/units"
	"torsieve/molecule"
)

// sameShape is the RMSD below which a conformer is laid onto itself by a
// symmetry operation. Relaxed geometries have their symmetry to within some
// hundredths of an angstrom; real conformers differ by several tenths.
const sameShape = 0.12 * units.Angstrom

// manyAutomorphisms bounds the search for the symmetry of a shape.
const manyAutomorphisms = 20000

// Copies returns, for each of a molecule's conformers (3N, bohr, no two of them
// alike or mirror images of each other where the molecule is its own), how many
// minima of the energy surface it stands for, up to a factor that all share:
//
//	copies = L m / sigma,
//
// m being 2 for a chiral shape of a molecule that is its own mirror image, else
// 1, sigma the rotational symmetry number of the shape, and L the least common
// multiple of the sigmas, which makes the numbers whole. Symmetric rotors
// (methyl, phenyl) multiply all conformers alike and do not count. Pentane:
// tt 1, tg 4, gg 2, gx 4.
//
// A molecule with more symmetry than the search is made for gets sigma 1; then
// complete is false.
func Copies(m *molecule.Molecule, shapes [][]float64) (copies []int, complete bool) {
	s := newSymmetry(m)
	copies = make([]int, len(shapes))
	sigmas := make([]int, len(shapes))
	common := 1
	for i, x := range shapes {
		sigmas[i], copies[i] = s.sigma(x), s.images(x)
		common = lcm(common, sigmas[i])
	}
	for i := range shapes {
		copies[i] *= common / sigmas[i]
	}
	return copies, s.complete
}

// A symmetry holds the relabellings of a molecule's framework: rotate keeps the
// stated stereo, mirror inverts it. Both are lists of places in the framework.
type symmetry struct {
	atoms          []int
	rotate, mirror [][]int
	complete       bool
}

func newSymmetry(m *molecule.Molecule) *symmetry {
	s := &symmetry{atoms: framework(m)}
	rotate, complete := m.Automorphisms(s.atoms, manyAutomorphisms)
	mirror, mirrorComplete := m.MirrorAutomorphisms(s.atoms, manyAutomorphisms)
	s.complete = complete && mirrorComplete
	if s.complete {
		s.rotate, s.mirror = s.places(rotate), s.places(mirror)
		return s
	}
	// With a part of the group, sigma would depend on which part.
	s.rotate = [][]int{identity(len(s.atoms))}
	s.mirror = s.places(mirror)
	return s
}

// places turns images that are atoms into places in the framework.
func (s *symmetry) places(perms [][]int) [][]int {
	place := map[int]int{}
	for k, atom := range s.atoms {
		place[atom] = k
	}
	out := make([][]int, len(perms))
	for n, p := range perms {
		out[n] = make([]int, len(p))
		for k, atom := range p {
			out[n][k] = place[atom]
		}
	}
	return out
}

// sigma counts the relabellings that a rotation undoes, the identity among them.
func (s *symmetry) sigma(x []float64) int {
	n := 0
	frame := pick(x, s.atoms)
	for _, p := range s.rotate {
		if same, _ := geom.RMSD(frame, relabelled(frame, p)); same < sameShape {
			n++
		}
	}
	return max(n, 1)
}

// images is 2 for a shape whose mirror image is another shape of the same
// molecule, else 1.
func (s *symmetry) images(x []float64) int {
	if len(s.mirror) == 0 {
		return 1 // a chiral molecule: the mirror image is another compound
	}
	frame := pick(x, s.atoms)
	for _, p := range s.mirror {
		if _, mirrored := geom.RMSD(frame, relabelled(frame, p)); mirrored < sameShape {
			return 1
		}
	}
	return 2
}

func relabelled(x []float64, p []int) []float64 {
	moved := make([]float64, len(x))
	for i, j := range p {
		copy(moved[3*i:3*i+3], x[3*j:3*j+3])
	}
	return moved
}

// framework lists the atoms that make a shape: the heavy ones, and hydrogens on
// N, O and S, whose place tells conformers apart. A molecule without heavy atoms
// has all.
func framework(m *molecule.Molecule) []int {
	var atoms []int
	for i, a := range m.Atoms() {
		if a.Number > 1 || polar(m, i) {
			atoms = append(atoms, i)
		}
	}
	if len(atoms) == 0 {
		return identity(m.NumAtoms())
	}
	return atoms
}

func polar(m *molecule.Molecule, hydrogen int) bool {
	for _, j := range m.Neighbours(hydrogen) {
		switch m.Atom(j).Number {
		case 7, 8, 16:
			return true
		}
	}
	return false
}

func pick(x []float64, atoms []int) []float64 {
	out := make([]float64, 0, 3*len(atoms))
	for _, i := range atoms {
		out = append(out, x[3*i:3*i+3]...)
	}
	return out
}

func identity(n int) []int {
	p := make([]int, n)
	for i := range p {
		p[i] = i
	}
	return p
}

func lcm(a, b int) int {
	x, y := a, b
	for y != 0 {
		x, y = y, x%y
	}
	return a / x * b
}
