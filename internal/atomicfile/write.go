// Package atomicfile writes files whole or not at all.
package atomicfile

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
)

// Write lets fill write the file at path: beside it first, under a name that
// begins with a dot, then synced, then renamed into place. If fill or anything
// after it fails, path is as it was before and nothing is left beside it.
//
// Errors name the file; fill's own errors are wrapped. The folder must exist.
func Write(path string, fill func(io.Writer) error) (err error) {
	f, err := os.CreateTemp(filepath.Dir(path), "."+filepath.Base(path)+".*.part")
	if err != nil {
		return fmt.Errorf("write %s: %w", path, err)
	}
	defer func() {
		if err == nil {
			return
		}
		// Closing twice is harmless; a file that cannot be removed is told too.
		_ = f.Close()
		if rm := os.Remove(f.Name()); rm != nil {
			err = errors.Join(err, rm)
		}
		err = fmt.Errorf("write %s: %w", path, err)
	}()
	if err := fill(f); err != nil {
		return err
	}
	// os.CreateTemp makes files for the owner alone; results are for reading.
	if err := f.Chmod(0o644); err != nil {
		return err
	}
	if err := f.Sync(); err != nil {
		return err
	}
	if err := f.Close(); err != nil {
		return err
	}
	if err := os.Rename(f.Name(), path); err != nil {
		return err
	}
	return syncFolder(filepath.Dir(path))
}
