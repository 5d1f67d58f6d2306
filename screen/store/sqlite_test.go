package store

import (
	"context"
	"database/sql"
	"errors"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// foreign makes a SQLite file that is not ours.
func foreign(t *testing.T, path string) {
	t.Helper()
	db, err := sql.Open("sqlite", sqliteName(path, "rwc"))
	must(t, err)
	_, err = db.Exec("CREATE TABLE notes (text TEXT)")
	must(t, errors.Join(err, db.Close()))
}

func TestOpenRefusesWhatIsNotOurs(t *testing.T) {
	tests := map[string]struct {
		make func(t *testing.T, path string)
		want error
	}{
		"another program's database": {foreign, ErrForeign},
		"a text": {func(t *testing.T, path string) {
			must(t, os.WriteFile(path, []byte("ligand,smiles\nethanol,CCO\n"), 0o600))
		}, ErrForeign},
		"a long text": {func(t *testing.T, path string) {
			must(t, os.WriteFile(path, []byte(strings.Repeat("ligand,smiles\n", 1000)), 0o600))
		}, ErrForeign},
		"a folder":      {func(t *testing.T, path string) { must(t, os.Mkdir(path, 0o700)) }, ErrForeign},
		"no folder":     {func(t *testing.T, path string) { must(t, os.RemoveAll(filepath.Dir(path))) }, os.ErrNotExist},
		"a cut-off one": {cutOff, ErrDamaged},
	}
	for name, test := range tests {
		t.Run(name, func(t *testing.T) {
			path := filepath.Join(t.TempDir(), "run #1 100%?.db")
			test.make(t, path)
			before, _ := os.ReadFile(path)
			_, err := Open(t.Context(), path, Options{})
			if !errors.Is(err, test.want) || !strings.Contains(err.Error(), path) {
				t.Errorf("Open: have %v, want %v and the path", err, test.want)
			}
			want := test.want
			if errors.Is(want, os.ErrNotExist) {
				want = ErrMissing
			}
			if _, err := OpenReader(t.Context(), path); !errors.Is(err, want) {
				t.Errorf("OpenReader: have %v, want %v", err, want)
			}
			if after, _ := os.ReadFile(path); string(after) != string(before) {
				t.Error("the file was changed")
			}
		})
	}
}

// cutOff leaves the first half of a store.
func cutOff(t *testing.T, path string) {
	s := place{t, path}.open()
	fill(t, s, 1, 3)
	must(t, s.Close())
	info, err := os.Stat(path)
	must(t, err)
	must(t, os.Truncate(path, info.Size()/2))
}

func TestReadersMakeNothing(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		if _, err := OpenReader(t.Context(), p.where); !errors.Is(err, ErrMissing) {
			t.Errorf("have %v, want %v", err, ErrMissing)
		}
		if _, err := os.Stat(p.where); err == nil {
			t.Error("a file was made")
		}
	})
}

func TestVersionsOfTables(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		ctx := t.Context()
		s := p.open()
		f := fill(t, s, 1, 1)
		must(t, s.Close())
		next := append(migrations(), "CREATE TABLE more (id {id}, x {real}); CREATE INDEX more_x ON more (x)")
		for range 2 { // the second time there is nothing to do
			s, err := Open(ctx, p.where, Options{migrations: next, Machine: Machine{Version: "9.9"}})
			must(t, err)
			must(t, s.Close())
		}
		for what, open := range map[string]func() error{
			"Open":       func() error { _, err := Open(ctx, p.where, Options{}); return err },
			"OpenReader": func() error { _, err := OpenReader(ctx, p.where); return err },
		} {
			var version *VersionError
			if err := open(); !errors.As(err, &version) {
				t.Errorf("%s: have %v, want a VersionError", what, err)
				continue
			}
			want := VersionError{Where: version.Where, Have: 2, Want: 1, Program: "9.9"}
			same(t, what, *version, want)
			if text := version.Error(); !strings.Contains(text, "9.9") {
				t.Errorf("%s does not name the program: %s", what, text)
			}
		}
		s, err := Open(ctx, p.where, Options{migrations: next})
		must(t, err)
		checkFilled(t, &s.Reader, f)
		must(t, s.Close())
	})
}

// A step that fails leaves the version before it whole.
func TestAMigrationIsAllOrNothing(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		f := fill(t, s, 1, 1)
		must(t, s.Close())
		broken := append(migrations(), "CREATE TABLE more (id {id}); INSERT INTO nowhere VALUES (1)")
		if _, err := Open(t.Context(), p.where, Options{migrations: broken}); err == nil {
			t.Fatal("a broken step was taken")
		}
		checkFilled(t, p.reader(), f)
	})
}

func TestSQLiteSettings(t *testing.T) {
	tests := map[string]struct {
		network              func(string) (string, bool)
		journal, synchronous string
		warnings             int
	}{
		"local disk":   {func(string) (string, bool) { return "", false }, "wal", "1", 0},
		"network disk": {func(string) (string, bool) { return "NFS", true }, "delete", "2", 1},
	}
	for name, test := range tests {
		t.Run(name, func(t *testing.T) {
			path := filepath.Join(t.TempDir(), "run.db")
			s, err := Open(t.Context(), path, Options{network: test.network, Machine: Machine{Host: "here", Processor: "any", Kernel: "portable", Version: "0.1"}})
			must(t, err)
			defer s.Close()
			for pragma, want := range map[string]string{
				"journal_mode": test.journal, "synchronous": test.synchronous, "foreign_keys": "1", "busy_timeout": "10000",
			} {
				var got string
				must(t, s.write.QueryRow("PRAGMA "+pragma).Scan(&got))
				if got != want {
					t.Errorf("%s is %s, want %s", pragma, got, want)
				}
			}
			if len(s.Warnings()) != test.warnings {
				t.Errorf("warnings: %q", s.Warnings())
			}
			checkFilled(t, &s.Reader, fill(t, s, 1, 2))
		})
	}
}

// A store that moves from a local disk to a network changes its journal.
func TestJournalFollowsTheDisk(t *testing.T) {
	path := filepath.Join(t.TempDir(), "run.db")
	var f filled
	for i, network := range []bool{false, true, false} {
		s, err := Open(t.Context(), path, Options{network: func(string) (string, bool) { return "NFS", network }, Machine: Machine{Host: "here", Processor: "any", Kernel: "portable", Version: "0.1"}})
		must(t, err)
		if i == 0 {
			f = fill(t, s, 1, 2)
		}
		checkFilled(t, &s.Reader, f)
		must(t, s.Close())
	}
}

func TestAFullDiskIsSaidAndHarmless(t *testing.T) {
	p := place{t, filepath.Join(t.TempDir(), "run.db")}
	s := p.open()
	f := fill(t, s, 1, 1)
	var pages int
	must(t, s.write.QueryRow("PRAGMA page_count").Scan(&pages))
	_, err := s.write.Exec("PRAGMA max_page_count = " + itoa(pages+2))
	must(t, err)
	key := f.run.Chain.Keys()[0]
	sam := newSample(99)
	ids, err := s.AddStructures(t.Context(), []Structure{sam.structure(sampleAtoms)})
	must(t, err)
	big := Batch{Generations: []Generation{sam.generation(ids[0], key, sampleAtoms, 500)}}
	if _, err = s.Commit(t.Context(), big); !errors.Is(err, ErrFull) {
		t.Fatalf("have %v, want %v", err, ErrFull)
	}
	checkFilled(t, &s.Reader, f)
	_, err = s.write.Exec("PRAGMA max_page_count = 1000000")
	must(t, err)
	fresh, err := s.Commit(t.Context(), big)
	must(t, err)
	if fresh != 1 {
		t.Errorf("%d results were new, want 1", fresh)
	}
}

func TestAnotherWriterThatHangsIsSaid(t *testing.T) {
	path := filepath.Join(t.TempDir(), "run.db")
	s := place{t, path}.open()
	other, err := sql.Open("sqlite", sqliteName(path, "rw", "_txlock=immediate"))
	must(t, err)
	defer other.Close()
	_, err = s.write.Exec("PRAGMA busy_timeout = 50") // or the test would wait as long as a run does
	must(t, err)
	tx, err := other.Begin()
	must(t, err)
	defer tx.Rollback()
	if err := s.SetRun(t.Context(), Run{}, nil); !errors.Is(err, ErrBusy) || !strings.Contains(err.Error(), path) {
		t.Errorf("have %v, want %v", err, ErrBusy)
	}
}

func TestACancelledWriterLeavesNothing(t *testing.T) {
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		f := fill(t, s, 1, 1)
		ctx, cancel := context.WithCancel(t.Context())
		cancel()
		if err := s.SetRun(ctx, Run{}, nil); !errors.Is(err, context.Canceled) {
			t.Errorf("have %v, want %v", err, context.Canceled)
		}
		checkFilled(t, &s.Reader, f)
	})
}

// Closed, the file is all there is; copied while a run goes on, Backup is the way.
func TestCopies(t *testing.T) {
	dir := t.TempDir()
	p := place{t, filepath.Join(dir, "run.db")}
	s := p.open()
	f := fill(t, s, 1, 3)
	backup := place{t, filepath.Join(dir, "copy.db")}
	must(t, s.Backup(t.Context(), backup.where))
	if err := s.Backup(t.Context(), backup.where); err == nil {
		t.Error("a copy was written over")
	}
	must(t, s.Close())
	entries, err := os.ReadDir(dir)
	must(t, err)
	var names []string
	for _, e := range entries {
		names = append(names, e.Name())
	}
	same(t, "files", names, []string{"copy.db", "run.db"})
	alone := place{t, filepath.Join(t.TempDir(), "run.db")}
	copyFile(t, p.where, alone.where)
	for _, p := range []place{backup, alone} {
		checkFilled(t, p.reader(), f)
		checkFilled(t, &p.open().Reader, f)
	}
}

// A reader leaves the folder as it was, and does not keep a writer from closing.
func TestReadersLeaveNothingBehind(t *testing.T) {
	dir := t.TempDir()
	p := place{t, filepath.Join(dir, "run.db")}
	s := p.open()
	f := fill(t, s, 1, 1)
	r := p.reader()
	view(t, r, func(v *View) error {
		must(t, s.SaveRecord(context.Background(), "later"))
		must(t, s.Close())
		run, _, err := v.Run()
		same(t, "run", run, f.run)
		return err
	})
	must(t, r.Close())
	again := p.reader()
	f.run.Record = "later"
	checkFilled(t, again, f)
	must(t, again.Close())
	entries, err := os.ReadDir(dir)
	must(t, err)
	for _, e := range entries {
		t.Log(e.Name())
	}
	if len(entries) != 1 {
		t.Errorf("have %v, want run.db alone", entries)
	}
}

func copyFile(t *testing.T, from, to string) {
	t.Helper()
	in, err := os.Open(from)
	must(t, err)
	defer in.Close()
	out, err := os.Create(to)
	must(t, err)
	_, err = io.Copy(out, in)
	must(t, errors.Join(err, out.Close()))
}
