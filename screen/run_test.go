package screen

import (
	"context"
	"errors"
	"math"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"torsieve/internal/units"
	"torsieve/molecule"
)

func threeTiers() []Tier {
	return []Tier{fieldTier{name: "forcefield"}, fieldTier{name: "semiempirical"}, fieldTier{name: "hf", flat: true}}
}

// What comes out depends on what goes in, not on how many work at it, on the
// memory that they share or on the order of the ligands.
func TestRunDoesNotDependOnJobs(t *testing.T) {
	texts := []string{"CCCC", "CCCO", "OCCO", "CC(C)CC", "NCC(=O)O"}
	run := func(jobs int, memory int64) []*Result {
		o := quick()
		o.Jobs, o.Memory = jobs, memory
		res, err := results(t.Context(), t, ligandsOf(t, NewIntake(), texts...), threeTiers(), o)
		if err != nil {
			t.Fatal(err)
		}
		return res
	}
	want := run(1, 4<<30)
	ignore := cmp.Options{
		cmpopts.IgnoreFields(Result{}, "Took", "Ligand", "Mol"), cmpopts.EquateNaNs(),
	}
	for _, other := range [][]*Result{run(4, 4<<30), run(3, leastMemory)} {
		if d := cmp.Diff(want, other, ignore); d != "" {
			t.Errorf("results differ:\n%s", d)
		}
	}
}

// Butane has an anti and a gauche form. Both tiers are one force field here, so
// the last tier's energies are the first one's; populations follow from them,
// with two gauche forms to one anti.
func TestRunButane(t *testing.T) {
	res, err := results(t.Context(), t, ligandsOf(t, NewIntake(), "CCCC"), threeTiers(), quick())
	if err != nil {
		t.Fatal(err)
	}
	r := res[0]
	if r.Status != Done || len(r.Kept) != 2 {
		t.Fatalf("status %s (%s), %d conformers kept: want anti and gauche", r.Status, r.Reason, len(r.Kept))
	}
	anti, gauche := r.Conformers[r.Kept[0]], r.Conformers[r.Kept[1]]
	if anti.Copies != 1 || gauche.Copies != 2 {
		t.Errorf("copies %d and %d, want 1 and 2", anti.Copies, gauche.Copies)
	}
	if d := math.Abs(anti.Energies[0] - anti.Energies[2]); d > 1e-6 {
		t.Errorf("one force field gave energies that differ by %.1e hartree", d)
	}
	gap := gauche.Final() - anti.Final()
	for i, temperature := range []float64{298.15, 400} {
		ratio := 2 * math.Exp(-gap/(temperature*units.Kelvin))
		want := 1 / (1 + ratio)
		if got := r.Ensembles[i].Populations[0]; math.Abs(got-want) > 1e-9 {
			t.Errorf("%g K: anti has %.6f, want %.6f", temperature, got, want)
		}
	}
}

// One structure under two ids is computed once, and told.
func TestRunSharesStructures(t *testing.T) {
	computed := 0
	tiers := threeTiers()
	o := quick()
	o.Watch = func(e Event) {
		if e.Kind == Begun {
			computed++
		}
	}
	res, err := results(t.Context(), t, ligandsOf(t, NewIntake(), "OCC", "CCO"), tiers, o)
	if err != nil {
		t.Fatal(err)
	}
	if computed != 1 {
		t.Errorf("%d ligands were computed, want 1", computed)
	}
	if len(res[1].Kept) == 0 || !strings.Contains(strings.Join(res[1].Warnings, ";"), "same structure as OCC") {
		t.Errorf("the second has %d conformers and the warnings %q", len(res[1].Kept), res[1].Warnings)
	}
}

// Enantiomers have mirror images of the same energies: computed once. Each
// result shows its own configuration.
func TestRunMirrorsEnantiomers(t *testing.T) {
	in := NewIntake()
	in.ExpandStereo = true
	ligands := ligandsOf(t, in, "CC(N)CO", "C[C@H](N)CC", "OC[C@@H](C)N")
	computed := 0
	o := quick()
	o.Watch = func(e Event) {
		if e.Kind == Begun {
			computed++
		}
	}
	res, err := results(t.Context(), t, ligands, threeTiers(), o)
	if err != nil {
		t.Fatal(err)
	}
	if computed != 2 {
		t.Errorf("%d ligands were computed, want 2: alaninol and butan-2-amine", computed)
	}
	a, b := res[0], res[1]
	if len(a.Kept) == 0 || len(a.Kept) != len(b.Kept) || !strings.Contains(strings.Join(b.Warnings, ";"), "enantiomer of CC(N)CO~1") {
		t.Fatalf("%d and %d conformers, warnings %q", len(a.Kept), len(b.Kept), b.Warnings)
	}
	for k := range a.Kept {
		x, y := a.Conformers[a.Kept[k]], b.Conformers[b.Kept[k]]
		if x.Final() != y.Final() {
			t.Errorf("conformer %d: %.9f and %.9f hartree", k+1, x.Final(), y.Final())
		}
	}
	for _, r := range res {
		if r.Mol.SMILES() != r.Ligand.SMILES {
			t.Errorf("%s: the result is of %s", r.Ligand.ID, r.Mol.SMILES())
		}
		for _, i := range r.Kept {
			if err := SameMolecule(r.Mol, r.Conformers[i].X); err != nil {
				t.Errorf("%s, conformer %d: %v", r.Ligand.ID, i+1, err)
			}
		}
	}
}

// A panic, an error and a refusal each end one ligand, or one conformer, and
// nothing else.
func TestRunContainsFaults(t *testing.T) {
	var stacks int
	for _, tc := range []struct {
		name   string
		before func(context.Context, *molecule.Molecule) error
		status Status
		reason string
	}{
		{"panic", func(_ context.Context, m *molecule.Molecule) error {
			if m.HeavyAtoms() == 3 {
				panic("index out of range")
			}
			return nil
		}, Failed, "a fault in the program"},
		{"error", func(_ context.Context, m *molecule.Molecule) error {
			if m.HeavyAtoms() == 3 {
				return errors.New("charges not self-consistent")
			}
			return nil
		}, Failed, "charges not self-consistent"},
	} {
		t.Run(tc.name, func(t *testing.T) {
			tiers := threeTiers()
			tiers[1] = fieldTier{name: "semiempirical", before: tc.before}
			o := quick()
			o.Watch = func(e Event) {
				if e.Stack != "" {
					stacks++
				}
			}
			res, err := results(t.Context(), t, ligandsOf(t, NewIntake(), "CCCC", "CCO", "CCCCO"), tiers, o)
			if err != nil {
				t.Fatal(err)
			}
			if r := res[1]; r.Status != tc.status || !strings.Contains(r.Reason, tc.reason) {
				t.Errorf("the second ligand: %s: %s", r.Status, r.Reason)
			}
			if strings.Contains(res[1].Reason, "goroutine") {
				t.Errorf("a stack is in the reason: %s", res[1].Reason)
			}
			for _, i := range []int{0, 2} {
				if res[i].Status != Done {
					t.Errorf("ligand %d: %s: %s", i, res[i].Status, res[i].Reason)
				}
			}
		})
	}
	if stacks == 0 {
		t.Error("no watcher was told the stack of a fault")
	}
}

// The end of the context ends the run soon, with every ligand accounted for.
func TestRunStops(t *testing.T) {
	ctx, cancel := context.WithCancelCause(t.Context())
	gone := errors.New("the user has gone")
	tiers := threeTiers()
	tiers[2] = fieldTier{name: "hf", flat: true, before: func(ctx context.Context, m *molecule.Molecule) error {
		if m.HeavyAtoms() < 4 {
			return nil
		}
		cancel(gone)
		<-ctx.Done() // a long computation that looks at its context
		return ctx.Err()
	}}
	o := quick()
	o.Jobs = 1
	var kept []*Result
	begun := time.Now()
	err := Run(ctx, ligandsOf(t, NewIntake(), "CCO", "CCCC", "CCCCC"), tiers, o, func(r *Result) error {
		kept = append(kept, r)
		return nil
	})
	if !errors.Is(err, gone) {
		t.Errorf("have %v, want the cause of the end", err)
	}
	if d := time.Since(begun); d > 10*time.Second {
		t.Errorf("it took %s to stop", d)
	}
	var statuses []Status
	for _, r := range kept {
		statuses = append(statuses, r.Status)
	}
	if d := cmp.Diff([]Status{Done, Stopped, Stopped}, statuses); d != "" {
		t.Error(d)
	}
}

// A full disk ends the run.
func TestRunEndsWithKeep(t *testing.T) {
	full := errors.New("disk full")
	err := Run(t.Context(), ligandsOf(t, NewIntake(), "CCO", "CCCC"), threeTiers(), quick(), func(*Result) error { return full })
	if !errors.Is(err, full) {
		t.Errorf("have %v, want %v", err, full)
	}
}

// A tier that cannot take an element says so before any work.
func TestRunRefusesBeforeWork(t *testing.T) {
	tiers := []Tier{fieldTier{name: "forcefield"}, refusingTier{fieldTier{name: "semiempirical"}}}
	res, err := results(t.Context(), t, ligandsOf(t, NewIntake(), "CCBr", "CCO"), tiers, quick())
	if err != nil {
		t.Fatal(err)
	}
	if r := res[0]; r.Status != Refused || r.Reason != "semiempirical: no parameters for Br" || len(r.Conformers) != 0 {
		t.Errorf("%s: %s, %d conformers", r.Status, r.Reason, len(r.Conformers))
	}
	if res[1].Status != Done {
		t.Errorf("the other: %s: %s", res[1].Status, res[1].Reason)
	}
}

type refusingTier struct{ fieldTier }

func (t refusingTier) Surface(m *molecule.Molecule) (Surface, error) {
	for _, z := range m.Numbers() {
		if z == 35 {
			return nil, errors.New("semiempirical: no parameters for Br")
		}
	}
	return t.fieldTier.Surface(m)
}

func TestOptionsCheckSaysAll(t *testing.T) {
	o := Defaults()
	o.Temperatures, o.Window, o.Jobs, o.Memory, o.MaxConformers = []float64{math.NaN()}, -1, 0, 5, 0
	err := o.Check()
	if err == nil {
		t.Fatal("no error")
	}
	for _, word := range []string{"temperature", "window", "jobs", "memory", "max-conformers"} {
		if !strings.Contains(err.Error(), word) {
			t.Errorf("nothing about %s in %q", word, err)
		}
	}
	if err := Defaults().Check(); err != nil {
		t.Errorf("the defaults are refused: %v", err)
	}
}
