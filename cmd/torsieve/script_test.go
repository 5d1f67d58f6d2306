package main

import (
	"os"
	"testing"
	"time"

	"github.com/rogpeppe/go-internal/testscript"
)

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"torsieve": main})
}

// TestScripts runs the program from outside: testdata/script/*.txtar.
func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{
		Dir:                 "testdata/script",
		RequireExplicitExec: true,
		Cmds:                map[string]func(*testscript.TestScript, bool, []string){"waitfor": waitFor},
	})
}

// waitFor waits until a file exists.
func waitFor(ts *testscript.TestScript, _ bool, args []string) {
	path := ts.MkAbs(args[0])
	for range 600 {
		if _, err := os.Stat(path); err == nil {
			return
		}
		time.Sleep(100 * time.Millisecond)
	}
	ts.Fatalf("%s did not come in a minute", args[0])
}
