package store

import (
	"context"
	"database/sql"
	_ "embed"
	"errors"
	"slices"
)

//go:embed schema.sql
var schema string

// migrations lead from no tables to those of this program: the n-th takes version
// n to version n+1. They are never changed once a version is out, only followed.
func migrations() []string { return []string{schema} }

// migrate brings the tables up to date in one transaction, or refuses them.
func (s *Store) migrate(ctx context.Context) error {
	want := len(s.options.migrations)
	return s.update(ctx, func(t *txn) error {
		if s.path == "" { // one at a time; SQLite's writer is alone already
			if err := t.exec("SELECT pg_advisory_xact_lock($1)", applicationID); err != nil {
				return err
			}
		}
		have, program, err := version(ctx, t.Tx, s.dialect)
		switch {
		case err != nil && !errors.Is(err, ErrMissing):
			return err
		case have == want:
			return nil
		case have > want:
			return &VersionError{Where: s.where, Have: have, Want: want, Program: program}
		}
		for _, step := range s.options.migrations[have:] {
			if _, err := t.ExecContext(ctx, s.words.Replace(step)); err != nil {
				return err
			}
		}
		return t.mark(want)
	})
}

// mark writes down whose tables these are.
func (t *txn) mark(version int) error {
	if t.s.path != "" {
		if err := t.exec("PRAGMA application_id = " + itoa(applicationID)); err != nil {
			return err
		}
	}
	return t.exec(`INSERT INTO torsieve_store (id, version, program) VALUES (1, $1, $2)
		ON CONFLICT (id) DO UPDATE SET version = excluded.version, program = excluded.program`,
		version, pack(t.s.options.Machine.Version))
}

// checkVersion refuses to read tables of another version.
func (r *Reader) checkVersion(ctx context.Context, want int) error {
	tx, err := r.read.BeginTx(ctx, r.snapshot)
	if err != nil {
		return err
	}
	defer rollback(tx)
	have, program, err := version(ctx, tx, r.dialect)
	if err == nil && have != want {
		err = &VersionError{Where: r.where, Have: have, Want: want, Program: program}
	}
	return err
}

// version reads the version of the tables and the program that made them:
// ErrMissing where there are no tables, ErrForeign where there are others.
func version(ctx context.Context, tx *sql.Tx, d *dialect) (version int, program string, err error) {
	names, err := column(ctx, tx, d.tables)
	if err != nil {
		return 0, "", err
	}
	switch {
	case len(names) == 0:
		return 0, "", ErrMissing
	case !slices.Contains(names, "torsieve_store"):
		return 0, "", ErrForeign
	}
	err = tx.QueryRowContext(ctx, "SELECT version, program FROM torsieve_store").Scan(&version, text{&program})
	return version, program, err
}
