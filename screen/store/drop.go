package store

import (
	"context"
	"fmt"
)

// DropFailures forgets the failed results of the run's settings, and the
// ensembles that were made without them, so that they are planned again: after a
// disk was full, say. It returns how many failures there were.
func (s *Store) DropFailures(ctx context.Context) (failures int, err error) {
	var chain Chain
	err = s.View(ctx, func(v *View) error {
		run, _, err := v.Run()
		chain = run.Chain
		return err
	})
	if err != nil || len(chain) == 0 {
		return 0, err
	}
	err = s.update(ctx, func(t *txn) error {
		failures = 0
		top, err := t.settings(chain.Top())
		if err != nil {
			return err
		}
		for _, key := range chain.Keys() {
			id, err := t.settings(key)
			if err != nil {
				return err
			}
			n, err := t.dropFailures(id, top)
			if err != nil {
				return err
			}
			failures += n
		}
		return nil
	})
	return failures, err
}

// dropFailures drops the failures of one level, and the ensembles over them.
func (t *txn) dropFailures(level, top int64) (n int, err error) {
	for _, table := range []string{"population", "temperature", "member", "ensemble"} {
		err := t.exec(fmt.Sprintf(`DELETE FROM %s WHERE settings = $1 AND structure IN (
				SELECT structure FROM answer WHERE settings = $2 AND error <> ''
				UNION SELECT structure FROM generation WHERE settings = $2 AND error <> '')`, table), top, level)
		if err != nil {
			return 0, err
		}
	}
	err = t.exec(`DELETE FROM geometry WHERE settings = $1 AND EXISTS (SELECT 1 FROM answer a
		WHERE a.settings = geometry.settings AND a.structure = geometry.structure AND a.conformer = geometry.conformer AND a.error <> '')`, level)
	if err != nil {
		return 0, err
	}
	answers, err := t.affected("DELETE FROM answer WHERE settings = $1 AND error <> ''", level)
	if err != nil {
		return 0, err
	}
	generations, err := t.affected("DELETE FROM generation WHERE settings = $1 AND error <> ''", level)
	return answers + generations, err
}

// tables are all tables with rows of a run, those first that refer to others.
var tables = []string{
	"unit", "worker", "population", "temperature", "member", "ensemble", "answer", "geometry", "shape", "generation",
	"ligand", "run", "settings", "structure", "machine",
}

// Clear forgets the run and all results. Who holds the run goes on holding it.
func (s *Store) Clear(ctx context.Context) error {
	err := s.update(ctx, func(t *txn) error {
		for _, table := range tables {
			if err := t.exec("DELETE FROM " + table); err != nil {
				return err
			}
		}
		return nil
	})
	s.settings.forget()
	s.machines.forget()
	s.atoms.forget()
	if err == nil && s.path != "" {
		_, err = s.write.ExecContext(ctx, "VACUUM") // gives the room back
	}
	return s.fault(s.where, err)
}
