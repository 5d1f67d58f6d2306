package main

import (
	"context"
	"errors"
	"io"

	"torsieve/internal/atomicfile"
	"torsieve/molecule/load"
	"torsieve/screen"
)

// A session is what every command is given: the streams, the voice and the end.
type session struct {
	ctx     context.Context
	stdin   io.Reader
	stdout  io.Writer
	voice   *voice
	command []string // the arguments of this process
}

// records reads a file to its end and hands every record on, also the bad ones.
// It returns an error only if the file cannot be opened, if use returns one, or
// when the context ends.
func (s *session) records(file string, in inputOptions, use func(load.Record) error) error {
	r, err := load.Open(file, load.Options{
		Format: in.Format, IDField: in.IDField, SmilesColumn: in.SmilesColumn, IDColumn: in.IDColumn,
		Charge: in.Charge, Multiplicity: in.Multiplicity, Stdin: s.stdin,
	})
	if err != nil {
		return nothing(err, "")
	}
	defer r.Close()
	for s.ctx.Err() == nil {
		var rec load.Record
		err := screen.Guard(func() (err error) {
			rec, err = r.Next()
			return err
		})
		if errors.Is(err, io.EOF) {
			return nil
		}
		if err != nil {
			return nothing(err, "")
		}
		if err := use(rec); err != nil {
			return err
		}
	}
	return context.Cause(s.ctx)
}

// A tally counts how the records of a command ended, for its exit status.
type tally struct{ done, failed int }

// status is nil if all was done, and a silent failure else: what went wrong has
// been said record by record.
func (t tally) status() error {
	switch {
	case t.failed == 0:
		return nil
	case t.done == 0:
		return &failure{code: exitNothing}
	}
	return &failure{code: exitPartly}
}

// writeDone writes a file through fill, whole or not at all. Where a signal ends
// the work, what is done so far is written; where nothing is done, nothing.
func (s *session) writeDone(path string, t *tally, fill func(io.Writer) error) error {
	var stopped error
	err := atomicfile.Write(path, func(w io.Writer) error {
		err := fill(w)
		switch {
		case err != nil && s.ctx.Err() != nil && t.done > 0:
			stopped = err
			return nil
		case err == nil && t.done == 0:
			return t.status()
		}
		return err
	})
	return errors.Join(err, stopped)
}
