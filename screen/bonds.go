package screen

import (
	"fmt"

	"torsieve/internal/element"
	"torsieve/internal/units"
	"torsieve/molecule"
)

// A bond is broken when it is longer than broken times the sum of the covalent
// radii, and two other atoms have made one when they are nearer than made times
// it. A hydrogen bond (H...O, 1.5 times the sum and more) is neither; nor are
// the longest bonds of organic molecules and the shortest cross-ring contacts
// (C...C of bicyclo[1.1.1]pentane, 1.87 angstrom, 1.23 times the sum).
const (
	broken = 1.35
	made   = 1.15
)

// SameMolecule returns an error that names the first bond or stereo element of m
// that the geometry x (3N, bohr) does not show.
func SameMolecule(m *molecule.Molecule, x []float64) error {
	if err := sameBonds(m, x); err != nil {
		return err
	}
	return m.StereoMatches(x)
}

// sameBonds returns an error that names the first bond of m which x does not
// have, or the first that m does not.
func sameBonds(m *molecule.Molecule, x []float64) error {
	for j := 1; j < m.NumAtoms(); j++ {
		for i := range j {
			_, bonded := m.BondBetween(i, j)
			sum := element.CovalentRadius(m.Atom(i).Number) + element.CovalentRadius(m.Atom(j).Number)
			r := distance(x, i, j)
			switch {
			case bonded && r > broken*sum:
				return fmt.Errorf("changed its bonds: %s-%s is broken (%.2f angstrom)",
					label(m, i), label(m, j), r/units.Angstrom)
			case !bonded && r < made*sum:
				return fmt.Errorf("changed its bonds: %s and %s have come together (%.2f angstrom)",
					label(m, i), label(m, j), r/units.Angstrom)
			}
		}
	}
	return nil
}
