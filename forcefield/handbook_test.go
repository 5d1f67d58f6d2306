package forcefield

import (
	"math"
	"slices"
	"testing"

	"torsieve/internal/geom"
)

// A fact is an entry of handbook.json: what experiment or high-level theory
// says, with its source there.
type fact struct {
	Molecule, Quantity, Unit string
	Value                    any
	Uncertainty              float64
}

// A trial is how the force field answers a fact. within is the error known of
// this tier beyond the fact's own uncertainty, in the fact's unit: what the
// published force field with the corrections reaches, rounded up.
type trial struct {
	molecule, quantity string
	part               int // of a value that is a list
	smiles             string
	answer             func(l *lab) float64
	within             float64
}

// difference is the energy of the minimum near to above that near from.
func difference(from, to []hold) func(*lab) float64 {
	return func(l *lab) float64 {
		a, _ := l.near(from...)
		b, _ := l.near(to...)
		return b - a
	}
}

// top is the relaxed energy at a dihedral above the lowest minimum.
func top(h hold) func(*lab) float64 { return func(l *lab) float64 { return l.above(h) } }

// highest is the highest relaxed energy over a third of a turn: the barrier of
// a methyl group, whose top is not where symmetry would have it.
func highest(h hold) func(*lab) float64 {
	return func(l *lab) float64 {
		low, high := math.Inf(1), math.Inf(-1)
		for h.degrees = 0; h.degrees < 120; h.degrees += 15 {
			e := l.above(h)
			low, high = math.Min(low, e), math.Max(high, e)
		}
		return high - low
	}
}

func between(a, b hold) func(*lab) float64 {
	return func(l *lab) float64 { return l.above(b) - l.above(a) }
}

// axial is the energy of the axial chair of a substituted cyclohexane above the
// equatorial one. ring are its atoms, the substituent's carbon first, and sub
// the substituent's first atom.
func axial(sub int, ring ...int) func(*lab) float64 {
	return func(l *lab) float64 {
		energies := map[bool]float64{}
		for _, up := range []float64{55, -55} {
			var holds []hold
			for n := range 3 {
				holds = append(holds, hold{ring[n], ring[n+1], ring[n+2], ring[(n+3)%6], up})
				up = -up
			}
			e, x := l.near(holds...)
			isAxial := math.Abs(geom.Dihedral(x, sub, ring[0], ring[1], ring[2])/degree) < 100
			energies[isAxial] = e
		}
		if len(energies) != 2 {
			l.t.Fatalf("chairs found: %v", energies)
		}
		return energies[true] - energies[false]
	}
}

func anti(i, j, k, l int) hold { return hold{i, j, k, l, 180} }
func syn(i, j, k, l int) hold  { return hold{i, j, k, l, 0} }
func plus(i, j, k, l int) hold { return hold{i, j, k, l, 65} }

func holds(h ...hold) []hold { return h }

var trials = []trial{
	{"butane", "gauche - anti, electronic", 0, "CCCC", difference(holds(anti(0, 1, 2, 3)), holds(plus(0, 1, 2, 3))), 0.6},
	{"pentane", "tg - tt", 0, "CCCCC", difference(holds(anti(0, 1, 2, 3), anti(1, 2, 3, 4)), holds(anti(0, 1, 2, 3), plus(1, 2, 3, 4))), 0.6},
	{"pentane", "g+g+ - tt", 0, "CCCCC", difference(holds(anti(0, 1, 2, 3), anti(1, 2, 3, 4)), holds(plus(0, 1, 2, 3), plus(1, 2, 3, 4))), 1.5},
	{"pentane", `g+x- (syn-pentane, "g+g-") - tt`, 0, "CCCCC", difference(holds(anti(0, 1, 2, 3), anti(1, 2, 3, 4)), holds(plus(0, 1, 2, 3), hold{1, 2, 3, 4, -100})), 1.3},
	{"ethane", "rotational barrier, electronic", 0, "CC", highest(syn(2, 0, 1, 5)), 0.2},
	{"propane", "barrier of one methyl", 0, "CCC", highest(syn(3, 0, 1, 2)), 0.5},
	{"isobutane", "methyl barrier", 0, "CC(C)C", highest(syn(4, 0, 1, 2)), 0.5},
	{"neopentane", "methyl barrier", 0, "CC(C)(C)C", highest(syn(5, 0, 1, 2)), 0.5},
	{"methanol", "methyl barrier, electronic", 0, "CO", highest(syn(2, 0, 1, 5)), 0.2},
	{"methylamine", "methyl barrier (torsion), electronic", 0, "CN", highest(syn(2, 0, 1, 5)), 0.5},
	{"methanethiol", "methyl barrier", 0, "CS", highest(syn(2, 0, 1, 5)), 0.2},
	{"dimethyl ether", "methyl barrier", 0, "COC", highest(syn(3, 0, 1, 2)), 0.5},
	{"hydrogen peroxide", "trans barrier; cis barrier, electronic", 0, "OO", top(anti(2, 0, 1, 3)), 0.7},
	{"hydrogen peroxide", "trans barrier; cis barrier, electronic", 1, "OO", top(syn(2, 0, 1, 3)), 0.7},
	{"hydrogen disulfide", "trans; cis barrier, electronic", 0, "SS", top(anti(2, 0, 1, 3)), 1.1},
	{"hydrogen disulfide", "trans; cis barrier, electronic", 1, "SS", top(syn(2, 0, 1, 3)), 1.1},
	{"propene", "methyl barrier (minimum: C-H eclipses C=C)", 0, "C=CC", between(syn(0, 1, 2, 6), hold{0, 1, 2, 6, 60}), 0.2},
	{"acetaldehyde", "methyl barrier (minimum: C-H eclipses C=O)", 0, "O=CC", between(syn(0, 1, 2, 4), hold{0, 1, 2, 4, 60}), 0.5},
	{"acetone", "methyl barrier", 0, "CC(C)=O", highest(syn(4, 0, 1, 2)), 0.5},
	{"toluene", "methyl barrier (V6)", 0, "Cc1ccccc1", highest(syn(7, 0, 1, 2)), 0.1},
	{"butadiene", "gauche (s-cis) - s-trans, electronic", 0, "C=CC=C", difference(holds(anti(0, 1, 2, 3)), holds(hold{0, 1, 2, 3, 30})), 0.8},
	{"acrolein", "s-cis - s-trans", 0, "C=CC=O", difference(holds(anti(0, 1, 2, 3)), holds(syn(0, 1, 2, 3))), 1.5},
	{"styrene", "barrier to perpendicular; minimum planar (flat)", 0, "C=Cc1ccccc1", top(hold{0, 1, 2, 3, 90}), 2},
	{"biphenyl", "barriers at 0 and 90", 0, "c1ccccc1-c1ccccc1", top(syn(4, 5, 6, 7)), 3.2},
	{"biphenyl", "barriers at 0 and 90", 1, "c1ccccc1-c1ccccc1", top(hold{4, 5, 6, 7, 90}), 1.2},
	{"1,2-dichloroethane", "gauche - anti", 0, "ClCCCl", difference(holds(anti(0, 1, 2, 3)), holds(plus(0, 1, 2, 3))), 1},
	{"formic acid", "E (cis) - Z (trans OH nomenclature), energy", 0, "O=CO", difference(holds(syn(0, 1, 2, 4)), holds(anti(0, 1, 2, 4))), 1},
	{"acetic acid", "E - Z", 0, "CC(=O)O", difference(holds(syn(2, 1, 3, 7)), holds(anti(2, 1, 3, 7))), 1},
	{"methyl formate", "E - Z", 0, "O=COC", difference(holds(syn(0, 1, 2, 3)), holds(anti(0, 1, 2, 3))), 1},
	{"methyl acetate", "E - Z", 0, "CC(=O)OC", difference(holds(syn(2, 1, 3, 4)), holds(anti(2, 1, 3, 4))), 1},
	{"N-methylformamide", "E (cis amide) - Z (trans amide)", 0, "O=CNC", difference(holds(syn(0, 1, 2, 3)), holds(anti(0, 1, 2, 3))), 1},
	{"N-methylacetamide", "E (cis amide) - Z (trans amide)", 0, "CC(=O)NC", difference(holds(syn(2, 1, 3, 4)), holds(anti(2, 1, 3, 4))), 1},
	{"N,N-dimethylformamide", "rotation barrier, activation enthalpy", 0, "O=CN(C)C", top(hold{0, 1, 2, 3, 90}), 4},
	{"methyl vinyl ether", "s-trans (skew) - s-cis", 0, "C=COC", difference(holds(syn(0, 1, 2, 3)), holds(anti(0, 1, 2, 3))), 0.5},
	{"anisole", "perpendicular - planar", 0, "COc1ccccc1", top(hold{0, 1, 2, 3, 90}), 1},
	{"thioanisole", "perpendicular - planar", 0, "CSc1ccccc1", top(hold{0, 1, 2, 3, 90}), 1},
	{"phenol", "OH barrier", 0, "Oc1ccccc1", top(hold{7, 0, 1, 2, 90}), 6.5},
	{"nitrobenzene", "torsion barrier", 0, "O=[N+]([O-])c1ccccc1", top(hold{0, 1, 3, 4, 90}), 3},
	{"benzaldehyde", "torsion barrier", 0, "O=Cc1ccccc1", top(hold{0, 1, 2, 3, 90}), 2},
	{"cyclohexane", "twist-boat - chair", 0, "C1CCCCC1", difference(nil, holds(hold{0, 1, 2, 3, 30}, hold{3, 4, 5, 0, 30})), 3.5},
	{"cyclohexane", "boat (saddle) - chair", 0, "C1CCCCC1", func(l *lab) float64 { return l.above(syn(0, 1, 2, 3), syn(3, 4, 5, 0)) }, 3.5},
	{"cyclohexane", "ring torsion", 0, "C1CCCCC1", func(l *lab) float64 { return math.Abs(geom.Dihedral(l.x, 0, 1, 2, 3)) / degree }, 1},
	{"dimethyl disulfide", "C-S-S-C dihedral", 0, "CSSC", func(l *lab) float64 { return math.Abs(geom.Dihedral(l.x, 0, 1, 2, 3)) / degree }, 10},
	{"cyclohexane-CH3", "A value: G(axial) - G(equatorial), 298 K or low-temperature NMR", 0, "CC1CCCCC1", axial(0, 1, 2, 3, 4, 5, 6), 0.5},
	{"cyclohexane-tBu", "A value: G(axial) - G(equatorial), 298 K or low-temperature NMR", 0, "CC(C)(C)C1CCCCC1", axial(1, 4, 5, 6, 7, 8, 9), 3.3},
	{"cyclohexane-F", "A value: G(axial) - G(equatorial), 298 K or low-temperature NMR", 0, "FC1CCCCC1", axial(0, 1, 2, 3, 4, 5, 6), 0.7},
	{"cyclohexane-Cl", "A value: G(axial) - G(equatorial), 298 K or low-temperature NMR", 0, "ClC1CCCCC1", axial(0, 1, 2, 3, 4, 5, 6), 1},
	{"cyclohexane-Br", "A value: G(axial) - G(equatorial), 298 K or low-temperature NMR", 0, "BrC1CCCCC1", axial(0, 1, 2, 3, 4, 5, 6), 1},
	{"cyclohexane-CN", "A value: G(axial) - G(equatorial), 298 K or low-temperature NMR", 0, "N#CC1CCCCC1", axial(1, 2, 3, 4, 5, 6, 7), 1.3},
	{"cyclohexane-OH", "A value: G(axial) - G(equatorial), 298 K or low-temperature NMR", 0, "OC1CCCCC1", axial(0, 1, 2, 3, 4, 5, 6), 0.7},
	{"cyclohexane-CF3", "A value: G(axial) - G(equatorial), 298 K or low-temperature NMR", 0, "FC(F)(F)C1CCCCC1", axial(1, 4, 5, 6, 7, 8, 9), 1.3},
}

// TestHandbook asks the default variant for textbook facts and holds it to its
// known error.
func TestHandbook(t *testing.T) {
	var file struct{ Values []fact }
	load(t, "handbook.json", &file)
	for _, c := range trials {
		t.Run(c.molecule+" "+c.quantity, func(t *testing.T) {
			n := slices.IndexFunc(file.Values, func(f fact) bool { return f.Molecule == c.molecule && f.Quantity == c.quantity })
			if n < 0 {
				t.Fatal("no such fact")
			}
			want, ok := file.Values[n].Value.(float64)
			if !ok {
				want, ok = file.Values[n].Value.([]any)[c.part].(float64)
			}
			if !ok {
				t.Fatal("the fact has no number")
			}
			got := c.answer(newLab(t, c.smiles, Defaults(), 6))
			t.Logf("%.3f, want %.3f", got, want)
			near(t, "answer", got, want, c.within+file.Values[n].Uncertainty)
		})
	}
}
