package screen

import (
	"slices"

	"torsieve/molecule"
)

// A group is a ligand that is computed and those that share its result: the same
// structure under other ids, and its enantiomer, whose shapes are the mirror
// images and whose energies are the same.
type group struct {
	first  *Ligand
	others []sharer
}

// A sharer takes the first ligand's result over, mirrored or as it is.
type sharer struct {
	*Ligand
	mirrored bool
}

// groups puts ligands together, in the order of the first of each group. Ligands
// with an error stand alone. An enantiomer joins only if it numbers its atoms
// like the first.
func groups(ligands []*Ligand) []*group {
	var out []*group
	bySMILES := map[string]*group{}
	for _, l := range ligands {
		if l.Err != nil {
			out = append(out, &group{first: l})
			continue
		}
		if g := bySMILES[l.SMILES]; g != nil {
			g.join(l, false)
			continue
		}
		if g := bySMILES[mirrorImage(l.Mol)]; g != nil && sameOrder(g.first.Mol, l.Mol) {
			g.join(l, true)
			bySMILES[l.SMILES] = g
			continue
		}
		g := &group{first: l}
		bySMILES[l.SMILES] = g
		out = append(out, g)
	}
	return out
}

// join adds a ligand, and its given shapes to the first one's starts, where the
// atoms stand in the same order.
func (g *group) join(l *Ligand, mirrored bool) {
	if l.SMILES != g.first.SMILES {
		mirrored = true // the same structure as an enantiomer that joined before
	}
	g.others = append(g.others, sharer{l, mirrored})
	if len(l.Starts) > 0 && !sameOrder(g.first.Mol, l.Mol) {
		l.warnf("its 3D coordinates were left out: the atoms of %s stand in another order", g.first.ID)
		return
	}
	for _, x := range l.Starts {
		if mirrored {
			x = mirrorShape(x)
		}
		g.first.Starts = append(g.first.Starts, x)
	}
}

// sameOrder says whether two drawings of one constitution number its atoms alike.
func sameOrder(a, b *molecule.Molecule) bool {
	ends := func(x, y molecule.Bond) bool { return x.A == y.A && x.B == y.B }
	return slices.Equal(a.Numbers(), b.Numbers()) && slices.EqualFunc(a.Bonds(), b.Bonds(), ends)
}
