package store

import (
	"errors"
	"fmt"
)

// What can be wrong with a store. Errors of this package wrap one of these, a
// [*VersionError] or a [*HeldError] where the caller can tell a person what to do;
// they name the store, a URL without its password.
var (
	// ErrMissing: a reader was asked for a store that is not there.
	ErrMissing = errors.New("there is no run's database here")
	// ErrForeign: the file or the schema holds something else. It was not touched.
	ErrForeign = errors.New("this is not a database of torsieve")
	// ErrReadOnly: the disk, the folder or the database takes no writing.
	ErrReadOnly = errors.New("it cannot be written to: check the permissions of the file and its folder")
	// ErrFull: no room is left. What was committed before is safe.
	ErrFull = errors.New("no space is left on the disk: make room and start again, what was finished is kept")
	// ErrBusy: others kept the database locked for longer than a writer waits.
	ErrBusy = errors.New("another process keeps it locked")
	// ErrDamaged: the file is not what was written.
	ErrDamaged = errors.New("the file is damaged: restore a copy, or compute anew in another folder")
	// ErrUnreachable: the server does not answer, or not to us.
	ErrUnreachable = errors.New("the database server cannot be reached")
	// ErrUnknown: a result or a unit names settings or a structure that the store
	// has not been told of.
	ErrUnknown = errors.New("not in the store")
	// ErrOtherSettings: runs that are to be merged were computed with different
	// settings.
	ErrOtherSettings = errors.New("the runs have different settings")
)

// A VersionError is a store whose tables are of another version of the program.
type VersionError struct {
	Where      string
	Have, Want int    // versions of the tables
	Program    string // the version of the program that wrote it last
}

func (e *VersionError) Error() string {
	if e.Have > e.Want {
		return fmt.Sprintf("%s: its tables have version %d, made by torsieve %s; this program knows versions up to %d: use that program or a newer one",
			e.Where, e.Have, e.Program, e.Want)
	}
	return fmt.Sprintf("%s: its tables have version %d, this program reads version %d: torsieve screen on the same folder brings them up to date",
		e.Where, e.Have, e.Want)
}

// A HeldError says who has a run that only one process may drive.
type HeldError struct {
	Where  string
	Holder Holder
}

func (e *HeldError) Error() string {
	h := e.Holder
	if h.Host == "" {
		return fmt.Sprintf("%s: another process has just begun to work on this run", e.Where)
	}
	return fmt.Sprintf("%s: %s works on this run, process %d on %s, since %s", e.Where, h.Program, h.PID, h.Host, h.Begun)
}
