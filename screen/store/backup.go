package store

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
)

// Backup writes a copy of the store into a new file, while others may write: the
// files themselves must not be copied one after the other while a run goes on. A
// server's store is copied by the server's own means.
func (r *Reader) Backup(ctx context.Context, path string) error {
	if r.path == "" {
		return fmt.Errorf("%s: a store on a server is copied by pg_dump", r.where)
	}
	db, err := sql.Open("sqlite", sqliteName(r.path, "rw")) // readers' connections refuse the statement
	if err == nil {
		_, err = db.ExecContext(ctx, "VACUUM INTO $1", path)
		err = errors.Join(err, db.Close())
	}
	return r.fault(r.where, err)
}
