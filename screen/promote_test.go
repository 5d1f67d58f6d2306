package screen

import (
	"math"
	"slices"
	"testing"

	"torsieve/internal/units"
)

// The window must hold 99 % of what counts: 2.8, 3.2, 4.0 and 9.3 kcal/mol by
// the number of rotatable bonds (0 to 3, 4 and 5, 6 to 8, 9 and more), measured
// for GFN2-xTB on the conformers of Folmsbee and Hutchison (2021).
func TestWindowHoldsWhatCounts(t *testing.T) {
	for _, tc := range []struct {
		rotatable int
		least     float64
	}{{0, 2.8}, {3, 2.8}, {4, 3.2}, {5, 3.2}, {6, 4.0}, {8, 4.0}, {12, 9.3}, {30, 9.3}} {
		if got := WindowFor(tc.rotatable) / units.KcalPerMol; got < tc.least {
			t.Errorf("%d rotatable bonds: %.1f kcal/mol, want at least %.1f", tc.rotatable, got, tc.least)
		}
	}
}

func candidates(last int, energies ...float64) []Conformer {
	var out []Conformer
	for i, e := range energies {
		c := Conformer{Number: i + 1, Energies: []float64{math.NaN(), math.NaN(), math.NaN()}, Last: last}
		c.Energies[last] = e * units.KcalPerMol
		out = append(out, c)
	}
	return out
}

func TestPromoteByCapAndWindow(t *testing.T) {
	o := Defaults()
	o.MaxConformers, o.Window = 2, 3*units.KcalPerMol
	run := func(last int, c []Conformer) *ligandRun {
		return &ligandRun{machine: &machine{options: o}, ligand: &Ligand{Mol: parsed(t, "CCCC")}, result: &Result{}, conformers: c}
	}
	capped := run(0, candidates(0, 5, 1, 2))
	if up := capped.promote(1); !slices.Equal(up, []int{0, 1}) {
		t.Errorf("the cap lets %v go up: the order is the generator's, not the energies'", up)
	}
	if len(capped.result.Warnings) != 1 || capped.conformers[2].Why == "" {
		t.Errorf("nothing is said of the one that stays: %q, %q", capped.result.Warnings, capped.conformers[2].Why)
	}
	windowed := run(1, candidates(1, 5, 1, 3.9, 4.1))
	if up := windowed.promote(2); !slices.Equal(up, []int{1, 2}) {
		t.Errorf("the window lets %v go up", up)
	}
	if why := windowed.conformers[3].Why; why != "3.10 kcal/mol above the lowest at this tier, the window is 3.0" {
		t.Errorf("why: %q", why)
	}
}

// Rings count from eight atoms up, less three bonds for the closure: cyclododecane
// 9, cyclohexane none; what is counted as rotatable outside stays.
func TestFlexibility(t *testing.T) {
	for _, tc := range []struct {
		smiles string
		want   int
	}{{"CCCC", 1}, {"C1CCCCC1", 0}, {"C1CCCCCCCCCCC1", 9}, {"c1ccccc1", 0}, {"CCCC1CCCCCCCCCCC1", 11}} {
		if got := Flexibility(parsed(t, tc.smiles)); got != tc.want {
			t.Errorf("%s: %d, want %d", tc.smiles, got, tc.want)
		}
	}
}
