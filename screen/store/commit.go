package store

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"math"
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

func (t *txn) generation(g *Generation) (fresh int, err error) {
	o, err := t.owned(g.Structure, g.Key, g.Work)
	if err != nil {
		return 0, err
	}
	shapes, geometries, err := g.rows(o)
	if err != nil {
		return 0, err
	}
	warnings, err := listed(g.Warnings)
	if err != nil {
		return 0, err
	}
	fresh, err = t.insert("generation",
		"settings, structure, error, stack, starts, embedded, relaxed, found, complete, warnings, seconds, machine, details", [][]any{{
			o.settings, o.structure, pack(g.Error), pack(g.Stack), g.Starts, g.Embedded, g.Relaxed, g.Found, yes(g.Complete),
			warnings, g.Seconds, o.machine, pack(g.Details),
		}})
	if err != nil || fresh == 0 {
		return 0, err
	}
	if _, err = t.insert("shape", "settings, structure, conformer, energy_hartree, family, hits", shapes); err != nil {
		return 0, err
	}
	_, err = t.insert("geometry", "settings, structure, conformer, x_bohr", geometries)
	return fresh, err
}

// rows are the shapes as they stand in their two tables.
func (g *Generation) rows(o owned) (shapes, geometries [][]any, err error) {
	if (g.Error == "") == (len(g.Shapes) == 0) {
		return nil, nil, errors.New("want shapes or an error")
	}
	for i, c := range g.Shapes {
		err := checkCoordinates(c.X, o.natoms)
		if c.X == nil {
			err = errors.New("no coordinates")
		}
		if math.IsNaN(c.Energy) || math.IsInf(c.Energy, 0) {
			err = fmt.Errorf("energy %g", c.Energy)
		}
		if err != nil {
			return nil, nil, fmt.Errorf("shape %d: %w", i+1, err)
		}
		shapes = append(shapes, []any{o.settings, o.structure, i + 1, maybe(c.Energy), c.Family, c.Hits})
		geometries = append(geometries, []any{o.settings, o.structure, i + 1, packCoordinates(c.X)})
	}
	return shapes, geometries, nil
}

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

func (t *txn) ensemble(e *Ensemble) (fresh int, err error) {
	o, err := t.owned(e.Structure, e.Key, e.Work)
	if err != nil {
		return 0, err
	}
	entered, err := json.Marshal(e.Entered)
	if err != nil {
		return 0, err
	}
	warnings, err := listed(e.Warnings)
	if err != nil {
		return 0, err
	}
	fresh, err = t.insert("ensemble",
		"settings, structure, status, reason, stack, entered, missed_weight, missed_weight_p95, warnings, seconds, machine, details", [][]any{{
			o.settings, o.structure, pack(e.Status), pack(e.Reason), pack(e.Stack), string(entered), maybe(e.MissedWeight), maybe(e.MissedP95),
			warnings, e.Seconds, o.machine, pack(e.Details),
		}})
	if err != nil || fresh == 0 {
		return 0, err
	}
	return fresh, errors.Join(t.members(e, o), t.weights(e, o))
}

func (t *txn) members(e *Ensemble, o owned) error {
	var rows [][]any
	for _, m := range e.Members {
		if err := checkFinite("the energy", m.Energy, m.Thermal); err != nil {
			return fmt.Errorf("conformer %d: %w", m.Conformer, err)
		}
		rows = append(rows, []any{
			o.settings, o.structure, m.Conformer, m.Rank, m.Copies, pack(m.LastTier), maybe(m.Energy), maybe(m.Thermal),
			pack(m.Why), pack(m.Details),
		})
	}
	_, err := t.insert("member", "settings, structure, conformer, rank, copies, last_tier, energy_hartree, thermal_hartree, why, details", rows)
	return err
}

func (t *txn) weights(e *Ensemble, o owned) error {
	var temperatures, populations [][]any
	for place, w := range e.Weights {
		if err := checkFinite("a weight", w.Temperature, w.FreeEnergy, w.Energy, w.Entropy); err != nil {
			return err
		}
		temperatures = append(temperatures, []any{o.settings, o.structure, place, w.Temperature, maybe(w.FreeEnergy), maybe(w.Energy), maybe(w.Entropy)})
		for rank, p := range w.Populations {
			if err := checkFinite("a population", p.Fraction, p.Low, p.High); err != nil {
				return err
			}
			populations = append(populations, []any{o.settings, o.structure, place, rank + 1, p.Conformer, maybe(p.Fraction), maybe(p.Low), maybe(p.High)})
		}
	}
	if _, err := t.insert("temperature", "settings, structure, place, temperature_k, free_energy_hartree, energy_hartree, entropy_hartree_per_k", temperatures); err != nil {
		return err
	}
	_, err := t.insert("population", "settings, structure, place, rank, conformer, population, population_p05, population_p95", populations)
	return err
}
