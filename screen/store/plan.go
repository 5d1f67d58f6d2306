package store

import (
	"context"
	"crypto/sha256"
	"database/sql"
	"encoding/hex"
	"errors"
	"fmt"
	"slices"
)

// AddStructures stores structures and returns their ids, in their order. One that
// is there already, with the same drawing and the same shapes given, keeps its id.
func (s *Store) AddStructures(ctx context.Context, structures []Structure) ([]int64, error) {
	var ids []int64
	err := s.update(ctx, func(t *txn) error {
		ids = make([]int64, len(structures))
		for i, st := range structures {
			id, err := t.structure(st)
			if err != nil {
				return fmt.Errorf("structure %s: %w", st.SMILES, err)
			}
			ids[i] = id
		}
		return nil
	})
	return ids, err
}

func (t *txn) structure(st Structure) (id int64, err error) {
	for _, x := range st.Starts {
		if err := checkCoordinates(x, st.NAtoms); err != nil {
			return 0, err
		}
	}
	smiles, variant := pack(st.SMILES), st.variant()
	err = t.exec(`INSERT INTO structure (smiles, variant, natoms, drawing, starts_bohr) VALUES ($1, $2, $3, $4, $5)
		ON CONFLICT DO NOTHING`, smiles, variant, st.NAtoms, pack(st.Drawing), packCoordinates(slices.Concat(st.Starts...)))
	if err != nil {
		return 0, err
	}
	err = t.QueryRowContext(t.ctx, "SELECT id FROM structure WHERE smiles = $1 AND variant = $2", smiles, variant).Scan(&id)
	return id, err
}

// variant tells structures of one SMILES apart: results of one do not fit another
// whose atoms stand in another order, or whose input gave other shapes.
func (st *Structure) variant() string {
	h := sha256.New()
	fmt.Fprintf(h, "%d\n%d %s\n", st.NAtoms, len(st.Drawing), st.Drawing)
	if b, given := packCoordinates(slices.Concat(st.Starts...)).([]byte); given {
		h.Write(b)
	}
	return hex.EncodeToString(h.Sum(nil))
}

// SetRun replaces the run's record and its list of ligands, and keeps all
// results. Structures must have been added. Units that were planned for other
// settings are dropped, whoever holds them.
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

func (t *txn) dropOtherUnits(ids []int64) error {
	keep := make([]any, len(ids))
	for i, id := range ids {
		keep[i] = id
	}
	if len(keep) == 0 {
		return t.exec("DELETE FROM unit")
	}
	return t.exec("DELETE FROM unit WHERE settings NOT IN "+placeholders(1, len(keep)), keep...)
}

// settings returns the id of a key. Rows of settings are never changed, so what
// was read once is remembered.
func (t *txn) settings(key Key) (int64, error) {
	t.s.mu.Lock()
	id, known := t.s.ids[key]
	t.s.mu.Unlock()
	if known {
		return id, nil
	}
	err := t.QueryRowContext(t.ctx, "SELECT id FROM settings WHERE key = $1", string(key)).Scan(&id)
	if errors.Is(err, sql.ErrNoRows) {
		return 0, fmt.Errorf("settings %q: %w", key, ErrUnknown)
	}
	if err != nil {
		return 0, err
	}
	t.s.mu.Lock()
	t.s.ids[key] = id
	t.s.mu.Unlock()
	return id, nil
}

// atoms returns how many atoms a structure has.
func (t *txn) atoms(structure int64) (n int, err error) {
	err = t.QueryRowContext(t.ctx, "SELECT natoms FROM structure WHERE id = $1", structure).Scan(&n)
	if errors.Is(err, sql.ErrNoRows) {
		err = fmt.Errorf("structure %d: %w", structure, ErrUnknown)
	}
	return n, err
}

// machine returns the id of a machine, of the store's own for the zero value.
func (t *txn) machine(m Machine) (id int64, err error) {
	if m == (Machine{}) {
		m = t.s.options.Machine
	}
	row := []any{pack(m.Host), pack(m.Processor), pack(m.Kernel), pack(m.Version)}
	const query = "SELECT id FROM machine WHERE host = $1 AND processor = $2 AND kernel = $3 AND version = $4"
	err = t.QueryRowContext(t.ctx, query, row...).Scan(&id)
	if !errors.Is(err, sql.ErrNoRows) {
		return id, err
	}
	if _, err := t.insert("machine", "host, processor, kernel, version", [][]any{row}); err != nil {
		return 0, err
	}
	err = t.QueryRowContext(t.ctx, query, row...).Scan(&id)
	return id, err
}
