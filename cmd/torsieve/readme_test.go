package main

import (
	"bytes"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// README.md begins with the two commands that a new user types: the main job on
// the starter file, and the tests.
func readmeCommands(t *testing.T) []string {
	t.Helper()
	text, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	var commands []string
	for i, block := range strings.Split(string(text), "```") {
		if i%2 == 1 && len(commands) < 2 {
			commands = append(commands, strings.TrimSpace(block))
		}
	}
	return commands
}

// firstCommand is what stands behind "go run ./cmd/torsieve" in README.md.
func firstCommand(t *testing.T) []string {
	t.Helper()
	args, ok := strings.CutPrefix(readmeCommands(t)[0], "go run ./cmd/torsieve ")
	if !ok {
		t.Fatalf("README.md begins with %q", readmeCommands(t)[0])
	}
	return strings.Fields(args)
}

func TestReadmeCommands(t *testing.T) {
	if second := readmeCommands(t)[1]; second != "go test ./..." {
		t.Errorf("the second command is %q", second)
	}
	var c commands
	args := firstCommand(t)
	t.Chdir("../..")
	if _, err := newParser(&c, io.Discard, io.Discard).Parse(args); err != nil {
		t.Fatal(err)
	}
	if c.Screen.Through != tierHF || c.Screen.Out == "" {
		t.Errorf("the first command stops at %s and writes to %q", c.Screen.Through, c.Screen.Out)
	}
	var stdout, stderr bytes.Buffer
	for _, file := range c.Screen.Ligands {
		if code := run(t.Context(), []string{"inspect", file}, strings.NewReader(""), &stdout, &stderr); code != exitDone {
			t.Errorf("%s: exit status %d: %s", file, code, stderr.String())
		}
	}
	if n := strings.Count(stdout.String(), "\n"); n != 3 {
		t.Errorf("the starter file has %d ligands, want 3", n)
	}
}

// Options named in README.md exist.
func TestReadmeOptions(t *testing.T) {
	text, err := os.ReadFile(filepath.FromSlash("../../README.md"))
	if err != nil {
		t.Fatal(err)
	}
	var c commands
	known := optionNames(newParser(&c, io.Discard, io.Discard).Model.Node)
	for _, word := range strings.FieldsFunc(string(text), func(r rune) bool { return strings.ContainsRune(" `\n|(),;:…", r) }) {
		name, isOption := strings.CutPrefix(word, "--")
		if !isOption || strings.Trim(name, "-") == "" || name == "help" {
			continue
		}
		found := false
		for _, k := range known {
			found = found || k == name
		}
		if !found {
			t.Errorf("README.md names the option --%s, which there is not", name)
		}
	}
}
