package store

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"strconv"
	"strings"
)

// A txn is a transaction that writes.
type txn struct {
	*sql.Tx
	ctx  context.Context
	s    *Store
	made map[Machine]int64 // not yet committed, so not yet to be remembered
}

// attempts is how often a transaction is begun that another one stops.
const attempts = 10

// update runs do in one transaction: all of it is written, or nothing. do may be
// run again.
func (s *Store) update(ctx context.Context, do func(*txn) error) error {
	var err error
	for range attempts {
		if err = s.try(ctx, do); err == nil || !s.again(err) {
			break
		}
	}
	return s.fault(s.where, err)
}

func (s *Store) try(ctx context.Context, do func(*txn) error) error {
	tx, err := s.write.BeginTx(ctx, nil)
	if err != nil {
		return err
	}
	defer rollback(tx)
	if err := do(&txn{Tx: tx, ctx: ctx, s: s, made: map[Machine]int64{}}); err != nil {
		return err
	}
	return tx.Commit()
}

// rollback ends a transaction that was not committed. There is nothing to do
// about an error: a transaction that is not committed is not written.
func rollback(tx *sql.Tx) { _ = tx.Rollback() }

func (t *txn) exec(query string, args ...any) error {
	_, err := t.ExecContext(t.ctx, query, args...)
	return err
}

// affected runs a statement and returns how many rows it touched.
func (t *txn) affected(query string, args ...any) (int, error) {
	res, err := t.ExecContext(t.ctx, query, args...)
	if err != nil {
		return 0, err
	}
	n, err := res.RowsAffected()
	return int(n), err
}

// rowsAtOnce bounds the rows of one INSERT: a statement has at most 32,766
// arguments in SQLite, and half as many columns as we have would do.
const rowsAtOnce = 64

// insert adds rows to a table and skips those whose key is there already. It
// returns how many were new.
func (t *txn) insert(table, columns string, rows [][]any) (int, error) {
	fresh := 0
	for len(rows) > 0 {
		some := rows[:min(len(rows), rowsAtOnce)]
		rows = rows[len(some):]
		var args []any
		for _, row := range some {
			args = append(args, row...)
		}
		n, err := t.affected("INSERT INTO "+table+" ("+columns+") VALUES "+
			placeholders(len(some), len(some[0]))+" ON CONFLICT DO NOTHING", args...)
		if err != nil {
			return 0, fmt.Errorf("%s: %w", table, err)
		}
		fresh += n
	}
	return fresh, nil
}

// placeholders is ($1,$2),($3,$4), ...
func placeholders(rows, columns int) string {
	var b strings.Builder
	for i := range rows * columns {
		switch {
		case i == 0:
			b.WriteByte('(')
		case i%columns == 0:
			b.WriteString("),(")
		default:
			b.WriteByte(',')
		}
		b.WriteByte('$')
		b.WriteString(itoa(i + 1))
	}
	b.WriteByte(')')
	return b.String()
}

// column reads a query of one text a row.
func column(ctx context.Context, tx *sql.Tx, query string, args ...any) ([]string, error) {
	var out []string
	err := each(ctx, tx, func(rows *sql.Rows) error {
		var s string
		err := rows.Scan(text{&s})
		out = append(out, s)
		return err
	}, query, args...)
	return out, err
}

// each hands every row of a query to scan.
func each(ctx context.Context, tx *sql.Tx, scan func(*sql.Rows) error, query string, args ...any) (err error) {
	rows, err := tx.QueryContext(ctx, query, args...)
	if err != nil {
		return err
	}
	defer func() { err = errors.Join(err, rows.Close()) }()
	for rows.Next() {
		if err := scan(rows); err != nil {
			return err
		}
	}
	return rows.Err()
}

func itoa(n int) string { return strconv.Itoa(n) }
