//go:build unix

package atomicfile

import "os"

// syncFolder makes a rename last through a power cut.
func syncFolder(path string) error {
	d, err := os.Open(path)
	if err != nil {
		return nil //nolint:nilerr // a folder that may be written but not read: the file itself is safe
	}
	defer d.Close()
	// Some file systems cannot sync a folder; the file's own bytes are on disk
	// already, so this is no reason to call the write failed.
	_ = d.Sync()
	return nil
}
