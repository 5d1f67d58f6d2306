package sdf

import (
	"math"

	"torsieve/internal/element"
)

// applyDifferences turns mass differences of the atom block into mass numbers.
// The difference counts from the isotope nearest to the standard atomic weight
// (CTfile formats, atom block).
func (t *table) applyDifferences(difference []int) error {
	for i, d := range difference {
		if d == 0 {
			continue
		}
		nearest := int(math.Round(element.Mass(t.atoms[i].number)))
		if err := t.setIsotope(i, 0, nearest+d); err != nil {
			return err
		}
	}
	return nil
}
