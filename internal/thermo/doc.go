// Package thermo adds to the energy of a minimum what its nuclei do at a
// temperature: zero-point energy, enthalpy and entropy of the rigid rotor with
// harmonic vibrations, in which soft vibrations turn into free rotations.
//
// The way is: Differences (the Hessian, 6N+1 gradients), NormalModes, Modes.Real
// (is it a minimum?), then a Species, whose At gives the parts at any number of
// temperatures for next to nothing:
//
//	h, err := thermo.Differences(ctx, surface, x, 0)
//	modes, err := thermo.NormalModes(h.Matrix, x, thermo.Masses(numbers, isotopes))
//	quanta, turned, err := modes.Real()
//	species := thermo.Species{Body: modes.Body, Symmetry: 1, Quanta: quanta}
//	g := h.Energy + species.At(298.15, thermo.OneMolar).FreeEnergy()
//
// Source of the treatment of soft modes: S. Grimme, Chem. Eur. J. 2012, 18,
// 9955, doi:10.1002/chem.201200497, eqs. 3 to 8; of the rest: D. A. McQuarrie,
// Statistical Mechanics (1976), chapters 5, 6 and 8.
//
// # Units
//
// Atomic units: hartree, bohr, electron masses. A vibration is given by its
// quantum h c nu in hartree, negative for an imaginary one; divided by
// units.Wavenumber it is in cm^-1. Temperatures are kelvin, entropies
// hartree/kelvin.
//
// # What is left out
//
// Anharmonicity, hindered rotation as such, electronic states above the ground
// state (closed shells are assumed), nuclear spin, and the quantum nature of
// rotation, which counts for H2 alone at room temperature. No frequency is
// scaled.
//
// # Noise
//
// Seen with GFN2-xTB, a ligand of 29 atoms at 298.15 K (pdb-1p62 of the reference
// molecules), each gradient started from its neighbour's state: G in kcal/mol
// above that with a step of 0.01 bohr and accuracy 1e-4, in gas and in water.
//
//	step, bohr      0.001  0.002  0.005  0.010  0.020  0.030  0.050
//	gas    1e-4     0.003  0.003  0.002  0     -0.010 -0.027 -0.090
//	gas    0.1     -0.004  0.011  0.005  0.002 -0.009 -0.027 -0.090
//	gas    1       -0.736 -0.224 -0.001 -0.008  0.001 -0.024 -0.088
//	water  1e-4    -0.035 -0.031 -0.000  0     -0.007 -0.009 -0.044
//	water  0.1     -0.026 -0.023  0.003  0.002 -0.007 -0.009 -0.044
//	water  1       -0.782 -0.189  0.012  0.012  0.003 -0.004 -0.041
//
// So the step adds some 0.01 kcal/mol in gas and 0.02 in water (0.03 with 50
// atoms). In water the surface itself is the limit, for it is summed over
// directions that are fixed in space. Turning a molecule before it is relaxed and
// differentiated moves G, over six orientations, by (largest less smallest)
//
//	relaxed to, hartree/bohr (rms)   1e-4   1e-5   3e-6
//	29 atoms                         0.25   0.22   0.14
//	50 atoms (csd-VIMYUL)            0.78   0.35   0.23
//
// So take no difference of 0.2 kcal/mol in water for real, and relax to Stationary
// before Differences: soft modes that are off their minimum are wrong. Of 25
// conformers of melatonin and 25 of butanediol, each in gas and in water, three
// have an imaginary mode (3, 13 and 79 cm^-1) when they are relaxed to 1e-4, and G
// moves by up to 1.4 kcal/mol when they are relaxed on; relaxed to 1e-5, none has.
// The spread (standard deviation) of G above the energy between these conformers,
// which is what all this is for, is 0.4 to 0.6 kcal/mol.
//
// # Symmetry and copies
//
// Rotational symmetry may be counted in one place only. Where an ensemble gives
// each conformer a number of copies, common/sigma for its symmetry and 2 for a
// mirror image that is not listed (screen/ensemble, Copies), the Species of every
// conformer has Symmetry 1: then exp(-G/kT) times copies is the right weight.
// With Symmetry sigma, G rises by kT ln sigma, and the copies would have to be
// the mirror images alone. Mirror images have equal G, so that factor is never in
// here. Symmetric rotors (methyl) are in neither: they multiply all conformers
// alike. The absolute entropy of one symmetric compound, for comparison with a
// table, needs its real Symmetry.
package thermo
