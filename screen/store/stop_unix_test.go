//go:build unix

package store

import (
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"syscall"
	"testing"
	"time"
)

// The files as they stand at any moment are a store: what a snapshot of the disk
// holds. The writer is frozen while they are copied, so that all copies are of
// one moment.
func TestCopiesOfAnyMomentOpen(t *testing.T) {
	p := place{t, filepath.Join(t.TempDir(), "run.db")}
	crashPlan(t, p.open(), 400)
	program, err := os.Executable()
	must(t, err)
	cmd := exec.Command(program)
	cmd.Env = append(os.Environ(), childVariable+"="+p.where, nameVariable+"=child")
	out, err := cmd.StdoutPipe()
	must(t, err)
	must(t, cmd.Start())
	defer func() {
		_ = cmd.Process.Kill()
		_ = cmd.Wait()
	}()
	_, err = out.Read(make([]byte, 5))
	must(t, err)
	last := 0
	for i := range 12 {
		time.Sleep(7 * time.Millisecond)
		must(t, cmd.Process.Signal(syscall.SIGSTOP))
		frozen(t, cmd.Process.Pid)
		moment := place{t, filepath.Join(t.TempDir(), "run.db")}
		for _, suffix := range []string{"", "-wal"} {
			if _, err := os.Stat(p.where + suffix); err == nil {
				copyFile(t, p.where+suffix, moment.where+suffix)
			}
		}
		must(t, cmd.Process.Signal(syscall.SIGCONT))
		n, _ := counted(t, moment.reader())
		if n < last {
			t.Errorf("copy %d holds %d results, the one before it %d", i, n, last)
		}
		last = n
	}
	t.Logf("%d results in the last copy", last)
}

// frozen waits until every thread of a process has stopped, where the system
// tells that.
func frozen(t *testing.T, pid int) {
	t.Helper()
	for range 1000 {
		states, err := filepath.Glob(fmt.Sprintf("/proc/%d/task/*/stat", pid))
		must(t, err)
		running := 0
		for _, path := range states {
			b, err := os.ReadFile(path)
			if err != nil {
				continue // the thread has ended
			}
			var state byte
			for k := len(b) - 1; k >= 0; k-- {
				if b[k] == ')' {
					state = b[k+2]
					break
				}
			}
			if state != 'T' && state != 'Z' { // or it has ended
				running++
			}
		}
		if running == 0 {
			return
		}
		time.Sleep(time.Millisecond)
	}
	t.Fatal("the process does not stop")
}

// A folder that takes no writing: readers read, writers are told. No permission
// stops root, so another user looks.
func TestReadOnlyFolder(t *testing.T) {
	dir := t.TempDir()
	p := place{t, filepath.Join(dir, "run.db")}
	s := p.open()
	fill(t, s, 1, 2)
	must(t, s.Close())
	program, err := os.Executable()
	must(t, err)
	here := filepath.Join(dir, "program")
	copyFile(t, program, here)
	must(t, os.Chmod(here, 0o755))
	must(t, os.Chmod(filepath.Dir(dir), 0o755))
	must(t, os.Chmod(p.where, 0o444))
	must(t, os.Chmod(dir, 0o555))
	defer os.Chmod(dir, 0o755)
	cmd := exec.Command(here)
	cmd.Env = append(os.Environ(), childVariable+"="+p.where, nameVariable+"="+readOnlyName)
	if os.Geteuid() == 0 {
		cmd.SysProcAttr = &syscall.SysProcAttr{Credential: &syscall.Credential{Uid: 65534, Gid: 65534}}
	}
	if said, err := cmd.CombinedOutput(); err != nil {
		t.Errorf("%v: %s", err, said)
	}
}
