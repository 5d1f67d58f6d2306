package store

import (
	"context"
	"database/sql"
	"encoding/json"
	"errors"
	"fmt"
	"slices"
)

// A View is one consistent picture of a store: what was committed when it began,
// and nothing that came after. It belongs to one goroutine.
//
// Structures, keys and conformers that are not there give empty answers, not
// errors.
type View struct {
	ctx    context.Context
	tx     *sql.Tx
	levels map[Key]level
}

// A level is a row of settings.
type level struct {
	Level
	id    int64
	below Key
}

// View lets look read. Writers are not kept waiting, but for a file on a network
// file system; a view that is held for long lets the log beside a file grow.
func (r *Reader) View(ctx context.Context, look func(*View) error) error {
	tx, err := r.read.BeginTx(ctx, r.snapshot)
	if err != nil {
		return r.fault(r.where, err)
	}
	defer rollback(tx)
	v := &View{ctx: ctx, tx: tx, levels: map[Key]level{}}
	err = v.loadLevels()
	if err == nil {
		err = look(v)
	}
	return r.fault(r.where, err)
}

func (v *View) each(scan func(*sql.Rows) error, query string, args ...any) error {
	return each(v.ctx, v.tx, scan, query, args...)
}

func (v *View) loadLevels() error {
	keys := map[int64]Key{}
	return v.each(func(rows *sql.Rows) error {
		var l level
		var key Key
		var below sql.NullInt64
		err := rows.Scan(&l.id, &key, &below, text{&l.Tier}, text{&l.Settings})
		keys[l.id] = key
		l.below = keys[below.Int64]
		v.levels[key] = l
		return err
	}, "SELECT id, key, below, tier, settings FROM settings ORDER BY id") // below comes before
}

// ladder lists the keys from the first level to key.
func (v *View) ladder(key Key) []Key {
	var keys []Key
	for ; key != ""; key = v.levels[key].below {
		if _, known := v.levels[key]; !known {
			return nil
		}
		keys = append(keys, key)
	}
	slices.Reverse(keys)
	return keys
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

// Generation returns what the generator found for a structure, without
// coordinates: see Geometries.
func (v *View) Generation(structure int64, key Key) (g Generation, there bool, err error) {
	g = Generation{Structure: structure, Key: key}
	var complete int
	err = v.tx.QueryRowContext(v.ctx, `SELECT error, stack, starts, embedded, relaxed, found, complete, warnings, details, seconds,
			host, processor, kernel, version
		FROM generation LEFT JOIN machine ON machine.id = machine WHERE settings = $1 AND structure = $2`, v.levels[key].id, structure).
		Scan(text{&g.Error}, text{&g.Stack}, &g.Starts, &g.Embedded, &g.Relaxed, &g.Found, &complete, list{&g.Warnings}, text{&g.Details},
			&g.Seconds, text{&g.Machine.Host}, text{&g.Machine.Processor}, text{&g.Machine.Kernel}, text{&g.Machine.Version})
	if err != nil {
		return g, false, unless(err, sql.ErrNoRows)
	}
	g.Complete = complete != 0
	err = v.each(func(rows *sql.Rows) error {
		var s Shape
		err := rows.Scan(number{&s.Energy}, &s.Family, &s.Hits)
		g.Shapes = append(g.Shapes, s)
		return err
	}, "SELECT energy_hartree, family, hits FROM shape WHERE settings = $1 AND structure = $2 ORDER BY conformer", v.levels[key].id, structure)
	return g, err == nil, err
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

// unless is err, or nil where it is the one that says what was asked for.
func unless(err, expected error) error {
	if errors.Is(err, expected) {
		return nil
	}
	return err
}
