package store

import (
	"context"
	"errors"
	"fmt"
	"net"

	"github.com/jackc/pgx/v5/pgconn"
	"modernc.org/sqlite"
	lib "modernc.org/sqlite/lib"
)

// fault puts the store's name and the kind of error in front of what a driver
// said. Errors that are ours already, and the end of a context, pass.
func (d *dialect) fault(where string, err error) error {
	if err == nil || errors.As(err, new(*namedError)) {
		return err
	}
	if errors.Is(err, context.Canceled) || errors.Is(err, context.DeadlineExceeded) {
		return err
	}
	if kind := d.kind(err); kind != nil {
		return &namedError{fmt.Errorf("%s: %w (%w)", where, kind, err)}
	}
	return &namedError{fmt.Errorf("%s: %w", where, err)}
}

// A namedError says already which store it is about.
type namedError struct{ error }

func (e *namedError) Unwrap() error { return e.error }

// sqliteKind goes by the primary result code, the low byte of what the driver
// hands over (sqlite.org/rescode.html).
func sqliteKind(err error) error {
	var e *sqlite.Error
	if !errors.As(err, &e) {
		return nil
	}
	switch e.Code() & 0xff {
	case lib.SQLITE_FULL:
		return ErrFull
	case lib.SQLITE_READONLY, lib.SQLITE_PERM, lib.SQLITE_CANTOPEN:
		return ErrReadOnly
	case lib.SQLITE_BUSY, lib.SQLITE_LOCKED:
		return ErrBusy
	case lib.SQLITE_CORRUPT:
		return ErrDamaged
	case lib.SQLITE_NOTADB:
		return ErrForeign
	}
	return nil
}

// postgresKind goes by SQLSTATE (PostgreSQL manual, appendix A).
func postgresKind(err error) error {
	var refused *pgconn.ConnectError
	var network net.Error
	if errors.As(err, &refused) || errors.As(err, &network) {
		return ErrUnreachable
	}
	var e *pgconn.PgError
	if !errors.As(err, &e) {
		return nil
	}
	switch {
	case e.Code == "53100": // disk_full
		return ErrFull
	case e.Code == "25006", e.Code == "42501": // read_only_sql_transaction, insufficient_privilege
		return ErrReadOnly
	case e.Code == "55P03": // lock_not_available
		return ErrBusy
	case e.Code == "XX001", e.Code == "XX002": // data_corrupted, index_corrupted
		return ErrDamaged
	case e.Code[:2] == "08", e.Code[:2] == "57", e.Code[:2] == "28": // connection, shutdown, authorisation
		return ErrUnreachable
	}
	return nil
}

// postgresAgain: two workers that commit the same units in another order may
// stop one another; the loser starts again.
func postgresAgain(err error) bool {
	var e *pgconn.PgError
	return errors.As(err, &e) && (e.Code == "40001" || e.Code == "40P01") // serialization_failure, deadlock_detected
}
