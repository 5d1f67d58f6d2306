package store

import (
	"database/sql"
	"errors"
	"fmt"
	"math"
)

func (t *txn) answers(list []Answer) (fresh int, err error) {
	for i := range list {
		a := &list[i]
		n, err := t.answer(a)
		if err = errors.Join(err, t.end(a.Structure, a.Key, a.Conformer)); err != nil {
			return 0, fmt.Errorf("conformer %d of structure %d: %w", a.Conformer, a.Structure, err)
		}
		fresh += n
	}
	return fresh, nil
}

func (t *txn) answer(a *Answer) (fresh int, err error) {
	o, err := t.owned(a.Structure, a.Key, a.Work)
	if err != nil {
		return 0, err
	}
	if err := errors.Join(a.check(o.natoms), t.known(o, a.Conformer)); err != nil {
		return 0, err
	}
	doubts, err := listed(a.Doubts)
	if err != nil {
		return 0, err
	}
	fresh, err = t.insert("answer",
		"settings, structure, conformer, energy_hartree, solvation_hartree, error, stack, doubts, gradients, seconds, machine, details", [][]any{{
			o.settings, o.structure, a.Conformer, maybe(a.Energy), maybe(a.Solvation), pack(a.Error), pack(a.Stack), doubts,
			a.Gradients, a.Seconds, o.machine, pack(a.Details),
		}})
	if err != nil || fresh == 0 || a.X == nil {
		return fresh, err
	}
	_, err = t.insert("geometry", "settings, structure, conformer, x_bohr", [][]any{{o.settings, o.structure, a.Conformer, packCoordinates(a.X)}})
	return fresh, err
}

// known says whether the shape was found that a conformer began as.
func (t *txn) known(o owned, conformer int) error {
	var there bool
	err := t.QueryRowContext(t.ctx, `SELECT EXISTS (SELECT 1 FROM shape
		WHERE settings = (SELECT first FROM settings WHERE id = $1) AND structure = $2 AND conformer = $3)`,
		o.settings, o.structure, conformer).Scan(&there)
	if err == nil && !there {
		err = fmt.Errorf("its shape: %w", ErrUnknown)
	}
	return err
}

func (a *Answer) check(natoms int) error {
	if a.Conformer < 1 {
		return errors.New("conformers count from 1")
	}
	if (a.Error == "") == math.IsNaN(a.Energy) {
		return errors.New("want an energy or an error")
	}
	return errors.Join(checkFinite("the energy", a.Energy, a.Solvation), checkCoordinates(a.X, natoms))
}

// Answers returns what a tier answered for a structure, by number of conformer,
// without coordinates: see Geometries.
func (v *View) Answers(structure int64, key Key) ([]Answer, error) {
	var out []Answer
	err := v.each(func(rows *sql.Rows) error {
		a := Answer{Structure: structure, Key: key}
		err := rows.Scan(&a.Conformer, number{&a.Energy}, number{&a.Solvation}, text{&a.Error}, text{&a.Stack}, list{&a.Doubts}, &a.Gradients,
			text{&a.Details}, &a.Seconds, text{&a.Machine.Host}, text{&a.Machine.Processor}, text{&a.Machine.Kernel}, text{&a.Machine.Version})
		out = append(out, a)
		return err
	}, `SELECT conformer, energy_hartree, solvation_hartree, error, stack, doubts, gradients, details, seconds,
			host, processor, kernel, version
		FROM answer LEFT JOIN machine ON machine.id = machine WHERE settings = $1 AND structure = $2 ORDER BY conformer`,
		v.levels[key].id, structure)
	return out, err
}

// Geometries returns the coordinates of a structure's conformers, by number, as
// a level left them: of each conformer that has a result there, from the last
// level up to it that moved it. 3N each, bohr.
func (v *View) Geometries(structure int64, key Key) (map[int][]float64, error) {
	out := map[int][]float64{}
	for _, k := range v.ladder(key) {
		moved, err := v.moved(structure, k)
		if err != nil {
			return nil, err
		}
		for n, x := range moved {
			out[n] = x
		}
	}
	if v.levels[key].below == "" {
		return out, nil
	}
	answered := map[int]bool{}
	err := v.each(func(rows *sql.Rows) error {
		var n int
		err := rows.Scan(&n)
		answered[n] = true
		return err
	}, "SELECT conformer FROM answer WHERE settings = $1 AND structure = $2 AND error = ''", v.levels[key].id, structure)
	for n := range out {
		if !answered[n] {
			delete(out, n)
		}
	}
	return out, err
}

// moved returns the coordinates that a level stored itself.
func (v *View) moved(structure int64, key Key) (map[int][]float64, error) {
	out := map[int][]float64{}
	err := v.each(func(rows *sql.Rows) error {
		var n int
		var b []byte
		if err := rows.Scan(&n, &b); err != nil {
			return err
		}
		x, err := unpackCoordinates(b)
		out[n] = x
		return err
	}, "SELECT conformer, x_bohr FROM geometry WHERE settings = $1 AND structure = $2", v.levels[key].id, structure)
	return out, err
}
