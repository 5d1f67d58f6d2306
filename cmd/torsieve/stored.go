package main

import (
	"context"
	"fmt"
	"os"
	"path/filepath"

	"torsieve/screen"
	"torsieve/screen/report"
	"torsieve/screen/store"
)

// storedOptions say where a run's database is, for commands that only read it.
type storedOptions struct {
	Dir   string `arg:"" help:"Run folder."`
	Store string `help:"Database of the run, where it is not in the folder." placeholder:"URL"`
}

// view opens the database of a run and lets look read it.
func (o storedOptions) view(ctx context.Context, look func(v *store.View, run store.Run) error) error {
	where := o.Store
	if where == "" {
		if _, err := os.Stat(o.Dir); err != nil {
			return nothing(err, "")
		}
		where = filepath.Join(o.Dir, report.StoreFile)
	}
	r, err := store.OpenReader(ctx, where)
	if err != nil {
		return nothing(err, "give the folder of a run: the one that screen was given with --out")
	}
	defer r.Close()
	return r.View(ctx, func(v *store.View) error {
		run, there, err := v.Run()
		if err != nil {
			return nothing(err, "")
		}
		if !there {
			return nothing(fmt.Errorf("%s: %w", where, store.ErrMissing), "")
		}
		return look(v, run)
	})
}

// A storedLigand is a ligand with what became of it; ended is false for one that
// is still to be done.
type storedLigand struct {
	store.Ligand
	ensemble store.Ensemble
	ended    bool
}

// status is how the ligand ended, or "waiting".
func (l *storedLigand) status() string {
	switch {
	case l.Ligand.Status != "":
		return l.Ligand.Status
	case l.ended:
		return l.ensemble.Status
	}
	return "waiting"
}

// reason is why it did not end well.
func (l *storedLigand) reason() string {
	if l.Ligand.Reason != "" {
		return l.Ligand.Reason
	}
	return l.ensemble.Reason
}

// done says whether the ligand has an ensemble.
func (l *storedLigand) done() bool { return l.ended && len(l.ensemble.Weights) > 0 }

// storedLigands reads the list of a run.
func storedLigands(v *store.View, run store.Run) ([]storedLigand, error) {
	list, err := v.Ligands()
	if err != nil {
		return nil, nothing(err, "")
	}
	out := make([]storedLigand, len(list))
	for i, l := range list {
		out[i].Ligand = l
		if l.Status != "" {
			continue
		}
		out[i].ensemble, out[i].ended, err = v.Ensemble(l.Structure, run.Chain.Top())
		if err != nil {
			return nil, nothing(err, "")
		}
	}
	return out, nil
}

// countsOf says how the ligands of a list ended, in the words of run.json.
func countsOf(ligands []storedLigand) (c report.Counts, waiting int) {
	for i := range ligands {
		status := ligands[i].status()
		if status == "waiting" {
			waiting++
			continue
		}
		c.Add(screen.Status(status))
	}
	return c, waiting
}
