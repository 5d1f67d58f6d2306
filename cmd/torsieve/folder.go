package main

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"io"
	"os"
	"path/filepath"
	"sync"
	"time"

	"torsieve/internal/linalg"
	"torsieve/screen/report"
	"torsieve/screen/store"
)

// A runFolder is the run folder with its database, held by this process.
type runFolder struct {
	*report.Folder
	store *store.Store
	hold  *store.Hold
}

// takeFolder makes a run folder, or goes on with the run in it. With fresh that
// run is set aside first. where is the database; empty means the folder's own.
func (s *session) takeFolder(path, where string, fresh bool, run *report.Run) (*runFolder, error) {
	if where == "" {
		where = filepath.Join(path, report.StoreFile)
	}
	there, err := report.Holds(path)
	if err != nil {
		return nil, nothing(err, folderHint(err))
	}
	if there && fresh {
		if err := s.setAside(path, where); err != nil {
			return nil, err
		}
	}
	if err := os.MkdirAll(path, 0o755); err != nil {
		return nil, nothing(err, "")
	}
	// Nothing of a run that another process drives is written to.
	f, err := s.holdStore(where, run)
	if err != nil {
		return nil, nothing(err, folderHint(err))
	}
	if f.Folder, err = report.Create(path, run); err != nil {
		return nil, nothing(errors.Join(err, f.close()), folderHint(err))
	}
	if there && !fresh {
		s.voice.note("%s holds a run: what it has done with the same settings is not computed again", path)
	}
	for _, w := range f.store.Warnings() {
		s.voice.warn("%s", w)
	}
	return f, nil
}

// holdStore opens the database and takes the right to drive its run.
func (s *session) holdStore(where string, run *report.Run) (*runFolder, error) {
	host, _ := os.Hostname() //nolint:errcheck // without a name the process still has a number
	st, err := store.Open(s.ctx, where, store.Options{Machine: store.Machine{
		Host: host, Processor: processor(), Kernel: linalg.Kernel(), Version: run.Version,
	}})
	if err != nil {
		return nil, err
	}
	hold, err := st.Hold(s.ctx, store.Holder{Program: "torsieve screen", Host: host, PID: os.Getpid(), Begun: run.Begun})
	if err != nil {
		_ = st.Close() // the reason has been found
		return nil, err
	}
	return &runFolder{store: st, hold: hold}, nil
}

// setAside moves the run in the folder away, unless another process drives it. A
// database that cannot be opened is moved as well.
func (s *session) setAside(path, where string) error {
	f, err := s.holdStore(where, &report.Run{Version: version, Begun: time.Now().Format(time.RFC3339)})
	if err == nil {
		err = f.close()
	} else if !errors.As(err, new(*store.HeldError)) {
		err = nil
	}
	if err != nil {
		return nothing(err, folderHint(err))
	}
	aside, err := report.SetAside(path)
	if err != nil {
		return nothing(err, "")
	}
	s.voice.note("the earlier run is now in %s", aside)
	return nil
}

func (f *runFolder) close() error { return errors.Join(f.hold.Release(), f.store.Close()) }

// folderHint says what to do about a folder that was not taken.
func folderHint(err error) string {
	switch {
	case errors.Is(err, report.ErrNotEmpty):
		return "give a new or an empty folder"
	case errors.As(err, new(*store.HeldError)):
		return "wait for it to end, or give another folder"
	case errors.As(err, new(*store.VersionError)), errors.Is(err, store.ErrForeign), errors.Is(err, store.ErrDamaged):
		return "give another folder, or --fresh to set that run aside and compute anew"
	}
	return ""
}

// identity is the version that results are kept under. A build that does not
// know its revision, or was changed since, is told from others by its bytes.
var identity = sync.OnceValue(func() string {
	if v, exact := revision(); exact {
		return v
	}
	return fullVersion() + " build " + digestOfProgram()
})

func digestOfProgram() string {
	path, err := os.Executable()
	if err != nil {
		return "unknown"
	}
	f, err := os.Open(path)
	if err != nil {
		return "unknown"
	}
	defer f.Close()
	h := sha256.New()
	if _, err := io.Copy(h, f); err != nil {
		return "unknown"
	}
	return hex.EncodeToString(h.Sum(nil))[:12]
}

// interrupted says whether a run's error is the end of ctx.
func interrupted(ctx context.Context, err error) bool {
	return err != nil && ctx.Err() != nil && errors.Is(err, context.Cause(ctx))
}
