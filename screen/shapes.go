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

// RelaxDefaults says when a geometry of a quantum tier is done: when the learned
// Hessian foresees less than 1e-7 hartree on the way to the minimum. Soft torsions
// make the gradient alone a poor judge: at a root mean square of 1e-4
// hartree/bohr a third of 98 conformers of twenty ligands were more than 1e-5
// hartree too high. The gradient must be small as well, in case the Hessian has
// learned too little. EnergyChange is for molecules that must go by L-BFGS.
func RelaxDefaults() relax.Settings {
	return relax.Settings{
		RMSGradient: 2.5e-5, MaxGradient: 1e-4, Descent: 1e-7, EnergyChange: 1e-7,
		MaxGradients: 500, Noise: 1e-7, Internal: true,
	}
}
