package store

import (
	"database/sql"
	"encoding/json"
	"errors"
	"fmt"
)

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

// Ensemble returns what became of a structure.
func (v *View) Ensemble(structure int64, key Key) (e Ensemble, there bool, err error) {
	e = Ensemble{Structure: structure, Key: key}
	var entered string
	err = v.tx.QueryRowContext(v.ctx, `SELECT status, reason, stack, entered, missed_weight, missed_weight_p95, warnings, details, seconds,
			host, processor, kernel, version
		FROM ensemble LEFT JOIN machine ON machine.id = machine WHERE settings = $1 AND structure = $2`, v.levels[key].id, structure).
		Scan(text{&e.Status}, text{&e.Reason}, text{&e.Stack}, &entered, number{&e.MissedWeight}, number{&e.MissedP95}, list{&e.Warnings},
			text{&e.Details}, &e.Seconds, text{&e.Machine.Host}, text{&e.Machine.Processor}, text{&e.Machine.Kernel}, text{&e.Machine.Version})
	if err != nil {
		return e, false, unless(err, sql.ErrNoRows)
	}
	if err := json.Unmarshal([]byte(entered), &e.Entered); err != nil {
		return e, false, fmt.Errorf("ensemble of structure %d: %w", structure, err)
	}
	err = errors.Join(v.members(&e), v.temperatures(&e), v.populations(&e))
	return e, err == nil, err
}

func (v *View) members(e *Ensemble) error {
	return v.each(func(rows *sql.Rows) error {
		var m Member
		err := rows.Scan(&m.Conformer, &m.Rank, &m.Copies, text{&m.LastTier}, number{&m.Energy}, number{&m.Thermal}, text{&m.Why}, text{&m.Details})
		e.Members = append(e.Members, m)
		return err
	}, `SELECT conformer, rank, copies, last_tier, energy_hartree, thermal_hartree, why, details
		FROM member WHERE settings = $1 AND structure = $2 ORDER BY conformer`, v.levels[e.Key].id, e.Structure)
}

func (v *View) temperatures(e *Ensemble) error {
	return v.each(func(rows *sql.Rows) error {
		var w Weights
		err := rows.Scan(number{&w.Temperature}, number{&w.FreeEnergy}, number{&w.Energy}, number{&w.Entropy})
		e.Weights = append(e.Weights, w)
		return err
	}, `SELECT temperature_k, free_energy_hartree, energy_hartree, entropy_hartree_per_k
		FROM temperature WHERE settings = $1 AND structure = $2 ORDER BY place`, v.levels[e.Key].id, e.Structure)
}

func (v *View) populations(e *Ensemble) error {
	return v.each(func(rows *sql.Rows) error {
		var place int
		var p Population
		if err := rows.Scan(&place, &p.Conformer, number{&p.Fraction}, number{&p.Low}, number{&p.High}); err != nil {
			return err
		}
		if place >= len(e.Weights) {
			return fmt.Errorf("ensemble of structure %d: a population without a temperature", e.Structure)
		}
		w := &e.Weights[place]
		w.Populations = append(w.Populations, p)
		return nil
	}, `SELECT place, conformer, population, population_p05, population_p95
		FROM population WHERE settings = $1 AND structure = $2 ORDER BY place, rank`, v.levels[e.Key].id, e.Structure)
}
