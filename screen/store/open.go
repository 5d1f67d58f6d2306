package store

import (
	"context"
	"database/sql"
	"errors"
	"strings"
)

// A Reader reads a store, also while others write into it. It may be used by
// several goroutines.
type Reader struct {
	*dialect
	where string // for messages
	path  string // of the file; empty for a server
	read  *sql.DB
}

// A Store reads and writes. It may be used by several goroutines, and several
// processes may open one store: writers wait for one another.
type Store struct {
	Reader
	write    *sql.DB
	options  Options
	warnings []string
	lock     func(context.Context, *Store) (lock, error) // see Hold

	settings memory[Key]     // ids
	machines memory[Machine] // ids
	atoms    memory[int64]   // of structures
}

// Options are what a store is told about its user.
type Options struct {
	Machine Machine // this one: every result that is committed is marked with it

	migrations []string                                // nil: those of this package
	network    func(path string) (name string, _ bool) // nil: networkFS
}

// Open opens the store at the path of a file or at a PostgreSQL URL, for writing.
// A file or a schema that holds nothing becomes a new store; an older version of
// ours is brought up to date. Anything else is refused and not touched, see
// ErrForeign and VersionError.
//
// A URL may name the schema that the tables are in: ?search_path=NAME. It is made
// if it is not there; without it the tables stand in the user's default schema.
func Open(ctx context.Context, where string, o Options) (*Store, error) {
	if o.migrations == nil {
		o.migrations = migrations()
	}
	if o.network == nil {
		o.network = networkFS
	}
	s := &Store{options: o}
	open := s.openSQLite
	if IsURL(where) {
		open = s.openPostgres
	}
	if err := open(ctx, where); err != nil {
		return nil, errors.Join(s.fault(s.where, err), s.Close())
	}
	return s, nil
}

// OpenReader opens a store for reading alone. It makes nothing: where there is
// no store the error is ErrMissing.
func OpenReader(ctx context.Context, where string) (*Reader, error) {
	r := &Reader{}
	open := r.openSQLite
	if IsURL(where) {
		open = r.openPostgres
	}
	err := open(ctx, where)
	if err == nil {
		err = r.checkVersion(ctx, len(migrations()))
	}
	if err != nil {
		return nil, errors.Join(r.fault(r.where, err), r.Close())
	}
	return r, nil
}

// IsURL says whether where means a database server, not a file.
func IsURL(where string) bool {
	return strings.HasPrefix(where, "postgres://") || strings.HasPrefix(where, "postgresql://")
}

// Where names the store for a message: its path, or its URL without the password.
func (r *Reader) Where() string { return r.where }

// Warnings are what a person should know about this store: that its file stands
// on a network file system, for one.
func (s *Store) Warnings() []string { return s.warnings }

// Close ends reading. Views must have ended.
func (r *Reader) Close() error {
	if r.read == nil {
		return nil
	}
	return r.fault(r.where, r.read.Close())
}

// Close ends reading and writing, and leaves all that was committed in the file
// itself, so that it can be copied alone, unless other processes have it open.
func (s *Store) Close() error {
	err := s.Reader.Close()
	if s.write == nil {
		return err
	}
	if s.path != "" {
		err = errors.Join(err, s.fault(s.where, s.emptyLog()))
	}
	return errors.Join(err, s.fault(s.where, s.write.Close()))
}

// emptyLog moves what the write-ahead log holds into the file. Another process
// that reads at this moment keeps it from that, for which the answer has a row and
// SQLite a code: neither is an error, the log is read along with the file.
func (s *Store) emptyLog() error {
	_, err := s.write.Exec("PRAGMA busy_timeout = 1000; PRAGMA wal_checkpoint(TRUNCATE)")
	if err != nil && errors.Is(s.kind(err), ErrBusy) {
		return nil
	}
	return err
}
