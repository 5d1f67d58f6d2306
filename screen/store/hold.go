package store

import (
	"context"
	"database/sql"
	"errors"
	"sync"
)

// A Holder says who drives a run, in words for a person.
type Holder struct {
	Program string // "torsieve screen"
	Host    string
	PID     int
	Begun   string // RFC 3339
}

// A Hold is the right to drive a run: to set it, to plan, to write its folder.
// Workers need none. It ends with the process, however that ends.
type Hold struct {
	s    *Store
	lock lock
	once sync.Once
	err  error
}

// A lock is what the operating system or the server keeps for us.
type lock struct {
	check  func(context.Context) error
	unlock func() error
}

// Hold takes the right to drive the run, or says who has it (HeldError). The lock
// belongs to the operating system or to the server, so nobody has to wait for a
// process that was killed; the store only remembers whose it is.
func (s *Store) Hold(ctx context.Context, h Holder) (*Hold, error) {
	lock, err := s.lock(ctx, s)
	if errors.Is(err, errLocked) {
		held, err := s.holder(ctx)
		if err != nil {
			return nil, err
		}
		return nil, &HeldError{Where: s.where, Holder: held}
	}
	if err != nil {
		return nil, s.fault(s.where, err)
	}
	err = s.update(ctx, func(t *txn) error {
		return t.exec(`INSERT INTO holder (id, program, host, pid, begun) VALUES (1, $1, $2, $3, $4)
			ON CONFLICT (id) DO UPDATE SET program = excluded.program, host = excluded.host, pid = excluded.pid, begun = excluded.begun`,
			pack(h.Program), pack(h.Host), h.PID, pack(h.Begun))
	})
	if err != nil {
		return nil, errors.Join(err, lock.unlock())
	}
	return &Hold{s: s, lock: lock}, nil
}

// Check says whether the right is still ours: a server that was restarted has
// forgotten it. The run must then stop.
func (h *Hold) Check(ctx context.Context) error {
	return h.s.fault(h.s.where, h.lock.check(ctx))
}

// Release gives the right up. It may be called twice.
func (h *Hold) Release() error {
	h.once.Do(func() { h.err = h.s.fault(h.s.where, h.lock.unlock()) })
	return h.err
}

// errLocked: somebody else has the lock.
var errLocked = errors.New("locked")

func (s *Store) holder(ctx context.Context) (h Holder, err error) {
	err = s.View(ctx, func(v *View) error {
		err := v.tx.QueryRowContext(ctx, "SELECT program, host, pid, begun FROM holder").
			Scan(text{&h.Program}, text{&h.Host}, &h.PID, text{&h.Begun})
		return unless(err, sql.ErrNoRows)
	})
	return h, err
}

// lockServer takes a lock of the server's, which ends with the connection. It is
// named by ours and the schema's name.
func lockServer(ctx context.Context, s *Store) (lock, error) {
	conn, err := s.write.Conn(ctx)
	if err != nil {
		return lock{}, err
	}
	var got bool
	err = conn.QueryRowContext(ctx, "SELECT pg_try_advisory_lock($1, hashtext(current_schema()))", applicationID).Scan(&got)
	if err == nil && !got {
		err = errLocked
	}
	if err != nil {
		return lock{}, errors.Join(err, conn.Close())
	}
	return lock{
		check: conn.PingContext,
		unlock: func() error {
			// Closing would give the connection back to the pool, with the lock.
			_, err := conn.ExecContext(context.WithoutCancel(ctx), "SELECT pg_advisory_unlock($1, hashtext(current_schema()))", applicationID)
			err = errors.Join(err, conn.Close())
			if errors.Is(postgresKind(err), ErrUnreachable) {
				return nil // the lock ended with the connection
			}
			return err
		},
	}, nil
}

// lockBeside takes a lock of the operating system on a file beside the store. It
// is not taken on the store itself, whose locks are SQLite's. The file stays:
// removing it would let two processes lock two files of one name.
func lockBeside(_ context.Context, s *Store) (lock, error) {
	unlock, err := lockFile(s.path + ".lock")
	return lock{check: func(context.Context) error { return nil }, unlock: unlock}, err
}
