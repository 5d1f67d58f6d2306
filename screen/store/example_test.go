package store_test

import (
	"context"
	"fmt"
	"log"
	"os"
	"path/filepath"

	"torsieve/screen/store"
)

// A run of one ligand whose only tier is the generator's force field: what the
// process that drives it does, what a worker does, and what a reader sees.
func Example() {
	ctx := context.Background()
	dir, err := os.MkdirTemp("", "run")
	check(err)
	defer os.RemoveAll(dir)
	s, err := store.Open(ctx, filepath.Join(dir, "run.db"), store.Options{Machine: store.Machine{Host: "bench", Kernel: "portable"}})
	check(err)
	defer s.Close()

	// Who drives the run says what is to be done.
	hold, err := s.Hold(ctx, store.Holder{Program: "torsieve screen", Host: "bench"})
	check(err)
	defer hold.Release()
	ids, err := s.AddStructures(ctx, []store.Structure{{SMILES: "[HH]", NAtoms: 2, Drawing: "[H][H]"}})
	check(err)
	chain := store.Chain{{Tier: "forcefield", Settings: `{"seed":0}`}, {Tier: "ensemble", Settings: `{"temperature":[298.15]}`}}
	check(s.SetRun(ctx, store.Run{Version: "0.1", Chain: chain}, []store.Ligand{
		{ID: "hydrogen", Stem: "hydrogen", SMILES: "[HH]", Structure: ids[0]},
	}))
	key := chain.Keys()[0]
	check(s.Plan(ctx, []store.Unit{{Structure: ids[0], Key: key}}))

	// A worker takes units, computes, and commits what it found.
	w, err := s.Join(ctx, "bench-17", "2026-01-02T03:04:05Z")
	check(err)
	units, err := w.Claim(ctx, 1)
	check(err)
	for _, u := range units {
		shape := store.Shape{Energy: -0.01, Hits: 1, X: []float64{0, 0, 0, 0, 0, 1.4}}
		_, err = s.Commit(ctx, store.Batch{Generations: []store.Generation{{
			Structure: u.Structure, Key: u.Key, Shapes: []store.Shape{shape}, Work: store.Work{Seconds: 0.5},
		}}})
		check(err)
	}
	check(w.Leave(ctx))

	// Anybody looks, at any time.
	check(s.View(ctx, func(v *store.View) error {
		progress, err := v.Progress()
		for _, p := range progress {
			fmt.Printf("%s: %d done, %d failed, %d waiting, %d running\n", p.Tier, p.Done, p.Failed, p.Waiting, p.Running)
		}
		return err
	}))
	// Output:
	// forcefield: 1 done, 0 failed, 0 waiting, 0 running
	// ensemble: 0 done, 0 failed, 0 waiting, 0 running
}

func check(err error) {
	if err != nil {
		log.Fatal(err)
	}
}
