package screen

import (
	"fmt"
	"slices"
	"strings"

	"torsieve/molecule"
)

// salts leaves one fragment of several, where that is wanted and can be done
// with a good conscience: counter-ions of the main groups go, metal complexes
// are never taken apart.
func (in *Intake) salts(l *Ligand, x *[]float64) error {
	fragments := l.Mol.Fragments()
	if !in.StripSalts || len(fragments) < 2 {
		return nil
	}
	if err := metals(l.Mol); err != nil {
		return err
	}
	all := formulas(l.Mol)
	keep := largestOrganic(l.Mol)
	if keep < 0 {
		return fmt.Errorf("%d fragments (%s), none of them organic", len(fragments), strings.Join(all, " + "))
	}
	m, err := l.Mol.Subset(fragments[keep])
	if err != nil {
		return fmt.Errorf("fragment %s: %w", all[keep], err)
	}
	if *x != nil {
		*x = subset(*x, fragments[keep])
	}
	l.Mol = m
	l.warnf("salt: kept %s, dropped %s", all[keep], strings.Join(slices.Delete(slices.Clone(all), keep, keep+1), " + "))
	return nil
}

// largestOrganic returns the index of the fragment with the most heavy atoms
// among those with carbon, the first of equal ones, or -1.
func largestOrganic(m *molecule.Molecule) int {
	best, most := -1, 0
	for k, atoms := range m.Fragments() {
		heavy, carbon := 0, false
		for _, i := range atoms {
			z := m.Atom(i).Number
			if z > 1 {
				heavy++
			}
			carbon = carbon || z == 6
		}
		if carbon && heavy > most {
			best, most = k, heavy
		}
	}
	return best
}

func subset(x []float64, atoms []int) []float64 {
	out := make([]float64, 0, 3*len(atoms))
	for _, i := range atoms {
		out = append(out, x[3*i:3*i+3]...)
	}
	return out
}
