package store

import (
	"database/sql"
	"errors"
	"fmt"
	"math"
)

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
