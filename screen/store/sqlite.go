package store

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"io/fs"
	"net/url"
	"os"
	"path/filepath"
	"strconv"
	"strings"

	_ "modernc.org/sqlite" // the driver
)

const (
	// applicationID marks a SQLite file as ours, in the field of its header that
	// is meant for that. The bytes read "tsdb".
	applicationID = 0x74736462

	// wait is how long a writer waits for another one, in milliseconds.
	wait = 10000

	// pageSize is that of a new file. Coordinates of 60 atoms take 1440 bytes, of
	// which two fit into SQLite's usual page of 4096 and five into this one: a row
	// costs 306 bytes beside its coordinates, not 708. Pages of 16384 would save
	// another 124, but every page that a commit touches is written to the log.
	pageSize = "8192"
)

// openSQLite opens a file with one connection that writes and a few that read.
//
// With a write-ahead log and synchronous = NORMAL a kill loses nothing and a
// power cut at most the last commits, never the file (sqlite.org/wal.html): those
// units are done again. FULL would cost eight times as much per commit. The log
// needs memory that is shared between processes, so on a network file system a
// rollback journal is used, where only FULL is safe.
func (s *Store) openSQLite(ctx context.Context, path string) error {
	s.dialect, s.where = &sqliteDialect, path
	abs, err := filepath.Abs(path)
	if err != nil {
		return err
	}
	if err := checkFile(abs); err != nil {
		return err
	}
	s.path = abs
	journal, synchronous := "WAL", "NORMAL"
	if name, yes := s.options.network(filepath.Dir(abs)); yes {
		journal, synchronous = "DELETE", "FULL"
		s.warnings = append(s.warnings, fmt.Sprintf("%s stands on a network file system (%s): one process at a time may work on it, "+
			"and slower; a folder on a local disk is safer", path, name))
	}
	s.write, err = sql.Open("sqlite", sqliteName(abs, "rwc", "_txlock=immediate",
		"_pragma=page_size("+pageSize+")", "_pragma=synchronous("+synchronous+")", "_pragma=foreign_keys(1)"))
	if err != nil {
		return err
	}
	s.write.SetMaxOpenConns(1)
	if err := checkOurs(ctx, s.write); err != nil {
		return err
	}
	if err := setJournal(ctx, s.write, journal); err != nil {
		return err
	}
	if err := s.migrate(ctx); err != nil {
		return err
	}
	s.lock = lockBeside
	return s.Reader.openSQLite(ctx, path)
}

// openSQLite opens a file with connections that take no statement that writes.
// The file itself is opened for writing where that is allowed, or the last reader
// could not put away the log beside it. Where nothing can be written beside it, and
// no log is left to read, it is read as a file that nobody changes.
func (r *Reader) openSQLite(ctx context.Context, path string) error {
	r.dialect, r.where = &sqliteDialect, path
	abs, err := filepath.Abs(path)
	if err != nil {
		return err
	}
	if info, err := os.Stat(abs); errors.Is(err, fs.ErrNotExist) || err == nil && info.Size() == 0 {
		return ErrMissing
	}
	if err := checkFile(abs); err != nil {
		return err
	}
	r.path = abs
	if err := r.readAs(ctx, sqliteName(abs, "rw", "_pragma=query_only(1)")); err == nil || !errors.Is(sqliteKind(err), ErrReadOnly) {
		return err
	}
	if info, err := os.Stat(abs + "-wal"); err == nil && info.Size() > 0 {
		return fmt.Errorf("%w: a process was cut off while it wrote, and reading what it left needs the right to write beside it", ErrReadOnly)
	}
	return r.readAs(ctx, sqliteName(abs, "ro", "immutable=1"))
}

func (r *Reader) readAs(ctx context.Context, name string) (err error) {
	if r.read, err = sql.Open("sqlite", name); err != nil {
		return err
	}
	r.read.SetMaxOpenConns(4)
	if err := checkOurs(ctx, r.read); err != nil {
		return errors.Join(err, r.read.Close())
	}
	return nil
}

// sqliteName is the name of a file as SQLite and its driver want it.
func sqliteName(path, mode string, more ...string) string {
	path = filepath.ToSlash(path)
	if !strings.HasPrefix(path, "/") {
		path = "/" + path // C:/...
	}
	u := url.URL{Scheme: "file", Path: path}
	more = append([]string{"mode=" + mode, "_pragma=busy_timeout(" + strconv.Itoa(wait) + ")"}, more...)
	return u.String() + "?" + strings.Join(more, "&")
}

// checkFile refuses what is no file, in words that SQLite does not have.
func checkFile(path string) error {
	info, err := os.Stat(path)
	switch {
	case err == nil && !info.Mode().IsRegular():
		return fmt.Errorf("%w: it is no file", ErrForeign)
	case errors.Is(err, fs.ErrNotExist):
		if _, err := os.Stat(filepath.Dir(path)); err != nil {
			return err
		}
		return nil
	}
	return err
}

// checkOurs refuses a database of somebody else before anything is written.
func checkOurs(ctx context.Context, db *sql.DB) error {
	var id, tables int
	if err := db.QueryRowContext(ctx, "PRAGMA application_id").Scan(&id); err != nil {
		return err
	}
	if err := db.QueryRowContext(ctx, "SELECT count(*) FROM sqlite_master").Scan(&tables); err != nil {
		return err
	}
	if id == applicationID || id == 0 && tables == 0 {
		return nil
	}
	return ErrForeign
}

func setJournal(ctx context.Context, db *sql.DB, mode string) error {
	var got string
	if err := db.QueryRowContext(ctx, "PRAGMA journal_mode = "+mode).Scan(&got); err != nil {
		return err
	}
	if !strings.EqualFold(got, mode) {
		return fmt.Errorf("%w: it does not take the journal mode %s, but %s", ErrBusy, mode, got)
	}
	return nil
}
