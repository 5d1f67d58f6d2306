package main

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"torsieve/screen/report"
)

// A folder whose run another process drives is refused, and nothing in it is
// written to.
func TestHeldFolderIsLeftAlone(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "run")
	s := &session{ctx: t.Context(), voice: newVoice(new(bytes.Buffer))}
	first, err := s.takeFolder(dir, "", false, &report.Run{Program: "the first"})
	if err != nil {
		t.Fatal(err)
	}
	for _, fresh := range []bool{false, true} {
		_, err := s.takeFolder(dir, "", fresh, &report.Run{Program: "the second"})
		if err == nil || !strings.Contains(err.Error(), "works on this run") {
			t.Errorf("fresh %t: %v, want a refusal", fresh, err)
		}
		text, err := os.ReadFile(filepath.Join(dir, report.RunFile))
		if err != nil || !strings.Contains(string(text), "the first") {
			t.Errorf("fresh %t: run.json: %v\n%s", fresh, err, text)
		}
	}
	if err := first.close(); err != nil {
		t.Fatal(err)
	}
	again, err := s.takeFolder(dir, "", false, &report.Run{Program: "the second"})
	if err != nil {
		t.Fatal(err)
	}
	if err := again.close(); err != nil {
		t.Fatal(err)
	}
}
