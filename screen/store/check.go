package store

import (
	"context"
	"errors"
	"fmt"
)

// Check reads all of the store and says everything that is wrong with it: pages
// of the file, references between tables, and what must hold between results. It
// takes as long as reading the file does.
func (r *Reader) Check(ctx context.Context) error {
	return r.View(ctx, func(v *View) error {
		var errs []error
		if r.path != "" {
			lines, err := column(ctx, v.tx, "PRAGMA integrity_check")
			if err != nil {
				return err
			}
			for _, line := range lines {
				if line != "ok" {
					errs = append(errs, fmt.Errorf("%w: %s", ErrDamaged, line))
				}
			}
		}
		for _, law := range laws {
			var broken int
			if err := v.tx.QueryRowContext(ctx, "SELECT count(*) FROM "+law.broken).Scan(&broken); err != nil {
				return err
			}
			if broken > 0 {
				errs = append(errs, fmt.Errorf("%w: %d times: %s", ErrDamaged, broken, law.what))
			}
		}
		return errors.Join(errs...)
	})
}

// laws hold after every transaction. broken lists the rows that break one.
var laws = []struct{ what, broken string }{
	{"a search has either shapes or an error", `generation g WHERE (g.error = '') <>
		EXISTS (SELECT 1 FROM shape s WHERE s.settings = g.settings AND s.structure = g.structure)`},
	{"shapes are numbered from 1 without gaps", `(SELECT count(*) n, min(conformer) low, max(conformer) high
		FROM shape GROUP BY settings, structure) s WHERE low <> 1 OR high <> n`},
	{"every shape has coordinates", `shape s WHERE NOT EXISTS (SELECT 1 FROM geometry x
		WHERE x.settings = s.settings AND x.structure = s.structure AND x.conformer = s.conformer)`},
	{"coordinates belong to a result", `geometry x
		WHERE NOT EXISTS (SELECT 1 FROM shape s WHERE s.settings = x.settings AND s.structure = x.structure AND s.conformer = x.conformer)
		AND NOT EXISTS (SELECT 1 FROM answer a WHERE a.settings = x.settings AND a.structure = x.structure AND a.conformer = x.conformer)`},
	{"coordinates are 24 bytes an atom", `geometry x JOIN structure s ON s.id = x.structure WHERE length(x.x_bohr) <> 24 * s.natoms`},
	{"an answer has either an energy or an error", "answer WHERE (error = '') = (energy_hartree IS NULL)"},
	{"an answer is about a shape that was found", `answer a JOIN settings l ON l.id = a.settings WHERE NOT EXISTS (SELECT 1 FROM shape s
		WHERE s.settings = l.first AND s.structure = a.structure AND s.conformer = a.conformer)`},
	{"a population belongs to a member of the ensemble", `population p WHERE NOT EXISTS (SELECT 1 FROM member m
		WHERE m.settings = p.settings AND m.structure = p.structure AND m.conformer = p.conformer AND m.rank = p.rank)`},
	{"the levels of a run are all there", `run r WHERE r.settings IS NOT NULL
		AND NOT EXISTS (SELECT 1 FROM settings s WHERE s.id = r.settings)`},
}
