package forcefield

// Options are the choices that the published force field leaves open. Reference
// has none of ours, Defaults all that are worth having.
type Options struct {
	Charges           string // "none" or "eeq": screened Coulomb term, see Surface.FreezeCharges
	Corrections       bool   // torsions and bond lengths fitted for organic molecules
	NitrogenInversion bool   // sp2 nitrogen is kept flat with 6 kcal/mol; the paper has 0
	Ammonium          bool   // nitrogen with four neighbours is tetrahedral; the paper keeps 106.7 degrees
	SmallRings        bool   // natural angles of rings of three and four
	PolarHydrogens    bool   // hydrogen on N, O, S is smaller by 15 % when there are charges
	SoftCore          bool   // repulsion without violence, for starting structures
}

// Defaults returns the variant that torsieve uses.
func Defaults() Options {
	return Options{
		Charges: "eeq", Corrections: true, NitrogenInversion: true, Ammonium: true, SmallRings: true,
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
