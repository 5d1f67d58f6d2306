package store

import (
	"context"
	"errors"
	"fmt"
	"io"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// The test program starts itself again as a worker that is then killed.
const (
	childVariable = "TORSIEVE_TEST_STORE_CHILD" // where the store is
	nameVariable  = "TORSIEVE_TEST_STORE_NAME"  // of the worker
)

func TestMain(m *testing.M) {
	if where := os.Getenv(childVariable); where != "" {
		child := crashWorker
		switch os.Getenv(nameVariable) {
		case readOnlyName:
			child = readOnlyChild
		case holderName:
			child = holdingChild
		}
		if err := child(where, os.Getenv(nameVariable)); err != nil {
			fmt.Fprintln(os.Stderr, err)
			os.Exit(1)
		}
		os.Exit(0)
	}
	os.Exit(m.Run())
}

// readOnlyName makes the child look at a store that it may not write to.
const readOnlyName = "read only"

// holderName makes the child hold the run until it is killed.
const holderName = "holder"

func holdingChild(where, _ string) error {
	s, err := Open(context.Background(), where, Options{})
	if err != nil {
		return err
	}
	if _, err = s.Hold(context.Background(), Holder{Program: "torsieve screen", PID: os.Getpid()}); err != nil {
		return err
	}
	fmt.Print("begun")
	time.Sleep(time.Minute) // the parent kills it long before
	return errors.New("nobody killed me")
}

func readOnlyChild(where, _ string) error {
	ctx := context.Background()
	r, err := OpenReader(ctx, where)
	if err != nil {
		return err
	}
	defer r.Close()
	err = r.View(ctx, func(v *View) error {
		ligands, err := v.Ligands()
		if len(ligands) != 2 {
			err = errors.Join(err, fmt.Errorf("%d ligands, want 2", len(ligands)))
		}
		return err
	})
	if err = errors.Join(err, r.Check(ctx)); err != nil {
		return err
	}
	s, err := Open(ctx, where, Options{})
	if err == nil {
		err = errors.Join(errors.New("it was opened for writing"), s.Close())
	}
	if !errors.Is(err, ErrReadOnly) {
		return fmt.Errorf("have %w, want %w", err, ErrReadOnly)
	}
	return nil
}

// crashWorker is a worker as a run has them: every generation plans its answers,
// the last answer its ensemble. What it computes follows from the unit alone.
func crashWorker(where, name string) error {
	ctx := context.Background()
	s, err := Open(ctx, where, Options{Machine: Machine{Host: "child"}})
	if err != nil {
		return err
	}
	fmt.Print("begun")
	work := func(u Unit) Batch {
		fmt.Print(".") // the parent counts
		return crashUnit(u)
	}
	return errors.Join(drain(ctx, s, name, work), s.Close())
}

const (
	crashAtoms  = 30
	crashShapes = 4
)

// crashPlan plans n structures for crash workers.
func crashPlan(t *testing.T, s *Store, n int) {
	t.Helper()
	var structures []Structure
	for i := range n {
		structures = append(structures, Structure{SMILES: fmt.Sprintf("N%d", i), NAtoms: crashAtoms})
	}
	ids, err := s.AddStructures(t.Context(), structures)
	must(t, err)
	var list []Ligand
	var units []Unit
	for i, id := range ids {
		list = append(list, Ligand{Order: i, ID: structures[i].SMILES, Stem: structures[i].SMILES, Structure: id})
		units = append(units, Unit{Structure: id, Key: ladder("298.15").Keys()[0], Priority: i})
	}
	must(t, s.SetRun(t.Context(), Run{Chain: ladder("298.15")}, list))
	must(t, s.Plan(t.Context(), units))
}

func crashUnit(u Unit) Batch {
	keys := ladder("298.15").Keys()
	sam := newSample(uint64(u.Structure)*1000 + uint64(u.Conformer))
	switch u.Key {
	case keys[0]:
		b := Batch{Generations: []Generation{sam.generation(u.Structure, keys[0], crashAtoms, crashShapes)}}
		for n := range crashShapes {
			b.Next = append(b.Next, Unit{Structure: u.Structure, Key: keys[1], Conformer: n + 1, Priority: u.Priority})
		}
		return b
	case keys[1]:
		return Batch{
			Answers: []Answer{sam.answer(u.Structure, keys[1], u.Conformer, crashAtoms, true)},
			Next:    []Unit{{Structure: u.Structure, Key: keys[2], Conformer: u.Conformer, Priority: u.Priority}},
		}
	case keys[2]:
		b := Batch{Answers: []Answer{sam.answer(u.Structure, keys[2], u.Conformer, crashAtoms, false)}}
		if u.Conformer == crashShapes {
			b.Next = []Unit{{Structure: u.Structure, Key: keys[3], Priority: u.Priority}}
		}
		return b
	}
	return Batch{Ensembles: []Ensemble{sam.ensemble(u.Structure, keys[3], crashShapes)}}
}

// start runs a child until it has begun so many units, and kills it a moment
// later. It may have ended before.
func start(t *testing.T, where, name string, units int, moment time.Duration) {
	t.Helper()
	program, err := os.Executable()
	must(t, err)
	cmd := exec.Command(program)
	cmd.Env = append(os.Environ(), childVariable+"="+where, nameVariable+"="+name)
	var stderr strings.Builder
	cmd.Stderr = &stderr
	out, err := cmd.StdoutPipe()
	must(t, err)
	must(t, cmd.Start())
	_, err = io.ReadFull(out, make([]byte, len("begun")+units))
	if !errors.Is(err, io.ErrUnexpectedEOF) { // fewer units were left
		must(t, err)
	}
	time.Sleep(moment)
	_ = cmd.Process.Kill() // it may be gone already
	err = cmd.Wait()
	var exit *exec.ExitError
	if stderr.Len() > 0 || err != nil && !errors.As(err, &exit) {
		t.Fatalf("the worker said %q and ended with %v", &stderr, err)
	}
}

// Workers are killed while they write, again and again; after each of them all
// laws hold, nothing that was committed is gone, and in the end all is done once.
func TestKilledWorkersLoseNothing(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		const ligands = 120
		s := p.open()
		crashPlan(t, s, ligands)
		watcher := join(t, s, "watcher")
		now := time.Now()
		seed := rand.Uint64()
		t.Logf("seed %d", seed)
		random := rand.New(rand.NewPCG(seed, 1))
		done := 0
		for i := 0; ; i++ {
			start(t, p.where, fmt.Sprint("child ", i), random.IntN(40), time.Duration(random.IntN(500))*time.Microsecond)
			for range 2 {
				_, err := watcher.TakeBack(t.Context(), now, time.Minute)
				must(t, err)
				now = now.Add(2 * time.Minute)
			}
			// A unit that was held thrice is nobody's fault here: offer it again.
			_, err := s.write.Exec("UPDATE unit SET attempts = 0")
			must(t, err)
			n, left := counted(t, &s.Reader)
			if n < done {
				t.Fatalf("%d results are left of %d", n, done)
			}
			if done = n; left == 0 {
				t.Logf("%d workers", i+1)
				break
			}
			if i == 1000 {
				t.Fatalf("%d units are left after 1000 workers", left)
			}
		}
		if want := ligands * (2 + 2*crashShapes); done != want {
			t.Errorf("%d results, want %d", done, want)
		}
		checkCrashed(t, &s.Reader)
	})
}

// Two processes on one store, undisturbed, share the work.
func TestTwoProcessesShareAStore(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		const ligands = 40
		s := p.open()
		crashPlan(t, s, ligands)
		program, err := os.Executable()
		must(t, err)
		var processes []*exec.Cmd
		for _, name := range []string{"one", "two"} {
			cmd := exec.Command(program)
			cmd.Env = append(os.Environ(), childVariable+"="+p.where, nameVariable+"="+name)
			cmd.Stderr = os.Stderr
			must(t, cmd.Start())
			processes = append(processes, cmd)
		}
		for _, cmd := range processes {
			must(t, cmd.Wait())
		}
		// Each drains until nothing is free; what the other held then it left to it.
		results, left := counted(t, &s.Reader)
		if want := ligands * (2 + 2*crashShapes); results != want || left != 0 {
			t.Errorf("%d results and %d units left, want %d and 0", results, left, want)
		}
		checkCrashed(t, &s.Reader)
	})
}

// checkCrashed compares the shapes and the geometries of all structures with what
// one undisturbed worker would have stored.
func checkCrashed(t *testing.T, r *Reader) {
	t.Helper()
	keys := ladder("298.15").Keys()
	view(t, r, func(v *View) error {
		ligands, err := v.Ligands()
		if err != nil {
			return err
		}
		for _, l := range ligands {
			wantFirst, want := map[int][]float64{}, map[int][]float64{}
			for i, shape := range crashUnit(Unit{Structure: l.Structure, Key: keys[0]}).Generations[0].Shapes {
				wantFirst[i+1] = shape.X
				want[i+1] = crashUnit(Unit{Structure: l.Structure, Key: keys[1], Conformer: i + 1}).Answers[0].X
			}
			first, err := v.Geometries(l.Structure, keys[0])
			same(t, "shapes", first, wantFirst)
			if err != nil {
				return err
			}
			last, err := v.Geometries(l.Structure, keys[2])
			same(t, "geometries", last, want)
			if err != nil {
				return err
			}
		}
		return nil
	})
}

// Who was killed holds nothing any more, and nobody has to wait for it.
func TestAKilledHolderHoldsNothing(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		program, err := os.Executable()
		must(t, err)
		cmd := exec.Command(program)
		cmd.Env = append(os.Environ(), childVariable+"="+p.where, nameVariable+"="+holderName)
		out, err := cmd.StdoutPipe()
		must(t, err)
		must(t, cmd.Start())
		_, err = out.Read(make([]byte, 5))
		must(t, err)
		_, err = s.Hold(t.Context(), Holder{})
		var held *HeldError
		if !errors.As(err, &held) || held.Holder.PID != cmd.Process.Pid {
			t.Errorf("have %v, want that process %d holds it", err, cmd.Process.Pid)
		}
		must(t, cmd.Process.Kill())
		_ = cmd.Wait() // it was killed
		for range 500 {
			hold, err := s.Hold(t.Context(), Holder{Program: "test"})
			if err == nil {
				must(t, hold.Check(t.Context()))
				must(t, hold.Release())
				return
			}
			if !errors.As(err, &held) {
				t.Fatal(err)
			}
			time.Sleep(10 * time.Millisecond) // a server sees the end of a connection a moment later
		}
		t.Error("a killed process holds the run")
	})
}

// counted counts results and units, and checks the laws.
func counted(t *testing.T, r *Reader) (results, units int) {
	t.Helper()
	view(t, r, func(v *View) error {
		progress, err := v.Progress()
		for _, p := range progress {
			results += p.Done
			units += p.Waiting + p.Running
		}
		return err
	})
	return results, units
}

// After a power cut the log may end anywhere, or hold what was never written: the
// store opens with what was committed before that.
func TestPowerCuts(t *testing.T) {
	p := place{t, filepath.Join(t.TempDir(), "run.db")}
	s := p.open()
	_, err := s.write.Exec("PRAGMA wal_autocheckpoint = 0") // all of it stays in the log
	must(t, err)
	fill(t, s, 1, 8)
	all, _ := counted(t, &s.Reader)
	seed := rand.Uint64()
	t.Logf("seed %d", seed)
	random := rand.New(rand.NewPCG(seed, 2))
	log, err := os.ReadFile(p.where + "-wal")
	must(t, err)
	for i := range 40 {
		cut := place{t, filepath.Join(t.TempDir(), "run.db")}
		copyFile(t, p.where, cut.where)
		torn := append([]byte(nil), log...)
		at := random.IntN(len(torn))
		if i%2 == 0 {
			torn = torn[:at]
		} else {
			for k := at; k < min(at+4096, len(torn)); k++ {
				torn[k] = byte(random.Uint32())
			}
		}
		must(t, os.WriteFile(cut.where+"-wal", torn, 0o600))
		again := cut.open() // makes the tables anew, where the cut came before them
		n, _ := counted(t, &again.Reader)
		if n > all {
			t.Errorf("%d results of %d", n, all)
		}
		must(t, again.Close())
	}
}
