package store

import (
	"context"
	"database/sql"
	"fmt"
	"slices"
)

// MaxAttempts is how many workers may die over a unit before it is offered to no
// other: it may be what kills them. View.Abandoned lists such units, so that they
// can be committed as failures.
const MaxAttempts = 3

// Plan adds units to the queue. Those that are planned already, and those whose
// results are stored, are left out, so planning again is harmless.
func (s *Store) Plan(ctx context.Context, units []Unit) error {
	return s.update(ctx, func(t *txn) error { return t.plan(units) })
}

func (t *txn) plan(units []Unit) error {
	const insert = `INSERT INTO unit (settings, structure, conformer, priority, attempts)
		SELECT CAST($1 AS BIGINT), CAST($2 AS BIGINT), CAST($3 AS BIGINT), CAST($4 AS BIGINT), 0 WHERE `
	for _, u := range units {
		settings, err := t.settings(u.Key)
		if err != nil {
			return err
		}
		query := insert + "NOT EXISTS (SELECT 1 FROM answer WHERE settings = $1 AND structure = $2 AND conformer = $3)"
		if u.Conformer == 0 {
			query = insert + `NOT EXISTS (SELECT 1 FROM generation WHERE settings = $1 AND structure = $2)
				AND NOT EXISTS (SELECT 1 FROM ensemble WHERE settings = $1 AND structure = $2)`
		}
		err = t.exec(query+" ON CONFLICT DO NOTHING", settings, u.Structure, u.Conformer, u.Priority)
		if err != nil {
			return fmt.Errorf("unit of structure %d: %w", u.Structure, err)
		}
	}
	return nil
}

// Claim leases up to n units to the worker, in the order of priority and
// planning. None is left, or none is free: the list is empty. Claiming beats too.
func (w *Worker) Claim(ctx context.Context, n int) ([]Unit, error) {
	var units []Unit
	err := w.s.update(ctx, func(t *txn) error {
		units = nil
		if err := w.beat(t); err != nil {
			return err
		}
		taken, err := t.claim(w.id, n)
		units = taken
		return err
	})
	return units, err
}

// claimed is a unit with its place in the queue.
type claimed struct {
	Unit
	id int64
}

func (t *txn) claim(worker string, n int) ([]Unit, error) {
	var got []claimed
	err := each(t.ctx, t.Tx, func(rows *sql.Rows) error {
		var c claimed
		err := rows.Scan(&c.id, text{(*string)(&c.Key)}, &c.Structure, &c.Conformer, &c.Priority, &c.Attempts)
		got = append(got, c)
		return err
	}, `WITH free AS MATERIALIZED (
			SELECT id FROM unit WHERE worker IS NULL AND attempts < $2 ORDER BY priority, id LIMIT $3`+t.s.locked+`
		)
		UPDATE unit SET worker = $1 FROM free WHERE unit.id = free.id
		RETURNING unit.id, (SELECT key FROM settings WHERE id = unit.settings),
			unit.structure, unit.conformer, unit.priority, unit.attempts`,
		worker, MaxAttempts, n)
	slices.SortFunc(got, func(a, b claimed) int {
		if a.Priority != b.Priority {
			return a.Priority - b.Priority
		}
		return int(a.id - b.id)
	})
	units := make([]Unit, len(got))
	for i, c := range got {
		units[i] = c.Unit
	}
	return units, err
}

// GiveBack ends leases on units that were not finished. They are free at once.
func (w *Worker) GiveBack(ctx context.Context, units ...Unit) error {
	return w.s.update(ctx, func(t *txn) error {
		for _, u := range units {
			settings, err := t.settings(u.Key)
			if err != nil {
				return err
			}
			err = t.exec(`UPDATE unit SET worker = NULL
				WHERE settings = $1 AND structure = $2 AND conformer = $3 AND worker = $4`,
				settings, u.Structure, u.Conformer, w.id)
			if err != nil {
				return err
			}
		}
		return nil
	})
}
