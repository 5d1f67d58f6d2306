package store

import (
	"context"
	"errors"
	"math"
	"slices"
	"testing"
)

func TestWhatWasWrittenIsRead(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		f := fill(t, s, 1, 4)
		checkFilled(t, &s.Reader, f)
		checkFilled(t, p.reader(), f)
		must(t, s.Close())
		checkFilled(t, p.reader(), f)
		checkFilled(t, &p.open().Reader, f)
	})
}

func TestHostileTextComesBack(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		ctx := t.Context()
		var want []Ligand
		for i, id := range []string{"", "a\x00b", "\xff\xfe", "\x1aYQ==", "'; DROP TABLE ligand; --", "\u202eabc", "line\nline"} {
			want = append(want, Ligand{Order: i, ID: id, Stem: id, Place: id, SMILES: id, Status: "unreadable", Reason: id, Warnings: []string{id, id}})
		}
		must(t, s.SetRun(ctx, Run{Version: "\x00", Begun: "\xff", Record: "\x00", Chain: ladder("1")}, want))
		view(t, &s.Reader, func(v *View) error {
			got, err := v.Ligands()
			same(t, "ligands", got, want)
			return err
		})
	})
}

// A longer list, another temperature, a deeper tier: all else is used again.
func TestResultsOutliveTheRunThatMadeThem(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		f := fill(t, s, 1, 2)
		ctx := t.Context()
		other := f.run
		other.Chain = ladder("350")
		ids, err := s.AddStructures(ctx, []Structure{newSample(1).structure(sampleAtoms), newSample(9).structure(sampleAtoms)})
		must(t, err)
		if ids[0] != f.ligands[0].Structure {
			t.Errorf("the same structure has the ids %d and %d", ids[0], f.ligands[0].Structure)
		}
		longer := append(slices.Clone(f.ligands), Ligand{Order: 3, ID: "new", Stem: "new", SMILES: "C", Structure: ids[1]})
		must(t, s.SetRun(ctx, other, longer))
		keys := other.Chain.Keys()
		same(t, "shared keys", keys[:3], f.run.Chain.Keys()[:3])
		view(t, &s.Reader, func(v *View) error {
			progress, err := v.Progress()
			same(t, "progress", progress, []Progress{
				{Tier: "forcefield", Key: keys[0], Done: 2, Seconds: 2.5},
				{Tier: "semiempirical", Key: keys[1], Done: 10, Seconds: 25},
				{Tier: "hf", Key: keys[2], Done: 10, Seconds: 25},
				{Tier: "ensemble", Key: keys[3]},
			})
			return err
		})
		must(t, s.SetRun(ctx, f.run, f.ligands))
		checkFilled(t, &s.Reader, f)
	})
}

func TestSameSMILESDrawnAnotherWayIsAnotherStructure(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		x := newSample(1).x(2)
		variants := []Structure{
			{SMILES: "CO", NAtoms: 2, Drawing: "CO"},
			{SMILES: "CO", NAtoms: 2, Drawing: "OC"},
			{SMILES: "CO", NAtoms: 2, Drawing: "CO", Starts: [][]float64{x}},
			{SMILES: "CO", NAtoms: 2, Drawing: "CO", Starts: [][]float64{x, x}},
		}
		ids, err := s.AddStructures(t.Context(), variants)
		must(t, err)
		again, err := s.AddStructures(t.Context(), variants)
		must(t, err)
		same(t, "ids", again, ids)
		for i := range variants {
			variants[i].ID = ids[i]
		}
		view(t, &s.Reader, func(v *View) error {
			got, err := v.StructuresOf("CO")
			same(t, "structures", got, variants)
			return err
		})
	})
}

// Whoever comes second changes nothing: a worker that was given up and woke again.
func TestTheFirstResultStays(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		f := fill(t, s, 1, 1)
		g, a, e := f.generations[0], f.answers[f.run.Chain.Keys()[1]][0], f.ensembles[0]
		g.Shapes, a.Energy, e.Status = g.Shapes[:2], 7, "failed"
		fresh, err := s.Commit(t.Context(), Batch{Generations: []Generation{g}, Answers: []Answer{a}, Ensembles: []Ensemble{e}})
		must(t, err)
		if fresh != 0 {
			t.Errorf("%d results were new, want 0", fresh)
		}
		checkFilled(t, &s.Reader, f)
	})
}

func TestCommitRefusesWhatMakesNoSense(t *testing.T) {
	keys := ladder("298.15").Keys()
	sam := newSample(1)
	with := func(change func(*Generation, *Answer, *Ensemble)) func(int64) Batch {
		return func(id int64) Batch {
			g, a, e := sam.generation(id, keys[0], 2, 2), sam.answer(id, keys[1], 1, 2, true), sam.ensemble(id, keys[3], 2)
			change(&g, &a, &e)
			return Batch{Generations: []Generation{g}, Answers: []Answer{a}, Ensembles: []Ensemble{e}}
		}
	}
	tests := map[string]struct {
		batch func(id int64) Batch
		want  error // nil: any
	}{
		"unknown settings":   {with(func(g *Generation, _ *Answer, _ *Ensemble) { g.Key = "no" }), ErrUnknown},
		"unknown structure":  {with(func(g *Generation, _ *Answer, _ *Ensemble) { g.Structure = 99 }), ErrUnknown},
		"unknown conformer":  {with(func(_ *Generation, a *Answer, _ *Ensemble) { a.Conformer = 3 }), ErrUnknown},
		"conformer 0":        {with(func(_ *Generation, a *Answer, _ *Ensemble) { a.Conformer = 0 }), nil},
		"too few atoms":      {with(func(g *Generation, _ *Answer, _ *Ensemble) { g.Shapes[1].X = sam.x(1) }), nil},
		"no coordinates":     {with(func(g *Generation, _ *Answer, _ *Ensemble) { g.Shapes[1].X = nil }), nil},
		"coordinate NaN":     {with(func(_ *Generation, a *Answer, _ *Ensemble) { a.X[3] = nan }), nil},
		"energy NaN":         {with(func(_ *Generation, a *Answer, _ *Ensemble) { a.Energy = nan }), nil},
		"energy infinite":    {with(func(_ *Generation, a *Answer, _ *Ensemble) { a.Energy = math.Inf(1) }), nil},
		"energy and error":   {with(func(_ *Generation, a *Answer, _ *Ensemble) { a.Error = "not converged" }), nil},
		"no shapes":          {with(func(g *Generation, _ *Answer, _ *Ensemble) { g.Shapes = nil }), nil},
		"shapes and error":   {with(func(g *Generation, _ *Answer, _ *Ensemble) { g.Error = "no room" }), nil},
		"member infinite":    {with(func(_ *Generation, _ *Answer, e *Ensemble) { e.Members[0].Energy = math.Inf(-1) }), nil},
		"population without": {with(func(_ *Generation, _ *Answer, e *Ensemble) { e.Weights[0].Populations[0].Fraction = math.Inf(1) }), nil},
		"weight NaN":         {with(func(_ *Generation, _ *Answer, e *Ensemble) { e.Weights[0].FreeEnergy = nan }), nil},
	}
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		ids, err := s.AddStructures(t.Context(), []Structure{{SMILES: "CO", NAtoms: 2}})
		must(t, err)
		must(t, s.SetRun(t.Context(), Run{Chain: ladder("298.15")}, []Ligand{{ID: "a", Structure: ids[0]}}))
		for name, test := range tests {
			t.Run(name, func(t *testing.T) {
				_, err := s.Commit(t.Context(), test.batch(ids[0]))
				if err == nil || test.want != nil && !errors.Is(err, test.want) {
					t.Errorf("have %v, want %v", err, test.want)
				}
				view(t, &s.Reader, func(v *View) error {
					progress, err := v.Progress()
					for _, p := range progress {
						if p.Done+p.Failed > 0 {
							t.Errorf("half a batch was written: %+v", p)
						}
					}
					return err
				})
			})
		}
	})
}

func TestFailuresAreKeptCountedAndDropped(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		ctx := t.Context()
		chain := ladder("298.15")
		keys := chain.Keys()
		ids, err := s.AddStructures(ctx, []Structure{{SMILES: "CO", NAtoms: 2}, {SMILES: "CN", NAtoms: 2}})
		must(t, err)
		must(t, s.SetRun(ctx, Run{Chain: chain}, []Ligand{{Order: 1, ID: "a", Stem: "a", Structure: ids[0]}, {Order: 2, ID: "b", Stem: "b", Structure: ids[1]}}))
		sam := newSample(3)
		bad := sam.answer(ids[0], keys[1], 2, 2, false)
		bad.Energy, bad.Failure = nan, Failure{Error: "not converged", Stack: "goroutine 1"}
		partial := sam.ensemble(ids[0], keys[3], 2)
		partial.Status = "partial"
		lost := Generation{Structure: ids[1], Key: keys[0], Failure: Failure{Error: "no shape"}}
		failed := Ensemble{Structure: ids[1], Key: keys[3], Status: "failed", Reason: "generate: no shape", MissedWeight: nan, MissedP95: nan}
		_, err = s.Commit(ctx, Batch{
			Generations: []Generation{sam.generation(ids[0], keys[0], 2, 2), lost},
			Answers:     []Answer{sam.answer(ids[0], keys[1], 1, 2, true), bad}, Ensembles: []Ensemble{partial, failed},
		})
		must(t, err)
		counts := func(want ...int) {
			t.Helper()
			view(t, &s.Reader, func(v *View) error {
				progress, err := v.Progress()
				var got []int
				for _, p := range progress {
					got = append(got, p.Done, p.Failed)
				}
				same(t, "done and failed", got, want)
				return err
			})
		}
		counts(1, 1, 1, 1, 0, 0, 1, 1)
		view(t, &s.Reader, func(v *View) error {
			answers, err := v.Answers(ids[0], keys[1])
			bad.Machine = s.options.Machine
			same(t, "failed answer", answers[1], bad)
			return err
		})
		n, err := s.DropFailures(ctx)
		must(t, err)
		if n != 2 {
			t.Errorf("%d failures were dropped, want 2", n)
		}
		counts(1, 0, 1, 0, 0, 0, 0, 0)
		must(t, s.Clear(ctx))
		view(t, &s.Reader, func(v *View) error {
			_, there, err := v.Run()
			if there {
				t.Error("a run outlived Clear")
			}
			return err
		})
		fill(t, s, 1, 1) // nothing that was remembered is used
	})
}

// After Clear no id means another thing than before, to whoever remembers it.
func TestIDsAreNotUsedAgain(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s, other := p.open(), p.open()
		f := fill(t, s, 1, 2)
		stale := f.generations[0]
		_, err := other.Commit(t.Context(), Batch{Generations: []Generation{stale}}) // now it remembers
		must(t, err)
		must(t, s.Clear(t.Context()))
		again := fill(t, s, 5, 6)
		for _, l := range again.ligands {
			if l.Structure == f.ligands[0].Structure || l.Structure == f.ligands[1].Structure {
				t.Errorf("structure %d is another one now", l.Structure)
			}
		}
		if _, err := other.Commit(t.Context(), Batch{Generations: []Generation{stale}}); err == nil {
			t.Error("a result of a run that was cleared was stored")
		}
		checkFilled(t, &s.Reader, again)
	})
}

// A view sees what was there when it began.
func TestAViewIsOnePicture(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		f := fill(t, s, 1, 1)
		r := p.reader()
		view(t, r, func(v *View) error {
			must(t, s.SetRun(context.Background(), Run{Version: "later", Chain: ladder("1")}, nil))
			run, _, err := v.Run()
			same(t, "run", run, f.run)
			return err
		})
		view(t, r, func(v *View) error {
			run, _, err := v.Run()
			same(t, "version", run.Version, "later")
			return err
		})
	})
}

func TestSaveRecord(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		if err := s.SaveRecord(t.Context(), "{}"); !errors.Is(err, ErrUnknown) {
			t.Errorf("have %v, want %v", err, ErrUnknown)
		}
		f := fill(t, s, 1, 1)
		f.run.Record = `{"ended":"2026"}`
		must(t, s.SaveRecord(t.Context(), f.run.Record))
		checkFilled(t, &s.Reader, f)
	})
}

func TestTwoLigandsOfOneIDAreRefused(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		f := fill(t, s, 1, 1)
		twice := []Ligand{{Order: 0, ID: "a", Stem: "a"}, {Order: 1, ID: "a", Stem: "b"}}
		if err := s.SetRun(t.Context(), f.run, twice); err == nil {
			t.Error("two ligands have one id")
		}
		checkFilled(t, &s.Reader, f)
	})
}
