package screen

import (
	"context"

	"torsieve/internal/relax"
	"torsieve/screen/generate"
)

// Shapes is the generator's answer for a ligand: distinct shapes, relaxed in the
// force field, the shapes that the input gave among the starts. Random choices
// depend on o.Seed and the structure, not on the ligand's id; two enantiomers get
// mirror images of each other.
func Shapes(ctx context.Context, l *Ligand, o generate.Options) (generate.Result, error) {
	m, mirrored := searched(l.Mol)
	if !mirrored {
		o.Start = l.Starts
		return generate.Conformers(ctx, m, m.SMILES(), o)
	}
	o.Start = mirrorShapes(l.Starts)
	found, err := generate.Conformers(ctx, m, m.SMILES(), o)
	mirrorConformers(found.Conformers)
	return found, err
}

// RelaxDefaults says when a geometry of a quantum tier is done: its energy is
// then within some 1e-5 hartree of the minimum's, its shape within some
// hundredths of an angstrom.
func RelaxDefaults() relax.Settings {
	return relax.Settings{RMSGradient: 1e-4, MaxGradient: 4e-4, EnergyChange: 1e-6, MaxGradients: 500, Noise: 1e-7}
}
