package handbook

import (
	"slices"
	"testing"
)

// What the tiers miss by more than twice their known errors: the methods' own
// failures (TestKnownErrors and the tiers' tests show that they are), but for
// the one that says otherwise. A row that enters or leaves these lists fails the
// test, so that nobody overlooks it.

// missedByGFN2 are facts that GFN2-xTB misses.
var missedByGFN2 = []string{
	// Folded hexanes are off by 0.4 to 0.5 kcal/mol, the set by 0.2 on average.
	"hexane ggg", "hexane gxg", "hexane xgx",
	// Lone pairs on neighbouring atoms: turns about S-S, N-N, O-N.
	"hydrogen disulfide trans", "hydrogen disulfide cis", "hydrazine cis", "methyl nitrite", "nitrous acid",
	// Conjugation holds too fast.
	"phenol barrier", "aniline torsion", "bifuran syn", "bithiophene anti", "bithiophene syn", "dimethylformamide",
	// Fluorine and ether oxygen: gauche and anti are out of balance.
	"difluoroethane", "difluoroethane angle", "methyl ethyl ether",
	// Rotamers of OH, and the balance of E and Z in acids and esters.
	"ethanol", "propanol span", "glycine", "glycine minima", "formic acid", "methyl acetate",
	// Cis amides come out too stable by 1.9 to 2.7 kcal/mol.
	"N-methylformamide", "N-methylacetamide", "N-methylacetanilide", "alanyl xai",
	// No minimum at phi/psi -101/11.
	"glycyl xad",
	// The anomeric effect comes out too large; the facts are from solution.
	"methoxytetrahydropyran", "methoxytetrahydropyran enthalpy", "chlorotetrahydropyran", "hydroxytetrahydropyran",
	// The axial form comes out too stable.
	"cyclohexane-CO2H", "N-methylpiperidine", "piperidine",
}

// missedByHF3c are facts that HF-3c misses at the geometries of GFN2-xTB.
var missedByHF3c = []string{
	// Axial groups come out too stable, by 1.3 kcal/mol on average and 3.7 at worst; vinyl over the ring is one of the shapes.
	// Hartree-Fock with D3 in def2-SVP at the same geometries has
	// N-methylpiperidine at 3.1 and methylcyclohexane at 1.4 kcal/mol.
	"cyclohexane-vinyl", "cyclohexane-C6H5", "cyclohexane-Br", "cyclohexane-OCH3", "cyclohexane-NH2", "cyclohexane-CN",
	"cyclohexane-CO2H", "cyclohexane-CO2CH3", "cyclohexane-NO2", "cyclohexane-C#CH",
	"N-methylpiperidine", "trans-1,4-dimethylcyclohexane diaxial",
	// The anomeric effect is too large, as above.
	"methoxytetrahydropyran", "methoxytetrahydropyran enthalpy", "chlorotetrahydropyran", "hydroxytetrahydropyran",
	// Small molecules with strong electronic effects, at geometries of GFN2-xTB.
	"aniline torsion", "bithiophene syn", "dimethyl disulfide cis", "butadiene", "acrolein", "methyl vinyl ether",
	"difluoroethane", "dimethoxyethane", "methyl ethyl ether", "methyl nitrite", "formic acid", "methyl formate",
	"N-methylacetanilide",
}

// checkMisses fails where a tier misses what is not known, or no longer misses
// what is. The force field's facts are tested in its own package.
func checkMisses(t *testing.T, rows []row) {
	t.Helper()
	for _, r := range rows {
		_, g, h := r.verdicts()
		compare(t, gfn2.name, r.fact, r.quantum.value, g, missedByGFN2)
		compare(t, "HF-3c", r.fact, r.quantum.hf, h, missedByHF3c)
	}
}

func compare(t *testing.T, tier string, f fact, value float64, v verdict, known []string) {
	t.Helper()
	misses := v == outside || v == absent
	switch listed := slices.Contains(known, f.ID); {
	case misses && !listed:
		t.Errorf("%s: %s: %s with %.3f, not known to be", f.ID, tier, v, value)
	case !misses && listed:
		t.Errorf("%s: %s: no longer outside with %.3f", f.ID, tier, value)
	}
}
