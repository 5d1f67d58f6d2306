// Package report writes what leaves a run: the ensembles as SD files, the
// tables, and the file that says how to repeat it. It does not know how the
// numbers were made.
package report

import (
	"bytes"
	"cmp"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"torsieve/internal/atomicfile"
	"torsieve/screen"
	"torsieve/screen/report/page"
)

// Names of the files of a run folder.
const (
	LigandTable    = "ligands.csv"
	ConformerTable = "conformers.csv"
	Page           = "report.html"
	RunFile        = "run.json"
	StoreFile      = "run.db"
	LogFile        = "log.jsonl"
	ensembleFolder = "ensembles"
)

// A Folder is the run folder while a run fills it. Ensembles are on disk as soon
// as Keep returns; the tables follow with Close.
type Folder struct {
	path    string
	rows    []ligandRows
	times   []LigandTime
	book    page.Book
	written map[string]bool // names in the ensemble folder
}

// ligandRows is what of a ligand goes into the tables.
type ligandRows struct {
	order      int
	ligand     []string
	conformers []byte // as they stand in the table: there are many
}

// ErrNotEmpty comes for a folder that is no run's.
var ErrNotEmpty = errors.New("the folder is not empty and holds no run of this program")

// Holds says whether there is a run in the folder. One that holds other things
// is refused (ErrNotEmpty).
func Holds(path string) (run bool, err error) {
	entries, err := os.ReadDir(path)
	if errors.Is(err, os.ErrNotExist) {
		return false, nil
	}
	if err != nil {
		return false, err
	}
	run = slices.ContainsFunc(entries, func(e os.DirEntry) bool { return e.Name() == RunFile || e.Name() == StoreFile })
	foreign := slices.ContainsFunc(entries, func(e os.DirEntry) bool { return !strings.HasPrefix(e.Name(), asidePrefix) })
	if foreign && !run {
		return false, fmt.Errorf("%s: %w", path, ErrNotEmpty)
	}
	return run, nil
}

// asidePrefix begins the names of folders for runs that were set aside.
const asidePrefix = "earlier-"

// SetAside moves the run in the folder into a new folder below it, earlier-1 or
// the next free number, and returns its path. Other files stay.
func SetAside(path string) (string, error) {
	for n := 1; ; n++ {
		aside := filepath.Join(path, fmt.Sprintf("%s%d", asidePrefix, n))
		err := os.Mkdir(aside, 0o755)
		if errors.Is(err, os.ErrExist) {
			continue
		}
		if err != nil {
			return "", err
		}
		// run.json last: a folder with it is a run's
		for _, name := range []string{StoreFile, StoreFile + "-wal", StoreFile + "-shm", StoreFile + ".lock", LogFile, LigandTable, ConformerTable, Page, ensembleFolder, RunFile} {
			err := os.Rename(filepath.Join(path, name), filepath.Join(aside, name))
			if err != nil && !errors.Is(err, os.ErrNotExist) {
				return "", err
			}
		}
		return aside, nil
	}
}

// Create makes the run folder, or takes the one that holds a run, and writes
// run's file into it, so that the folder is known for a run's whatever happens
// next. The other outputs of an earlier run stay until they are written anew.
func Create(path string, run *Run) (*Folder, error) {
	if _, err := Holds(path); err != nil {
		return nil, err
	}
	if err := os.MkdirAll(filepath.Join(path, ensembleFolder), 0o755); err != nil {
		return nil, err
	}
	f := &Folder{path: path, written: map[string]bool{}}
	return f, f.write(RunFile, run.write)
}

// Keep writes the ensemble of a ligand and remembers its rows.
func (f *Folder) Keep(r *screen.Result) error {
	if len(r.Kept) > 0 {
		path := filepath.Join(f.path, filepath.FromSlash(EnsembleFile(r.Ligand)))
		err := atomicfile.Write(path, func(w io.Writer) error { return writeEnsemble(w, r) })
		if err != nil {
			return err
		}
		f.written[filepath.Base(path)] = true
	}
	var text bytes.Buffer
	if err := writeRows(&text, conformerRows(r)); err != nil {
		return err
	}
	f.rows = append(f.rows, ligandRows{order: r.Ligand.Order, ligand: ligandRow(r), conformers: text.Bytes()})
	f.times = append(f.times, timesOf(r))
	f.book.Add(r)
	return nil
}

// Close writes the tables, the page and the run file, ligands in the order of the
// run. Of a run that came to its end (whole) it removes ensembles of earlier ones
// that are in it no more.
func (f *Folder) Close(run *Run, whole bool) error {
	if whole {
		if err := f.removeStale(); err != nil {
			return err
		}
	}
	slices.SortFunc(f.rows, func(a, b ligandRows) int { return cmp.Compare(a.order, b.order) })
	slices.SortFunc(f.times, func(a, b LigandTime) int { return cmp.Compare(a.order, b.order) })
	run.Ligands = f.times
	return errors.Join(
		f.write(LigandTable, f.ligands),
		f.write(ConformerTable, f.conformers),
		f.write(RunFile, run.write), // sums up the times that the page shows
		f.write(Page, func(w io.Writer) error { return f.book.Write(w, run.forPage()) }),
	)
}

func (f *Folder) removeStale() error {
	folder := filepath.Join(f.path, ensembleFolder)
	entries, err := os.ReadDir(folder)
	if err != nil {
		return err
	}
	for _, e := range entries {
		if !f.written[e.Name()] && strings.HasSuffix(e.Name(), ".sdf") {
			if err := os.Remove(filepath.Join(folder, e.Name())); err != nil {
				return err
			}
		}
	}
	return nil
}

func (f *Folder) ligands(w io.Writer) error {
	rows := [][]string{ligandColumns}
	for _, r := range f.rows {
		rows = append(rows, r.ligand)
	}
	return writeRows(w, rows)
}

func (f *Folder) conformers(w io.Writer) error {
	if err := writeRows(w, [][]string{conformerColumns}); err != nil {
		return err
	}
	for _, r := range f.rows {
		if _, err := w.Write(r.conformers); err != nil {
			return err
		}
	}
	return nil
}

func (f *Folder) write(name string, fill func(io.Writer) error) error {
	return atomicfile.Write(filepath.Join(f.path, name), fill)
}
