package screen

import (
	"slices"

	"torsieve/molecule"
	"torsieve/screen/generate"
)

// Of two enantiomers one is searched, and the other takes its mirror images:
// nothing in the three tiers tells them apart, so a difference between their
// ensembles could only be an accident of the search.

// searched returns the enantiomer that the search is done for, and whether it
// is the mirror image of m: the one whose canonical SMILES comes first.
func searched(m *molecule.Molecule) (of *molecule.Molecule, mirrored bool) {
	if !m.Chiral() {
		return m, false
	}
	if other := enantiomer(m); other.SMILES() < m.SMILES() {
		return other, true
	}
	return m, false
}

// searchedOf names the random numbers of a molecule: its canonical SMILES or its
// enantiomer's.
func searchedOf(m *molecule.Molecule) string {
	of, _ := searched(m)
	return of.SMILES()
}

// mirrorImage is the canonical SMILES of the enantiomer, "" for a molecule that
// is its own.
func mirrorImage(m *molecule.Molecule) string {
	if !m.Chiral() {
		return ""
	}
	return enantiomer(m).SMILES()
}

// enantiomer returns m with every centre turned over, atoms in the same order.
func enantiomer(m *molecule.Molecule) *molecule.Molecule {
	var parities []molecule.Parity
	for _, c := range m.Centres() {
		parities = append(parities, -c.Parity)
	}
	var cis []bool
	for _, b := range m.StereoBonds() {
		cis = append(cis, b.Cis)
	}
	return m.WithStereo(parities, cis)
}

// mirrorShape returns x seen in a mirror.
func mirrorShape(x []float64) []float64 {
	out := slices.Clone(x)
	for i := 2; i < len(out); i += 3 {
		out[i] = -out[i]
	}
	return out
}

func mirrorShapes(xs [][]float64) [][]float64 {
	out := make([][]float64, len(xs))
	for i, x := range xs {
		out[i] = mirrorShape(x)
	}
	return out
}

func mirrorConformers(cs []generate.Conformer) {
	for i := range cs {
		cs[i].X = mirrorShape(cs[i].X)
	}
}
