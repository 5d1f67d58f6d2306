package forcefield

import (
	"math"

	"torsieve/internal/units"
)

// The formulas that make the constants of the terms out of atom types.
// Source: Rappe et al., J. Am. Chem. Soc. 1992, 114, 10024; equation numbers
// beside each.

const (
	// forcePrefactor is 664.12 kcal/mol angstrom, of eqs. 6 and 13.
	forcePrefactor = 664.12 * units.KcalPerMol * units.Angstrom
	bondOrderShare = 0.1332 // lambda of eq. 3
)

// orderCorrection is r_BO of eq. 3, bohr: what a bond order n takes off.
func orderCorrection(a, b *atomType, n float64) float64 {
	return -bondOrderShare * (a.Radius + b.Radius) * math.Log(n)
}

// electronegativityCorrection is r_EN of eq. 4, bohr.
func electronegativityCorrection(a, b *atomType) float64 {
	d := math.Sqrt(a.Chi) - math.Sqrt(b.Chi)
	return a.Radius * b.Radius * d * d / (a.Chi*a.Radius + b.Chi*b.Radius)
}

// naturalLength is eq. 2, bohr. The paper prints r_EN with a plus sign; its own
// structures are met with a minus.
func naturalLength(a, b *atomType, n float64) float64 {
	return a.Radius + b.Radius + orderCorrection(a, b, n) - electronegativityCorrection(a, b)
}

// stretchConstant is eq. 6, hartree/bohr^2.
func stretchConstant(a, b *atomType, r0 float64) float64 {
	return forcePrefactor * a.Z * b.Z / (r0 * r0 * r0)
}

// bendConstant is eq. 13, hartree/rad^2, for arms of natural length ra and rb
// at a natural angle with cosine c0. The paper's beta, 664.12 divided by both
// lengths in angstrom, makes the square of an angstrom a part of the formula.
func bendConstant(a, b *atomType, ra, rb, c0 float64) float64 {
	r2 := ra*ra + rb*rb - 2*ra*rb*c0
	return forcePrefactor * units.Angstrom * units.Angstrom * a.Z * b.Z / (r2 * r2 * math.Sqrt(r2)) * (3*ra*rb*(1-c0*c0) - r2*c0)
}

// resonanceBarrier is eq. 17, hartree: about a bond of order n between sp2 atoms.
func resonanceBarrier(a, b *atomType, n float64) float64 {
	return 5 * math.Sqrt(a.U*b.U) * (1 + 4.18*math.Log(n))
}

// A rule is what a torsion has from its central bond.
type rule struct {
	barrier float64 // hartree, all paths together; 0: no torsion
	n       int32
	sign    float64 // cos(n phi0)
}

// torsionRule is eqs. 15 to 17 and the text around them. jNext and kNext say
// whether j and k have another sp2 neighbour than each other.
func torsionRule(j, k *atomType, order float64, jNext, kNext bool) rule {
	if !j.sp23 || !k.sp23 {
		return rule{}
	}
	if j.Class == classSP2 && k.Class == classSP2 {
		return rule{resonanceBarrier(j, k, order), 2, 1}
	}
	if j.Class == classSP3 && k.Class == classSP3 {
		if j.group16 && k.group16 {
			return rule{math.Sqrt(group16Barrier(j) * group16Barrier(k)), 2, -1}
		}
		return rule{math.Sqrt(j.V * k.V), 3, -1}
	}
	if j.Class == classSP2 { // from here on j is the sp3 end
		j, k, kNext = k, j, jNext
	}
	switch {
	case j.group16 && !k.group16:
		return rule{resonanceBarrier(j, k, order), 2, -1}
	case kNext:
		return rule{2 * units.KcalPerMol, 3, -1}
	}
	return rule{1 * units.KcalPerMol, 6, 1}
}

// group16Barrier is the barrier's share of one oxygen or heavier element in a
// bond between two of its group.
func group16Barrier(a *atomType) float64 {
	if a.Number == 8 {
		return 2 * units.KcalPerMol
	}
	return 6.8 * units.KcalPerMol
}

// wellOf combines two atoms' van der Waals constants, eqs. 21b and 22.
func wellOf(a, b *atomType) (x2, d float64) { return a.X * b.X, math.Sqrt(a.D * b.D) }
