package store

import (
	"context"
	"fmt"
)

// Backup writes a copy of the store into a new file, while others may write: the
// files themselves must not be copied one after the other while a run goes on. A
// server's store is copied by the server's own means.
func (r *Reader) Backup(ctx context.Context, path string) error {
	if r.path == "" {
		return fmt.Errorf("%s: a store on a server is copied by pg_dump", r.where)
	}
	_, err := r.read.ExecContext(ctx, "VACUUM INTO $1", path)
	return r.fault(r.where, err)
}
