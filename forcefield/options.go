package forcefield

// Options are the choices that the published force field leaves open. Reference
// has none of ours, Defaults all that are worth having.
type Options struct {
	Charges           string // "none" or "eeq": screened Coulomb term, see Surface.FreezeCharges
	Corrections       bool   // torsions and bond lengths fitted for organic molecules
	NitrogenInversion bool   // sp2 nitrogen is kept flat with 6 kcal/mol; the paper has 0
	Ammonium          bool   // nitrogen with four neighbours is tetrahedral; the paper keeps 106.7 degrees
	SmallRings        bool   // natural angles of rings of three and four
	PolarHydrogens    bool   // with charges: hydrogen on N, O, S is 15 % smaller towards atoms four or more bonds away
	SoftCore          bool   // repulsion without violence, for starting structures
}

// Defaults returns the variant that torsieve uses: all of ours.
//
// Measured on 1460 conformers of 150 molecules (D. Folmsbee, G. Hutchison, Int.
// J. Quantum Chem. 2021, 121, e26381; reference DLPNO-CCSD(T)), the part whose
// bonding the published force fields agree on. Mean absolute deviation of
// relative energies in kcal/mol, at the given geometries and after relaxation;
// last, the relaxed window that keeps 99 % of the conformers within 3 kcal/mol:
//
//	Reference              2.32  0.75  4.5
//	with corrections       2.32  0.73  4.2
//	with charges           2.29  0.75  4.1
//	with both              2.28  0.72  3.9
//	both, small polar H    1.37  0.71  3.9
//
// All are rough (conformers taken as equal deviate by 0.66): choose with a wide
// window.
func Defaults() Options {
	return Options{
		Charges: "eeq", Corrections: true, NitrogenInversion: true, Ammonium: true, SmallRings: true, PolarHydrogens: true,
	}
}

// Reference returns the published force field without any addition, which the
// check values in testdata/reference/uff are for.
func Reference() Options { return Options{Charges: "none"} }

// nitrogenBarrier is the inversion constant of sp2 nitrogen, kcal/mol.
func (o Options) nitrogenBarrier() float64 {
	if o.NitrogenInversion {
		return 6
	}
	return 0
}
