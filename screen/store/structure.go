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

// atoms returns how many atoms a structure has.
func (t *txn) atoms(structure int64) (int, error) {
	n, err := t.s.atoms.get(structure, func() (n int64, err error) {
		err = t.QueryRowContext(t.ctx, "SELECT natoms FROM structure WHERE id = $1", structure).Scan(&n)
		if errors.Is(err, sql.ErrNoRows) {
			err = fmt.Errorf("structure %d: %w", structure, ErrUnknown)
		}
		return n, err
	})
	return int(n), err
}

// Structure returns a structure by its id.
func (v *View) Structure(id int64) (Structure, bool, error) {
	found, err := v.structures("WHERE id = $1", id)
	if len(found) == 0 {
		return Structure{}, false, err
	}
	return found[0], true, err
}

// StructuresOf returns the structures of a SMILES, the first one stored first.
func (v *View) StructuresOf(smiles string) ([]Structure, error) {
	return v.structures("WHERE smiles = $1 ORDER BY id", pack(smiles))
}

func (v *View) structures(which string, args ...any) ([]Structure, error) {
	var out []Structure
	err := v.each(func(rows *sql.Rows) error {
		var s Structure
		var b []byte
		if err := rows.Scan(&s.ID, text{&s.SMILES}, &s.NAtoms, text{&s.Drawing}, &b); err != nil {
			return err
		}
		x, err := unpackCoordinates(b)
		if err == nil && s.NAtoms > 0 {
			for start := range slices.Chunk(x, 3*s.NAtoms) {
				s.Starts = append(s.Starts, start)
			}
		}
		out = append(out, s)
		return err
	}, "SELECT id, smiles, natoms, drawing, starts_bohr FROM structure "+which, args...)
	return out, err
}
