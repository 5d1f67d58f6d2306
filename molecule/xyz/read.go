// Package xyz reads and writes XYZ files: a count, a comment, and one line per
// atom with its symbol and position in angstrom, frame after frame. The comment
// may hold key=value pairs in the manner of extended XYZ; charge, multiplicity
// and id are understood, and Properties, which describes the columns.
package xyz

import (
	"fmt"
	"io"
	"strconv"
	"strings"

	"torsieve/internal/textline"
	"torsieve/molecule"
)

// A Frame is one structure of an XYZ file, before bonds are looked for.
type Frame struct {
	Atoms        []molecule.Atom // Number and Isotope are set
	X            []float64       // bohr, 3N
	Comment      string          // second line
	Keys         map[string]string
	Charge       *int // as stated by charge=
	Multiplicity *int // as stated by multiplicity=
	Line         int  // of the count, from 1
	Record       int  // from 1
	Warnings     []string
	Err          error // a *molecule.ParseError: this frame is of no use, the next may be
}

// A Reader reads one frame after another.
type Reader struct {
	lines    *textline.Reader
	file     string
	maxAtoms int
	record   int
	done     bool
}

// NewReader reads frames of r; file is its name in messages. Frames with more
// than maxAtoms atoms are refused.
func NewReader(r io.Reader, file string, maxAtoms int) *Reader {
	return &Reader{lines: textline.NewReader(r), file: file, maxAtoms: maxAtoms}
}

// Next returns the next frame and io.EOF after the last. What is wrong with a
// frame or with the whole file is the Frame's Err; reading goes on behind it.
func (r *Reader) Next() (Frame, error) {
	if r.done {
		return Frame{}, io.EOF
	}
	line, ok := r.nextLine()
	if !ok {
		return r.end()
	}
	r.record++
	f := Frame{Line: r.lines.Number(), Record: r.record}
	n, err := strconv.Atoi(strings.TrimSpace(line))
	if err != nil || n < 0 {
		r.resume()
		msg := fmt.Sprintf("want the number of atoms, have %s", textline.Quote(strings.TrimSpace(line)))
		if r.record == 1 {
			r.done = true
			msg = "not an XYZ file: line 1 does not hold the number of atoms"
			if f.Line > 1 {
				msg = "not an XYZ file: the first line does not hold the number of atoms"
			}
		}
		return r.failed(f, f.Line, msg), nil
	}
	if n == 0 {
		r.resume()
		return r.failed(f, f.Line, "the frame has no atoms"), nil
	}
	if n > r.maxAtoms {
		r.resume()
		return r.failed(f, f.Line, fmt.Sprintf("%d atoms are over the limit of %d", n, r.maxAtoms)), nil
	}
	return r.frame(f, n), nil
}

// nextLine returns the next line that is not blank.
func (r *Reader) nextLine() (string, bool) {
	for {
		line, ok := r.lines.Next()
		if !ok || strings.TrimSpace(line) != "" {
			return line, ok
		}
	}
}

func (r *Reader) end() (Frame, error) {
	r.done = true
	switch err := r.lines.Err(); {
	case err != nil:
		return r.failed(Frame{}, 0, "reading stopped: "+err.Error()), nil
	case r.record > 0:
		return Frame{}, io.EOF
	case r.lines.Empty():
		return r.failed(Frame{}, 0, "the file is empty"), nil
	}
	return r.failed(Frame{}, 0, "no molecule in the file"), nil
}

// frame reads the comment and n atom lines.
func (r *Reader) frame(f Frame, n int) Frame {
	comment, ok := r.lines.Next()
	if !ok {
		return r.failed(f, f.Line, fmt.Sprintf("line %d promises %d atoms, the file ends", f.Line, n))
	}
	f.Comment = textline.Clean(comment)
	f.Keys = parseKeys(comment)
	columns, err := f.header()
	if err != nil {
		r.resume()
		return r.failed(f, f.Line+1, err.Error())
	}
	for i := range n {
		line, ok := r.lines.Next()
		words := strings.Fields(line)
		if !ok || len(words) == 0 || isCount(words) {
			if ok {
				r.lines.Back()
			}
			return r.failed(f, f.Line, fmt.Sprintf("line %d promises %d atoms, %d follow", f.Line, n, i))
		}
		if err := f.addAtom(i, words, columns); err != nil {
			at := r.lines.Number()
			r.resume()
			return r.failed(f, at, err.Error())
		}
	}
	if line, ok := r.nextLine(); ok {
		r.lines.Back()
		if !isCount(strings.Fields(line)) {
			r.resume()
			return r.failed(f, f.Line, fmt.Sprintf("line %d promises %d atoms, more lines follow", f.Line, n))
		}
	}
	return f
}

func isCount(words []string) bool {
	if len(words) != 1 {
		return false
	}
	n, err := strconv.Atoi(words[0])
	return err == nil && n >= 0
}

// resume passes over the rest of a bad frame: to a line that can only be a
// count.
func (r *Reader) resume() {
	for {
		line, ok := r.lines.Next()
		if !ok {
			return
		}
		if isCount(strings.Fields(line)) {
			r.lines.Back()
			return
		}
	}
}

func (r *Reader) failed(f Frame, line int, msg string) Frame {
	f.Atoms, f.X = nil, nil
	f.Err = &molecule.ParseError{File: r.file, Line: line, Record: f.Record, ID: textline.Short(f.ID()), Msg: msg}
	return f
}
