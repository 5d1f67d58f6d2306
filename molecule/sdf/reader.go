// Package sdf reads and writes molfiles and SD files, versions V2000 and V3000.
//
// Source: CTfile Formats, published by MDL, later BIOVIA: counts line, atom,
// bond and property blocks, V3000 tables and SD data items. Bond type 4
// (aromatic), a query type there, is accepted for molecules.
package sdf

import (
	"errors"
	"io"
	"strings"

	"torsieve/internal/textline"
	"torsieve/molecule"
)

// A Field is one data item of an SD record. Value may hold several lines.
type Field struct {
	Name, Value string
}

// A Record is one entry of an SD file.
type Record struct {
	Mol      *molecule.Molecule // nil if Err is not
	X        []float64          // bohr, 3N; nil where the file has no 3D geometry of all atoms
	Title    string             // first line
	Fields   []Field            // in the file's order
	Line     int                // of the title, from 1
	Record   int                // from 1
	Warnings []string
	Err      error // a *molecule.ParseError: this record is of no use, the next may be
}

// A Reader reads one record after another.
type Reader struct {
	lines    *textline.Reader
	file     string
	maxAtoms int
	record   int
	open     bool // inside a record, before its delimiter
	done     bool
}

// NewReader reads records of r; file is its name in messages. Records with more
// than maxAtoms atoms are refused.
func NewReader(r io.Reader, file string, maxAtoms int) *Reader {
	return &Reader{lines: textline.NewReader(r), file: file, maxAtoms: maxAtoms}
}

// Next returns the next record and io.EOF after the last. What is wrong with a
// record or with the whole file is the Record's Err; reading goes on behind it.
func (r *Reader) Next() (Record, error) {
	if r.done {
		return Record{}, io.EOF
	}
	start := r.lines.Number() + 1
	header, ok := r.header()
	if !ok {
		r.done = true
		if err := r.lines.Err(); err != nil {
			return r.failed(Record{}, &fault{msg: "reading stopped: " + err.Error()}), nil
		}
		if r.record == 0 {
			msg := "no molecule in the file"
			if r.lines.Empty() {
				msg = "the file is empty"
			}
			return r.failed(Record{}, &fault{msg: msg}), nil
		}
		return Record{}, io.EOF
	}
	r.record++
	r.open = true
	rec := Record{Line: start, Record: r.record}
	if len(header) > 0 {
		rec.Title = textline.Clean(header[0])
	}
	t, err := r.table(header)
	if err == nil {
		rec.Warnings = t.warnings
		err = r.fields(&rec)
	}
	if err == nil {
		err = t.build(&rec)
	}
	if err != nil {
		r.skip()
		return r.failed(rec, err), nil
	}
	return rec, nil
}

// header returns the three header lines and the counts line, fewer where the
// file ends among them, and false where nothing but blank lines is left.
func (r *Reader) header() ([]string, bool) {
	var header []string
	blank := true
	for len(header) < 4 {
		line, ok := r.lines.Next()
		if !ok {
			return header, !blank
		}
		blank = blank && strings.TrimSpace(line) == ""
		if isDelimiter(line) {
			r.lines.Back()
			break
		}
		header = append(header, line)
	}
	if !blank || len(header) < 4 {
		return header, !blank
	}
	// Four blank lines: the rest of the file may be blank as well.
	for {
		line, ok := r.lines.Next()
		if !ok {
			return nil, false
		}
		if strings.TrimSpace(line) != "" {
			r.lines.Back()
			return header, true
		}
	}
}

// table reads one connection table behind its header.
func (r *Reader) table(header []string) (*table, error) {
	at := r.lines.Number()
	if len(header) < 4 {
		return nil, faultf(at, "cut off: the record ends in its header")
	}
	c, ok := parseCounts(header[3])
	if !ok {
		msg := "line 4 of the record is no counts line"
		switch {
		case strings.Contains(header[3], "V2000"):
			msg = "the counts line cannot hold more than 999 atoms or is malformed"
		case r.record == 1:
			msg = "not an SDF: line 4 is no counts line"
		}
		return nil, &fault{at, msg}
	}
	t := &table{title: header[0], program: header[1], comment: header[2]}
	if c.v3000 {
		if err := r.readV3000(t, r.maxAtoms); err != nil {
			return nil, err
		}
	} else {
		if err := checkSize(at, c.atoms, c.bonds, r.maxAtoms); err != nil {
			return nil, err
		}
		if err := r.readV2000(t, c); err != nil {
			return nil, err
		}
	}
	if len(t.atoms) == 0 {
		return nil, faultf(0, "the record has no atoms")
	}
	return t, nil
}

func checkSize(line, atoms, bonds, maxAtoms int) error {
	if atoms > maxAtoms {
		return faultf(line, "%d atoms are over the limit of %d", atoms, maxAtoms)
	}
	if bonds > 8*atoms {
		return faultf(line, "%d bonds are too many for %d atoms", bonds, atoms)
	}
	return nil
}

// skip passes over the rest of the record, the delimiter included.
func (r *Reader) skip() {
	for r.open {
		line, ok := r.lines.Next()
		r.open = ok && !isDelimiter(line)
	}
}

func isDelimiter(line string) bool { return strings.HasPrefix(line, "$$$$") }

// failed returns rec with a ParseError made of err.
func (r *Reader) failed(rec Record, err error) Record {
	p := &molecule.ParseError{File: r.file, Record: rec.Record, ID: textline.Short(rec.Title), Msg: err.Error()}
	var f *fault
	if errors.As(err, &f) {
		p.Line = f.line
	}
	if strings.HasPrefix(p.Msg, "not an SDF") {
		p.ID = "" // whatever stands there is no title
	}
	rec.Mol, rec.X, rec.Err = nil, nil, p
	return rec
}
