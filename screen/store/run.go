package store

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
)

// SetRun replaces the run's record and its list of ligands, and keeps all
// results. Structures must have been added. Units of other settings or of other
// structures are dropped, whoever holds them.
func (s *Store) SetRun(ctx context.Context, r Run, ligands []Ligand) error {
	return s.update(ctx, func(t *txn) error {
		ids, err := t.register(r.Chain)
		if err != nil {
			return err
		}
		if err := t.saveRun(r, ids); err != nil {
			return err
		}
		if err := t.exec("DELETE FROM ligand"); err != nil {
			return err
		}
		if err := t.addLigands(ligands); err != nil {
			return err
		}
		return t.dropOtherUnits(ids)
	})
}

func (t *txn) saveRun(r Run, ids []int64) error {
	var top any
	if len(ids) > 0 {
		top = ids[len(ids)-1]
	}
	return t.exec(`INSERT INTO run (id, version, begun, settings, record) VALUES (1, $1, $2, $3, $4)
		ON CONFLICT (id) DO UPDATE SET version = excluded.version, begun = excluded.begun,
		settings = excluded.settings, record = excluded.record`,
		pack(r.Version), pack(r.Begun), top, pack(r.Record))
}

// SaveRecord replaces what the run's record says, when a run ends, say.
func (s *Store) SaveRecord(ctx context.Context, record string) error {
	return s.update(ctx, func(t *txn) error {
		n, err := t.affected("UPDATE run SET record = $1", pack(record))
		if err == nil && n == 0 {
			err = fmt.Errorf("the run: %w", ErrUnknown)
		}
		return err
	})
}

// register stores the levels of a chain and returns their ids.
func (t *txn) register(c Chain) ([]int64, error) {
	ids := make([]int64, len(c))
	var below, first any
	for i, key := range c.Keys() {
		err := t.exec("INSERT INTO settings (key, below, first, tier, settings) VALUES ($1, $2, $3, $4, $5) ON CONFLICT DO NOTHING",
			string(key), below, first, pack(c[i].Tier), pack(c[i].Settings))
		if err != nil {
			return nil, err
		}
		err = t.QueryRowContext(t.ctx, "SELECT id FROM settings WHERE key = $1", string(key)).Scan(&ids[i])
		if err != nil {
			return nil, err
		}
		below, first = ids[i], ids[0]
	}
	return ids, nil
}

func (t *txn) addLigands(ligands []Ligand) error {
	var rows [][]any
	for i := range ligands {
		l := &ligands[i]
		warnings, err := listed(l.Warnings)
		if err != nil {
			return err
		}
		var structure any
		if l.Structure != 0 {
			structure = l.Structure
		}
		rows = append(rows, []any{
			l.Order, pack(l.ID), pack(l.Stem), pack(l.Parent), pack(l.Place), pack(l.SMILES),
			structure, yes(l.Mirrored), pack(l.Status), pack(l.Reason), warnings,
		})
	}
	n, err := t.insert("ligand", "place_in_run, id, stem, parent, source, smiles, structure, mirrored, status, reason, warnings", rows)
	if err == nil && n != len(ligands) {
		err = errors.New("two ligands have one id, one name of files or one place in the list")
	}
	return err
}

// dropOtherUnits keeps the units of the run's levels and structures.
func (t *txn) dropOtherUnits(levels []int64) error {
	err := t.exec("DELETE FROM unit WHERE structure NOT IN (SELECT structure FROM ligand WHERE structure IS NOT NULL)")
	if err != nil || len(levels) == 0 {
		return err
	}
	keep := make([]any, len(levels))
	for i, id := range levels {
		keep[i] = id
	}
	return t.exec("DELETE FROM unit WHERE settings NOT IN "+placeholders(1, len(keep)), keep...)
}

// Run returns what was asked for last, and false in a store that was never told.
func (v *View) Run() (r Run, there bool, err error) {
	var top sql.NullInt64
	err = v.tx.QueryRowContext(v.ctx, "SELECT version, begun, record, settings FROM run").
		Scan(text{&r.Version}, text{&r.Begun}, text{&r.Record}, &top)
	if errors.Is(err, sql.ErrNoRows) {
		return r, false, nil
	}
	for key, l := range v.levels {
		if top.Valid && l.id == top.Int64 {
			for _, k := range v.ladder(key) {
				r.Chain = append(r.Chain, v.levels[k].Level)
			}
		}
	}
	return r, err == nil, err
}

// Ligands returns the run's list in its order.
func (v *View) Ligands() ([]Ligand, error) {
	var out []Ligand
	err := v.each(func(rows *sql.Rows) error {
		var l Ligand
		var structure sql.NullInt64
		var mirrored int
		err := rows.Scan(&l.Order, text{&l.ID}, text{&l.Stem}, text{&l.Parent}, text{&l.Place}, text{&l.SMILES},
			&structure, &mirrored, text{&l.Status}, text{&l.Reason}, list{&l.Warnings})
		l.Structure, l.Mirrored = structure.Int64, mirrored != 0
		out = append(out, l)
		return err
	}, `SELECT place_in_run, id, stem, parent, source, smiles, structure, mirrored, status, reason, warnings
		FROM ligand ORDER BY place_in_run`)
	return out, err
}
