package page

import (
	"math"
	"slices"
	"strings"
	"testing"

	"torsieve/molecule/load"
	"torsieve/molecule/smiles"
	"torsieve/screen"
)

// taken reads a line as a run would, with what the intake warns of.
func taken(t *testing.T, text, solvent string) []*screen.Ligand {
	t.Helper()
	m, _, err := smiles.Parse(text)
	if err != nil {
		t.Fatal(err)
	}
	in := screen.NewIntake()
	in.ExpandStereo, in.Solvent = true, solvent
	return in.Take("ligands.smi", load.Record{ID: "x", Mol: m, Record: 1, Line: 1})
}

// The rules go by words of warnings. These are the run's own, so that a change
// of wording there is noticed here.
func TestRulesKnowTheWarningsOfARun(t *testing.T) {
	for _, c := range []struct {
		smiles, solvent string
		say             rule
	}{
		{"CC(=O)O", "water", drawForm},
		{"CCN", "water", drawForm},
		{"CC(O)F", "water", stateStereo},
		{"CC(=O)[O-]", "", takeSolvent},
		{"[NH3+]CC(=O)[O-]", "", takeSolvent},
	} {
		l := taken(t, c.smiles, c.solvent)[0]
		if c.say(&screen.Result{Ligand: l, Mol: l.Mol, Warnings: l.Warnings}) == "" {
			t.Errorf("%s: nothing is said to the warnings %q", c.smiles, l.Warnings)
		}
		if c.say(&screen.Result{Ligand: l, Mol: l.Mol}) != "" {
			t.Errorf("%s: something is said without a warning", c.smiles)
		}
	}
}

// Causes are read from the reasons that the run writes (screen/pipeline.go and
// promote.go); what is not known counts as lost, never as nothing.
func TestStepsCountWhatWasLeft(t *testing.T) {
	r := butanol(t, "x", 0, 7)
	for i, why := range []string{"same shape as 1", "beyond the cap of 2 conformers", "hf: did not converge", "semiempirical: changed its bonds: C1-C2 is broken"} {
		c := &r.Conformers[i+1]
		c.Why, c.Rank = why, 0
		c.Last = []int{1, 0, 1, 0}[i]
	}
	steps := stepsOf(r)
	want := [][]string{
		{"1 beyond the cap on conformers"},
		{"1 the same shape as a lower one", "1 above the energy window", "1 lost: no energy, or another molecule"},
		{"1 lost: no energy, or another molecule"},
	}
	for k, s := range steps {
		if !slices.Equal(s.Left, want[k]) {
			t.Errorf("%s left %q behind, want %q", s.Tier, s.Left, want[k])
		}
	}
	if n := count(r, lost); n != 2 {
		t.Errorf("%d lost, want 2", n)
	}
	if text := raiseCap(r); !strings.Contains(text, "1 shape was left at the cap") || !strings.Contains(text, "--max-conformers 8") {
		t.Errorf("advice %q", text)
	}
}

func TestAdviceFromTheEnsemble(t *testing.T) {
	r := butanol(t, "x", 0, 5)
	if text := wideBar(r); !strings.Contains(text, "from 1.0 % to 60 %") || !strings.Contains(text, "all 4 conformers") {
		t.Errorf("advice %q", text)
	}
	if text := methodsDisagree(r); text != "" {
		t.Errorf("the levels agree, but: %s", text)
	}
	r.Conformers[2].Energies[1] = -60
	if text := methodsDisagree(r); !strings.Contains(text, "3 by the semi-empirical one, 1 by the last") {
		t.Errorf("advice %q", text)
	}
	r.Ensembles[0].Bars = nil
	if wideBar(r) != "" || noBar(r) == "" {
		t.Error("without bars the page must say so")
	}
	for status, say := range map[screen.Status]rule{screen.Refused: mendInput, screen.Unreadable: mendInput, screen.Failed: retryFailed, screen.Stopped: runAgain} {
		if say(&screen.Result{Status: status}) == "" || say(&screen.Result{Status: screen.Done}) != "" {
			t.Errorf("%s: no advice, or advice where all is done", status)
		}
	}
}

// Coordinates come out of the packing to half a step, angles to half a degree.
func TestPacking(t *testing.T) {
	r := butanol(t, "x", 0, 4)
	f := figuresOf(r, lowestByTier(r), 3)
	if f.Step != finest || len(f.shapes) != 3 {
		t.Fatalf("step %g, %d shapes", f.Step, len(f.shapes))
	}
	const angstrom = 1.8897261246 // bohr, CODATA 2018
	x := r.Conformers[r.Kept[1]].X
	for k := 3; k < len(x); k++ {
		have := float64(f.shapes[1][k]-f.shapes[1][k-3]) * f.Step
		if want := (x[k] - x[k-3]) / angstrom; math.Abs(have-want) > 1.001*f.Step {
			t.Errorf("coordinate %d: %.4f angstrom from its neighbour, want %.4f", k, have, want)
		}
	}
}

// Cyclohexane's chair and its mirror image are the poles of the map (Cremer,
// Pople 1975: theta 0 and 180 degrees, Q 0.56 to 0.58 angstrom for real rings;
// here every atom is 0.25 angstrom out of the plane: Q = 0.25 sqrt(6) = 0.612).
func TestChairsArePoles(t *testing.T) {
	const angstrom = 1.8897261246
	for _, side := range []float64{1, -1} {
		p := pucker{Atoms: []int{0, 1, 2, 3, 4, 5}}
		var x []float64
		for k := range 6 {
			sin, cos := math.Sincos(float64(k) * math.Pi / 3)
			x = append(x, 1.4*angstrom*cos, 1.4*angstrom*sin, side*0.25*angstrom*float64(1-2*(k%2)))
		}
		p.add(x)
		if q := float64(p.Amplitude[0]); math.Abs(q-0.25*math.Sqrt(6)) > 1e-6 {
			t.Errorf("Q %.4f", q)
		}
		if th := p.Theta[0]; th != 0 && th != 180 {
			t.Errorf("theta %d", th)
		}
	}
}

func TestPercent(t *testing.T) {
	for p, want := range map[float64]string{0: "< 0.1 %", 0.0004: "< 0.1 %", 0.0123: "1.2 %", 0.0996: "10 %", 0.5: "50 %", 0.9876: "99 %", 0.9951: "99.5 %", 0.9999: "> 99.9 %", 1: "100 %"} {
		if have := percent(p); have != want {
			t.Errorf("%g is %s, want %s", p, have, want)
		}
	}
}
