package generate

import (
	"slices"

	"torsieve/molecule"
)

// A fragment is what stays stiff when the rotors turn: a ring system, a chain
// atom with its hydrogens, a double bond. It overlaps with each neighbour in
// the two atoms of the bond between them.
type fragment struct {
	core    []int // atoms of the molecule, ascending
	outside []int // their neighbours in other fragments, ascending
	joints  []joint

	// The model is the fragment as a molecule of its own: core, outside and as
	// much beyond as keeps the bonds' nature, the rest filled with hydrogen.
	model  *molecule.Molecule
	atoms  []int              // molecule's atom of each of the model's first atoms
	held   []handedness       // in the model's numbers
	bonds  map[int]doubleBond // likewise, by bond of the model
	number map[int]int        // model's number of a molecule's atom; for look-up only
	rings  int                // flexible ring bonds
	shapes []shape
}

// A joint is a rotor as one of its two fragments sees it.
type joint struct {
	rotor, inside, outside int
}

// A shape is one conformer of a fragment.
type shape struct {
	x      []float64 // positions of core, then outside, bohr
	energy float64   // hartree above the lowest shape
}

// fragments cuts m at its rotors.
func fragments(m *molecule.Molecule, rotors []molecule.Rotor) ([]*fragment, error) {
	cut := make([]bool, len(m.Bonds()))
	for _, r := range rotors {
		cut[r.Bond] = true
	}
	owner := make([]int, m.NumAtoms())
	for i := range owner {
		owner[i] = -1
	}
	var list []*fragment
	for i := range owner {
		if owner[i] >= 0 {
			continue
		}
		f := &fragment{core: connected(m, i, cut)}
		for _, a := range f.core {
			owner[a] = len(list)
		}
		list = append(list, f)
	}
	for k, r := range rotors {
		for _, end := range [2][2]int{{r.J, r.K}, {r.K, r.J}} {
			f := list[owner[end[0]]]
			f.joints = append(f.joints, joint{k, end[0], end[1]})
			f.outside = append(f.outside, end[1])
		}
	}
	held, bonds := handednesses(m), heldBonds(m)
	for _, f := range list {
		slices.Sort(f.outside)
		f.outside = slices.Compact(f.outside)
		if err := f.makeModel(m, held, bonds); err != nil {
			return nil, err
		}
	}
	return list, nil
}

// connected returns the atoms that hang together with i by bonds not cut.
func connected(m *molecule.Molecule, i int, cut []bool) []int {
	seen := map[int]bool{i: true}
	part := []int{i}
	for at := 0; at < len(part); at++ {
		for k, j := range m.Neighbours(part[at]) {
			if !cut[m.NeighbourBonds(part[at])[k]] && !seen[j] {
				seen[j] = true
				part = append(part, j)
			}
		}
	}
	slices.Sort(part)
	return part
}
