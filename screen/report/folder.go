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

	"torsieve/internal/atomicfile"
	"torsieve/screen"
)

// Names of the files of a run folder.
const (
	LigandTable    = "ligands.csv"
	ConformerTable = "conformers.csv"
	RunFile        = "run.json"
	ensembleFolder = "ensembles"
)

// A Folder is the run folder while a run fills it. Ensembles are on disk as soon
// as Keep returns; the tables follow with Close.
type Folder struct {
	path  string
	rows  []ligandRows
	times []LigandTime
}

// ligandRows is what of a ligand goes into the tables.
type ligandRows struct {
	order      int
	ligand     []string
	conformers []byte // as they stand in the table: there are many
}

// Why a folder is not taken.
var (
	ErrNotEmpty = errors.New("the folder is not empty and holds no run of this program")
	ErrHasRun   = errors.New("the folder holds a run already")
)

// Create makes the run folder and writes run's file into it, so that the folder
// is known for a run's whatever happens next. A folder with other files in it is
// refused (ErrNotEmpty), and so is one with a run in it (ErrHasRun), unless
// fresh is true: then the results of that run are removed.
func Create(path string, fresh bool, run *Run) (*Folder, error) {
	if err := os.MkdirAll(path, 0o755); err != nil {
		return nil, err
	}
	entries, err := os.ReadDir(path)
	if err != nil {
		return nil, err
	}
	isRun := slices.ContainsFunc(entries, func(e os.DirEntry) bool { return e.Name() == RunFile })
	switch {
	case isRun && !fresh:
		return nil, fmt.Errorf("%s: %w", path, ErrHasRun)
	case len(entries) > 0 && !isRun:
		return nil, fmt.Errorf("%s: %w", path, ErrNotEmpty)
	}
	for _, name := range []string{LigandTable, ConformerTable, ensembleFolder} {
		if err := os.RemoveAll(filepath.Join(path, name)); err != nil {
			return nil, err
		}
	}
	f := &Folder{path: path}
	return f, errors.Join(
		f.write(RunFile, run.write),
		os.Mkdir(filepath.Join(path, ensembleFolder), 0o755),
	)
}

// Keep writes the ensemble of a ligand and remembers its rows.
func (f *Folder) Keep(r *screen.Result) error {
	if len(r.Kept) > 0 {
		path := filepath.Join(f.path, filepath.FromSlash(EnsembleFile(r.Ligand)))
		err := atomicfile.Write(path, func(w io.Writer) error { return writeEnsemble(w, r) })
		if err != nil {
			return err
		}
	}
	var text bytes.Buffer
	if err := writeRows(&text, conformerRows(r)); err != nil {
		return err
	}
	f.rows = append(f.rows, ligandRows{order: r.Ligand.Order, ligand: ligandRow(r), conformers: text.Bytes()})
	f.times = append(f.times, timesOf(r))
	return nil
}

// Close writes the tables and the run file, ligands in the order of the run.
func (f *Folder) Close(run *Run) error {
	slices.SortFunc(f.rows, func(a, b ligandRows) int { return cmp.Compare(a.order, b.order) })
	slices.SortFunc(f.times, func(a, b LigandTime) int { return cmp.Compare(a.order, b.order) })
	run.Ligands = f.times
	return errors.Join(f.write(LigandTable, f.ligands), f.write(ConformerTable, f.conformers), f.write(RunFile, run.write))
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
