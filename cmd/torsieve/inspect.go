package main

import (
	"encoding/json"
	"io"

	"torsieve/molecule/load"
)

// inspectCommand prints what was understood of each record.
type inspectCommand struct {
	File  string       `arg:"" help:"Structures: .smi, .csv, .tsv, .sdf, .mol, .xyz, also gzip'd, or - with --format."`
	Input inputOptions `embed:""`
}

// Run reads the file and writes a line a record.
func (c *inspectCommand) Run(s *session) error {
	var t tally
	err := s.records(c.File, c.Input, func(rec load.Record) error {
		seen := load.Inspect(rec)
		if rec.Err != nil {
			t.failed++
			s.voice.failed("%v", rec.Err)
			seen.Error = printable(seen.Error)
			return writeLine(s.stdout, seen)
		}
		t.done++
		for _, w := range seen.Warnings {
			s.voice.warn("%s: record %d (%s): %s", c.File, rec.Record, rec.ID, w)
		}
		return writeLine(s.stdout, seen)
	})
	if err != nil {
		return err
	}
	return t.status()
}

// writeLine writes v as one line of JSON.
func writeLine(w io.Writer, v any) error {
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	return enc.Encode(v)
}
