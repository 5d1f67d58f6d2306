package atomicfile

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"sync"
	"testing"
)

func TestWriteReplacesTheFile(t *testing.T) {
	path := filepath.Join(t.TempDir(), "out.csv")
	for _, want := range []string{"first\n", "second, longer\n", ""} {
		err := Write(path, func(w io.Writer) error {
			_, err := io.WriteString(w, want)
			return err
		})
		if err != nil {
			t.Fatal(err)
		}
		got, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		if string(got) != want {
			t.Errorf("have %q, want %q", got, want)
		}
	}
	onlyFile(t, path)
}

func TestWriteThatFailsChangesNothing(t *testing.T) {
	path := filepath.Join(t.TempDir(), "out.csv")
	if err := os.WriteFile(path, []byte("before"), 0o644); err != nil {
		t.Fatal(err)
	}
	full := errors.New("disk full")
	err := Write(path, func(w io.Writer) error {
		if _, err := io.WriteString(w, "half of it"); err != nil {
			return err
		}
		return full
	})
	if !errors.Is(err, full) {
		t.Errorf("have error %v, want one that wraps %v", err, full)
	}
	got, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if string(got) != "before" {
		t.Errorf("the file holds %q now", got)
	}
	onlyFile(t, path)
}

func TestWriteWithoutFolder(t *testing.T) {
	path := filepath.Join(t.TempDir(), "missing", "out.csv")
	err := Write(path, func(io.Writer) error { return nil })
	if !errors.Is(err, os.ErrNotExist) {
		t.Errorf("have error %v, want one that wraps os.ErrNotExist", err)
	}
}

// Several writers of one name: the last rename wins, and the file is always one
// of the whole texts.
func TestWriteConcurrently(t *testing.T) {
	path := filepath.Join(t.TempDir(), "out.csv")
	whole := map[string]bool{}
	var wg sync.WaitGroup
	for i := range 8 {
		text := fmt.Sprintf("text %d\n", i)
		whole[text] = true
		wg.Go(func() {
			err := Write(path, func(w io.Writer) error {
				_, err := io.WriteString(w, text)
				return err
			})
			if err != nil {
				t.Error(err)
			}
		})
	}
	wg.Wait()
	got, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if !whole[string(got)] {
		t.Errorf("the file holds %q, which nobody wrote", got)
	}
	onlyFile(t, path)
}

func onlyFile(t *testing.T, path string) {
	t.Helper()
	entries, err := os.ReadDir(filepath.Dir(path))
	if err != nil {
		t.Fatal(err)
	}
	if len(entries) != 1 || entries[0].Name() != filepath.Base(path) {
		t.Errorf("the folder holds %v, want %s alone", entries, filepath.Base(path))
	}
}
