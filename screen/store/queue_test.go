package store

import (
	"context"
	"errors"
	"fmt"
	"math/rand/v2"
	"slices"
	"sync"
	"sync/atomic"
	"testing"
	"time"
)

// planned is a store with one structure per unit of the first level, planned.
func planned(t *testing.T, s *Store, n int) (key Key, ids []int64) {
	t.Helper()
	ctx := t.Context()
	var structures []Structure
	for i := range n {
		structures = append(structures, Structure{SMILES: fmt.Sprintf("C%d", i), NAtoms: 2})
	}
	ids, err := s.AddStructures(ctx, structures)
	must(t, err)
	var ligands []Ligand
	var units []Unit
	key = ladder("298.15").Keys()[0]
	for i, id := range ids {
		ligands = append(ligands, Ligand{Order: i, ID: structures[i].SMILES, Stem: structures[i].SMILES, Structure: id})
		units = append(units, Unit{Structure: id, Key: key, Priority: 1})
	}
	must(t, s.SetRun(ctx, Run{Chain: ladder("298.15")}, ligands))
	must(t, s.Plan(ctx, units))
	return key, ids
}

func join(t *testing.T, s *Store, name string) *Worker {
	t.Helper()
	w, err := s.Join(t.Context(), name, "2026-01-02T03:04:05Z")
	must(t, err)
	return w
}

func claim(t *testing.T, w *Worker, n int) []Unit {
	t.Helper()
	units, err := w.Claim(t.Context(), n)
	must(t, err)
	return units
}

func structuresOf(units []Unit) []int64 {
	var ids []int64
	for _, u := range units {
		ids = append(ids, u.Structure)
	}
	return ids
}

func TestUnitsAreClaimedInOrder(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		key, ids := planned(t, s, 5)
		a, b := join(t, s, "a"), join(t, s, "b")
		extra, err := s.AddStructures(t.Context(), []Structure{{SMILES: "first", NAtoms: 2}})
		must(t, err)
		urgent := Unit{Structure: extra[0], Key: key, Priority: 0}
		must(t, s.Plan(t.Context(), []Unit{urgent, urgent}))
		same(t, "a's units", structuresOf(claim(t, a, 3)), []int64{extra[0], ids[0], ids[1]})
		same(t, "b's units", structuresOf(claim(t, b, 10)), ids[2:])
		same(t, "what is left", claim(t, a, 1), []Unit{})
		view(t, &s.Reader, func(v *View) error {
			workers, err := v.Workers()
			same(t, "a's units", structuresOf(workers[0].Units), []int64{extra[0], ids[0], ids[1]})
			same(t, "b's machine", workers[1].Machine, s.options.Machine)
			return err
		})
		must(t, b.GiveBack(t.Context(), Unit{Structure: ids[3], Key: key}))
		must(t, b.GiveBack(t.Context(), Unit{Structure: ids[0], Key: key})) // not its own
		same(t, "given back", structuresOf(claim(t, a, 10)), []int64{ids[3]})
		must(t, a.Leave(t.Context()))
		got := claim(t, b, 10)
		same(t, "left behind", structuresOf(got), []int64{extra[0], ids[0], ids[1], ids[3]})
		if got[0].Attempts != 0 {
			t.Errorf("a clean stop counts as %d deaths", got[0].Attempts)
		}
	})
}

// A result and the end of its unit are one; a unit with a result is not planned.
func TestAResultEndsItsUnit(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		key, ids := planned(t, s, 2)
		keys := ladder("298.15").Keys()
		sam := newSample(1)
		next := []Unit{{Structure: ids[0], Key: keys[1], Conformer: 1}, {Structure: ids[0], Key: keys[1], Conformer: 2}}
		_, err := s.Commit(t.Context(), Batch{Generations: []Generation{sam.generation(ids[0], key, 2, 2)}, Next: next})
		must(t, err)
		left := func(want ...Unit) {
			t.Helper()
			view(t, &s.Reader, func(v *View) error {
				units, err := v.Units()
				same(t, "units", units, want)
				return err
			})
		}
		other := Unit{Structure: ids[1], Key: key, Priority: 1}
		left(next[0], next[1], other)
		_, err = s.Commit(t.Context(), Batch{Answers: []Answer{sam.answer(ids[0], keys[1], 1, 2, true)}})
		must(t, err)
		left(next[1], other)
		must(t, s.Plan(t.Context(), []Unit{next[0], other, {Structure: ids[0], Key: key}}))
		left(next[1], other)
		// Other settings of the second tier: its units go, the first level's stay.
		changed := ladder("298.15")
		changed[1].Settings = `{"accuracy":0.1}`
		list := []Ligand{{Order: 0, ID: "a", Structure: ids[0]}, {Order: 1, ID: "b", Stem: "b", Structure: ids[1]}}
		must(t, s.SetRun(t.Context(), Run{Chain: changed}, list))
		left(other)
		must(t, s.SetRun(t.Context(), Run{Chain: changed}, list[:1]))
		left()
	})
}

func TestUnitsOfTheDeadAreTakenBack(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		_, ids := planned(t, s, 3)
		ctx := t.Context()
		dead, alive, watcher := join(t, s, "dead"), join(t, s, "alive"), join(t, s, "watcher")
		claim(t, dead, 2)
		claim(t, alive, 1)
		now := time.Now()
		look := func(after time.Duration, want int) {
			t.Helper()
			n, err := watcher.TakeBack(ctx, now.Add(after), time.Minute)
			must(t, err)
			if n != want {
				t.Errorf("after %v %d units were taken back, want %d", after, n, want)
			}
		}
		look(0, 0)
		look(59*time.Second, 0)
		must(t, alive.Beat(ctx))
		look(61*time.Second, 2)
		look(62*time.Second, 0)
		got := claim(t, watcher, 5)
		same(t, "taken over", structuresOf(got), ids[:2])
		if got[0].Attempts != 1 {
			t.Errorf("%d deaths, want 1", got[0].Attempts)
		}
		// It only slept. What it finishes counts, and it can go on.
		fresh, err := s.Commit(ctx, Batch{Generations: []Generation{newSample(1).generation(ids[0], got[0].Key, 2, 2)}})
		must(t, err)
		if fresh != 1 {
			t.Errorf("%d results were new, want 1", fresh)
		}
		must(t, dead.Beat(ctx))
		must(t, watcher.GiveBack(ctx, got...))
		same(t, "the woken one's units", structuresOf(claim(t, dead, 5)), ids[1:2])
	})
}

func TestAUnitThatKillsIsAbandoned(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		_, ids := planned(t, s, 1)
		watcher := join(t, s, "watcher")
		now := time.Now()
		for i := range MaxAttempts {
			w := join(t, s, fmt.Sprint("victim ", i))
			same(t, "claimed", structuresOf(claim(t, w, 1)), ids)
			for range 2 {
				_, err := watcher.TakeBack(t.Context(), now, time.Minute)
				must(t, err)
				now = now.Add(2 * time.Minute)
			}
		}
		same(t, "claimed", claim(t, watcher, 1), []Unit{})
		view(t, &s.Reader, func(v *View) error {
			units, err := v.Abandoned()
			same(t, "abandoned", structuresOf(units), ids)
			return err
		})
	})
}

func TestTendBeatsUntilItsContextEnds(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		planned(t, s, 1)
		claim(t, join(t, s, "dead"), 1)
		w := join(t, s, "w")
		ctx, cancel := context.WithCancel(t.Context())
		ticks, told, ended := make(chan time.Time), make(chan int, 1), make(chan bool)
		go func() {
			w.Tend(ctx, ticks, time.Minute, func(n int, err error) {
				if err != nil {
					t.Error(err)
				}
				told <- n
			})
			close(ended)
		}()
		now := time.Now()
		ticks <- now
		ticks <- now.Add(2 * time.Minute)
		if n := <-told; n != 1 {
			t.Errorf("%d units were taken back, want 1", n)
		}
		cancel()
		<-ended
		view(t, &s.Reader, func(v *View) error {
			workers, err := v.Workers()
			if len(workers) != 1 || workers[0].Beat != 2 {
				t.Errorf("have %+v, want w after 2 beats", workers)
			}
			return err
		})
	})
}

// Many workers, two stores on one database, no unit twice.
func TestConcurrentWorkersShareTheUnits(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		const units, workers = 60, 6
		key, ids := planned(t, p.open(), units)
		var mu sync.Mutex
		times := map[int64]int{}
		var wg sync.WaitGroup
		for n := range workers {
			s := p.open()
			wg.Go(func() {
				if err := drain(t.Context(), s, fmt.Sprint("worker ", n), func(u Unit) Batch {
					mu.Lock()
					times[u.Structure]++
					mu.Unlock()
					return Batch{Generations: []Generation{newSample(uint64(u.Structure)).generation(u.Structure, key, 2, 3)}}
				}); err != nil {
					t.Error(err)
				}
			})
		}
		r := p.reader()
		wg.Go(func() { // and somebody looks on
			for range 20 {
				if err := r.Check(t.Context()); err != nil {
					t.Error(err)
				}
			}
		})
		wg.Wait()
		for _, id := range ids {
			if times[id] != 1 {
				t.Errorf("structure %d was computed %d times", id, times[id])
			}
		}
		view(t, r, func(v *View) error {
			progress, err := v.Progress()
			same(t, "first level", progress[0], Progress{Tier: "forcefield", Key: key, Done: units, Seconds: units * 1.25})
			return err
		})
	})
}

// Several workers bring the same results in different orders: each is stored once,
// and none of them fails because of the others.
func TestConcurrentCommitsOfTheSame(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		const structures, workers = 12, 4
		key, ids := planned(t, p.open(), structures)
		var generations []Generation
		for _, id := range ids {
			generations = append(generations, newSample(uint64(id)).generation(id, key, 2, 3))
		}
		var total atomic.Int64
		var wg sync.WaitGroup
		for n := range workers {
			s := p.open()
			mine := slices.Clone(generations)
			rand.New(rand.NewPCG(uint64(n), 3)).Shuffle(len(mine), func(i, k int) { mine[i], mine[k] = mine[k], mine[i] })
			wg.Go(func() {
				fresh, err := s.Commit(t.Context(), Batch{Generations: mine})
				if err != nil {
					t.Error(err)
				}
				total.Add(int64(fresh))
			})
		}
		wg.Wait()
		if total.Load() != structures {
			t.Errorf("%d results were new, want %d", total.Load(), structures)
		}
		view(t, p.reader(), func(v *View) error {
			units, err := v.Units()
			same(t, "units left", units, []Unit{})
			return err
		})
	})
}

// drain computes units until none is left.
func drain(ctx context.Context, s *Store, name string, compute func(Unit) Batch) error {
	w, err := s.Join(ctx, name, "")
	if err != nil {
		return err
	}
	for {
		units, err := w.Claim(ctx, 2)
		if err != nil || len(units) == 0 {
			return errors.Join(err, w.Leave(ctx))
		}
		for _, u := range units {
			if _, err := s.Commit(ctx, compute(u)); err != nil {
				return err
			}
		}
	}
}

func TestOnlyOneHoldsARun(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		a, b := p.open(), p.open()
		ctx := t.Context()
		first := Holder{Program: "torsieve screen", Host: "bench", PID: 17, Begun: "2026-01-02T03:04:05Z"}
		hold, err := a.Hold(ctx, first)
		must(t, err)
		_, err = b.Hold(ctx, Holder{Program: "torsieve screen", Host: "other"})
		var held *HeldError
		if !errors.As(err, &held) {
			t.Fatalf("have %v, want a HeldError", err)
		}
		same(t, "holder", held.Holder, first)
		must(t, hold.Release())
		must(t, hold.Release())
		again, err := b.Hold(ctx, Holder{Program: "torsieve screen", Host: "other"})
		must(t, err)
		must(t, again.Release())
	})
}
