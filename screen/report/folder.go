// Package report writes what leaves a run: the ensembles as SD files, the
// tables, and the file that says how to repeat it. It does not know how the
// numbers were made.
package report

import (
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
	Times []LigandTime
}

// ligandRows is what of a ligand goes into the tables.
type ligandRows struct {
	order      int
	ligand     []string
	conformers [][]string
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
	f.rows = append(f.rows, ligandRows{order: r.Ligand.Order, ligand: ligandRow(r), conformers: conformerRows(r)})
	f.Times = append(f.Times, timesOf(r))
	return nil
}

// Close writes the tables and the run file, ligands in the order of the run.
func (f *Folder) Close(run *Run) error {
	slices.SortFunc(f.rows, func(a, b ligandRows) int { return cmp.Compare(a.order, b.order) })
	slices.SortFunc(f.Times, func(a, b LigandTime) int { return cmp.Compare(a.order, b.order) })
	var ligands, conformers [][]string
	for _, r := range f.rows {
		ligands = append(ligands, r.ligand)
		conformers = append(conformers, r.conformers...)
	}
	run.Ligands = f.Times
	return errors.Join(
		f.write(LigandTable, func(w io.Writer) error { return writeTable(w, ligandColumns, ligands) }),
		f.write(ConformerTable, func(w io.Writer) error { return writeTable(w, conformerColumns, conformers) }),
		f.write(RunFile, run.write),
	)
}

func (f *Folder) write(name string, fill func(io.Writer) error) error {
	return atomicfile.Write(filepath.Join(f.path, name), fill)
}
