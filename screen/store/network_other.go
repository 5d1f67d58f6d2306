//go:build !linux && !darwin && !windows

package store

// networkFS knows nothing of this system's file systems.
func networkFS(string) (name string, yes bool) { return "", false }
