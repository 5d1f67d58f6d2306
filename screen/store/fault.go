package store

import (
	"context"
	"database/sql"
	"database/sql/driver"
	"errors"
	"fmt"
	"io"
	"net"
	"strings"

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
	if errors.Is(err, context.Canceled) {
		return err
	}
	if kind := d.kind(err); kind != nil {
		return &namedError{fmt.Errorf("%s: %w (%w)", where, kind, err)}
	}
	if errors.Is(err, context.DeadlineExceeded) {
		return err
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
	lost := errors.Is(err, driver.ErrBadConn) || errors.Is(err, sql.ErrConnDone) ||
		errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF)
	if lost || errors.As(err, &refused) || errors.As(err, &network) {
		return ErrUnreachable
	}
	var e *pgconn.PgError
	if !errors.As(err, &e) {
		return nil
	}
	switch e.Code {
	case "53100": // disk_full
		return ErrFull
	case "25006", "42501": // read_only_sql_transaction, insufficient_privilege
		return ErrReadOnly
	case "55P03": // lock_not_available
		return ErrBusy
	case "XX001", "XX002": // data_corrupted, index_corrupted
		return ErrDamaged
	}
	for _, class := range []string{"08", "28", "57"} { // connection, authorisation, shutdown
		if strings.HasPrefix(e.Code, class) {
			return ErrUnreachable
		}
	}
	return nil
}

// postgresAgain: two workers that commit the same units in another order may
// stop one another; the loser starts again.
func postgresAgain(err error) bool {
	var e *pgconn.PgError
	return errors.As(err, &e) && (e.Code == "40001" || e.Code == "40P01") // serialization_failure, deadlock_detected
}
