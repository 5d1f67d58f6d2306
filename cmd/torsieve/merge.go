package main

import (
	"errors"
	"fmt"
	"path/filepath"
	"runtime"
	"time"

	"torsieve/screen/report"
	"torsieve/screen/store"
)

// mergeCommand joins runs made of slices of one list.
type mergeCommand struct {
	Dirs []string `arg:"" help:"Folders of runs that were made with --slice."`
	Out  string   `help:"Folder for the joined run: new or empty." required:"" placeholder:"DIR"`
}

// Run joins the databases. The outputs are written by screen, which then finds
// everything done.
func (c *mergeCommand) Run(s *session) error {
	there, err := report.Holds(c.Out)
	if err == nil && there {
		err = fmt.Errorf("%s: the folder holds a run already", c.Out)
	}
	if err != nil {
		return nothing(err, "give a new or an empty folder")
	}
	parts, closeParts, err := c.open(s)
	if err != nil {
		return err
	}
	defer closeParts()
	run := &report.Run{
		Program: "torsieve", Version: fullVersion(), Go: runtime.Version(), Command: s.command,
		Begun: time.Now().Format(time.RFC3339),
	}
	folder, err := s.takeFolder(c.Out, "", false, run)
	if err != nil {
		return err
	}
	merged, err := store.Merge(s.ctx, folder.store, parts, nil)
	if err = errors.Join(err, folder.close()); err != nil {
		return nothing(err, "")
	}
	s.voice.note("%s with %d results in %s", count(merged.Ligands, "ligand"), merged.Results, filepath.Join(c.Out, report.StoreFile))
	s.voice.note("hint: screen with the whole list and --out %s writes the outputs and computes what is missing", c.Out)
	return nil
}

// open opens the parts for reading.
func (c *mergeCommand) open(s *session) (parts []*store.Reader, closeAll func(), err error) {
	closeAll = func() {
		for _, p := range parts {
			_ = p.Close() // nothing was written
		}
	}
	for _, dir := range c.Dirs {
		r, err := store.OpenReader(s.ctx, filepath.Join(dir, report.StoreFile))
		if err != nil {
			closeAll()
			return nil, nil, nothing(err, "give folders of runs")
		}
		parts = append(parts, r)
	}
	return parts, closeAll, nil
}
