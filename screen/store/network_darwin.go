package store

import (
	"slices"

	"golang.org/x/sys/unix"
)

// networkFS says whether a folder stands on a network file system, and on which.
func networkFS(folder string) (name string, yes bool) {
	var fs unix.Statfs_t
	if unix.Statfs(folder, &fs) != nil {
		return "", false // opening the file will tell what is wrong
	}
	name = unix.ByteSliceToString(fs.Fstypename[:])
	return name, slices.Contains([]string{"nfs", "smbfs", "afpfs", "webdav", "macfuse", "osxfuse"}, name)
}
