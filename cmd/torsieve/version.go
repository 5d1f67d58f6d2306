package main

import (
	"fmt"
	"runtime"
	"runtime/debug"
)

// version is set by the linker in releases.
var version = "0.1.0-dev"

// versionCommand prints which build this is.
type versionCommand struct{}

// Run prints one line.
func (versionCommand) Run(s *session) error {
	_, err := fmt.Fprintf(s.stdout, "torsieve %s (%s, %s/%s)\n", fullVersion(), runtime.Version(), runtime.GOOS, runtime.GOARCH)
	return err
}

// fullVersion is the version with the revision that it was built from, where
// the build knows it.
func fullVersion() string {
	v, _ := revision()
	return v
}

// revision is fullVersion, and whether it names the source exactly.
func revision() (text string, exact bool) {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return version, false
	}
	revision, changed := "", ""
	for _, s := range info.Settings {
		switch s.Key {
		case "vcs.revision":
			revision = s.Value
		case "vcs.modified":
			if s.Value == "true" {
				changed = ", changed"
			}
		}
	}
	if revision == "" {
		return version, false
	}
	return fmt.Sprintf("%s revision %.12s%s", version, revision, changed), changed == ""
}
