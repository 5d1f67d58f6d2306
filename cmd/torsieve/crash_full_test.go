//go:build full && unix

package main

import (
	"fmt"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"
)

// kills is how often the run is killed.
const kills = 50

// A run that is killed at random moments, fifty times, and started again each
// time ends with the files of one that was left alone, to the byte; and no unit
// of work is in the log twice but for those that were cut.
func TestKilledRunEndsTheSame(t *testing.T) {
	dir := t.TempDir()
	program := filepath.Join(dir, "torsieve")
	if out, err := exec.Command("go", "build", "-o", program, ".").CombinedOutput(); err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	list := filepath.Join(dir, "ligands.smi")
	if err := os.WriteFile(list, []byte("OCCCN a\nCC(N)CO b\nOCC(F)CO c\nCC(=O)NCCO d\nOCCCCO e\nbad line\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	start := func(out string) *exec.Cmd {
		return exec.Command(program, "screen", list, "--out", filepath.Join(dir, out), "--max-conformers", "12", "--thermal")
	}
	begun := time.Now()
	if err := start("whole").Run(); exitCode(err) != exitPartly {
		t.Fatal(err)
	}
	each := time.Since(begun) / 12 // so that a kill comes before much is done
	random := rand.New(rand.NewPCG(1, 2))
	killed, runs := 0, 0
	for ; killed < kills || runs == 0; runs++ {
		out := fmt.Sprint("cut", runs)
		for killed < kills && kill(t, start(out), time.Duration(random.Float64()*float64(each))) {
			killed++
		}
		if err := start(out).Run(); exitCode(err) != exitPartly {
			t.Fatal(err)
		}
		sameFiles(t, filepath.Join(dir, "whole"), filepath.Join(dir, out))
		nothingTwice(t, filepath.Join(dir, out, "log.jsonl"))
	}
	t.Logf("killed %d times in %d runs; one in peace takes %.1f s", killed, runs, 12*each.Seconds())
}

// kill starts the program and kills it after a while; false if it has ended by
// itself.
func kill(t *testing.T, cmd *exec.Cmd, after time.Duration) bool {
	t.Helper()
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	time.Sleep(after)
	if err := cmd.Process.Signal(syscall.SIGKILL); err != nil {
		return false
	}
	return exitCode(cmd.Wait()) == -1
}

// nothingTwice: no unit of work that was finished was computed again.
func nothingTwice(t *testing.T, log string) {
	t.Helper()
	times := map[string]int{}
	for _, line := range strings.Split(string(content(t, log)), "\n") {
		var ligand, tier string
		var conformer int
		if strings.Contains(line, `"stored":false`) {
			scan(line, "ligand", &ligand)
			scan(line, "tier", &tier)
			scan(line, "conformer", &conformer)
			times[fmt.Sprint(ligand, tier, conformer)]++
		}
	}
	for unit, n := range times {
		if n > 1 {
			t.Errorf("%s was computed %d times", unit, n)
		}
	}
}

// scan reads a field of a line of the log.
func scan(line, field string, value any) {
	_, rest, _ := strings.Cut(line, `"`+field+`":`)
	rest = strings.TrimPrefix(rest, `"`)
	end := strings.IndexAny(rest, `",}`)
	if end > 0 {
		fmt.Sscan(rest[:end], value) //nolint:errcheck // a line without the field counts as another unit
	}
}

func exitCode(err error) int {
	if exit, ok := err.(*exec.ExitError); ok { //nolint:errorlint // as os/exec returns it
		return exit.ExitCode()
	}
	if err != nil {
		return -2
	}
	return 0
}

// sameFiles compares what must not depend on interruptions.
func sameFiles(t *testing.T, want, have string) {
	t.Helper()
	names := []string{"ligands.csv", "conformers.csv"}
	entries, err := os.ReadDir(filepath.Join(want, "ensembles"))
	if err != nil || len(entries) == 0 {
		t.Fatalf("%v, %d ensembles", err, len(entries))
	}
	for _, e := range entries {
		names = append(names, filepath.Join("ensembles", e.Name()))
	}
	for _, name := range names {
		if a, b := content(t, filepath.Join(want, name)), content(t, filepath.Join(have, name)); string(a) != string(b) {
			t.Errorf("%s differs", name)
		}
	}
}

func content(t *testing.T, path string) []byte {
	t.Helper()
	text, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return text
}
