//go:build !unix

package atomicfile

// syncFolder has nothing to do where folders cannot be opened as files.
func syncFolder(string) error { return nil }
