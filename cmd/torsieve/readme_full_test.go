//go:build full

package main

import (
	"bytes"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// README's first command does what it says: three ligands through all tiers.
func TestReadmeFirstCommandRuns(t *testing.T) {
	args := firstCommand(t)
	out := filepath.Join(t.TempDir(), "run")
	args[slices.Index(args, "--out")+1] = out
	t.Chdir("../..")
	var stdout, stderr bytes.Buffer
	if code := run(t.Context(), args, strings.NewReader(""), &stdout, &stderr); code != exitDone {
		t.Fatalf("exit status %d:\n%s", code, stderr.String())
	}
	if !strings.Contains(stderr.String(), "3 of 3 ligands done") || stdout.Len() > 0 {
		t.Errorf("stdout %q, stderr:\n%s", stdout.String(), stderr.String())
	}
}
