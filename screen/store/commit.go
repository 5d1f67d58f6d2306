package store

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
)

// A Batch is what becomes true at one moment: finished units, and the units that
// are to follow them.
type Batch struct {
	Generations []Generation
	Answers     []Answer
	Ensembles   []Ensemble
	Next        []Unit
}

// Commit stores results, ends the leases on their units, whoever holds them, and
// plans the units that follow, in one transaction: all or nothing. A result that
// is there already stays as it is. fresh is how many were not there.
//
// Keys must have been told by SetRun, structures by AddStructures: else the error
// is ErrUnknown. Numbers that are not finite, and coordinates that do not fit the
// structure, are refused.
func (s *Store) Commit(ctx context.Context, b Batch) (fresh int, err error) {
	err = s.update(ctx, func(t *txn) error {
		fresh = 0
		for i := range b.Generations {
			g := &b.Generations[i]
			n, err := t.generation(g)
			if err = errors.Join(err, t.end(g.Structure, g.Key, 0)); err != nil {
				return fmt.Errorf("shapes of structure %d: %w", g.Structure, err)
			}
			fresh += n
		}
		n, err := t.answers(b.Answers)
		if err != nil {
			return err
		}
		fresh += n
		for i := range b.Ensembles {
			e := &b.Ensembles[i]
			n, err := t.ensemble(e)
			if err = errors.Join(err, t.end(e.Structure, e.Key, 0)); err != nil {
				return fmt.Errorf("ensemble of structure %d: %w", e.Structure, err)
			}
			fresh += n
		}
		return t.plan(b.Next)
	})
	return fresh, err
}

// end drops the unit of a result.
func (t *txn) end(structure int64, key Key, conformer int) error {
	settings, err := t.settings(key)
	if err != nil {
		return err
	}
	return t.exec("DELETE FROM unit WHERE settings = $1 AND structure = $2 AND conformer = $3", settings, structure, conformer)
}

// owned are the ids that every result has, and what its structure is like.
type owned struct {
	settings, structure, machine int64
	natoms                       int
}

func (t *txn) owned(structure int64, key Key, w Work) (o owned, err error) {
	o.structure = structure
	if o.natoms, err = t.atoms(structure); err != nil {
		return o, err
	}
	if o.settings, err = t.settings(key); err != nil {
		return o, err
	}
	o.machine, err = t.machine(w.Machine)
	return o, errors.Join(err, checkFinite("the time", w.Seconds))
}

// settings returns the id of a key.
func (t *txn) settings(key Key) (int64, error) {
	return t.s.settings.get(key, func() (id int64, err error) {
		err = t.QueryRowContext(t.ctx, "SELECT id FROM settings WHERE key = $1", string(key)).Scan(&id)
		if errors.Is(err, sql.ErrNoRows) {
			err = fmt.Errorf("settings %q: %w", key, ErrUnknown)
		}
		return id, err
	})
}

// machine returns the id of a machine, of the store's own for the zero value.
func (t *txn) machine(m Machine) (id int64, err error) {
	if m == (Machine{}) {
		m = t.s.options.Machine
	}
	if id, made := t.made[m]; made {
		return id, nil
	}
	row := []any{pack(m.Host), pack(m.Processor), pack(m.Kernel), pack(m.Version)}
	ask := func() (id int64, err error) {
		err = t.QueryRowContext(t.ctx, "SELECT id FROM machine WHERE host = $1 AND processor = $2 AND kernel = $3 AND version = $4", row...).Scan(&id)
		return id, err
	}
	if id, err = t.s.machines.get(m, ask); !errors.Is(err, sql.ErrNoRows) {
		return id, err
	}
	if _, err := t.insert("machine", "host, processor, kernel, version", [][]any{row}); err != nil {
		return 0, err
	}
	t.made[m], err = ask()
	return t.made[m], err
}
