package store

import (
	"path/filepath"

	"golang.org/x/sys/windows"
)

// networkFS says whether a folder stands on a drive of another machine.
func networkFS(folder string) (name string, yes bool) {
	root, err := windows.UTF16PtrFromString(filepath.VolumeName(folder) + `\`)
	if err != nil {
		return "", false // opening the file will tell what is wrong
	}
	return "a shared drive", windows.GetDriveType(root) == windows.DRIVE_REMOTE
}
