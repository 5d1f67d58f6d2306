// Package load opens files of molecules in any format that the program reads
// and hands out one record after another. What is wrong with a record is part
// of the record; the others go on.
package load

import (
	"bufio"
	"compress/gzip"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"

	"torsieve/molecule"
	"torsieve/molecule/sdf"
)

// A Field is one data item of a record.
type Field = sdf.Field

// A Record is one molecule of a file.
type Record struct {
	Mol      *molecule.Molecule // nil if Err is not
	X        []float64          // bohr, 3N; nil without a 3D geometry of all atoms
	ID       string             // never empty but for a file as a whole
	Title    string             // the name in the file, "" without one
	Fields   []Field            // data of an SD record, in the file's order
	Line     int                // where the record begins, from 1
	Record   int                // from 1; 0 for the file as a whole
	Warnings []string
	Err      error // a *molecule.ParseError: why there is no molecule
}

// DefaultMaxAtoms is the largest number of atoms in the text of one record;
// hydrogens that a SMILES or a molfile leaves out are not counted. The limit
// keeps mistakes (a protein, a file glued together) from eating minutes: what
// is under it is understood within about a second, and no tier could do much
// with more.
const DefaultMaxAtoms = 1200

// Options say what a file itself does not. The zero value is fine for files.
type Options struct {
	Format       string    // one of Formats; "" goes by the file's name
	IDField      string    // SD data item that holds the id; "" takes the title
	SmilesColumn string    // of .csv and .tsv; "" looks for a name that contains smiles
	IDColumn     string    // of .csv and .tsv; "" looks for id, name, title, ligand, compound
	Charge       *int      // total charge of XYZ frames that state none; nil is 0
	Multiplicity *int      // likewise 2S+1; nil leaves it open
	MaxAtoms     int       // 0 is DefaultMaxAtoms
	Stdin        io.Reader // what "-" reads
}

// Formats are the names of the formats, which are the endings of file names.
var Formats = []string{"smi", "csv", "tsv", "sdf", "mol", "xyz"}

// A Reader hands out the records of one file.
type Reader struct {
	source source
	closer io.Closer
}

// A source reads one format.
type source interface {
	// next returns io.EOF after the last record.
	next() (Record, error)
}

// Open opens the file at path, or standard input for "-", and finds out its
// format and whether it is compressed. An error is a *molecule.ParseError or
// what the operating system says; what is wrong inside comes with the records.
func Open(path string, o Options) (*Reader, error) {
	if o.MaxAtoms == 0 {
		o.MaxAtoms = DefaultMaxAtoms
	}
	format, err := formatOf(path, o.Format)
	if err != nil {
		return nil, err
	}
	in, closer, err := openInput(path, o.Stdin)
	if err != nil {
		return nil, err
	}
	text, err := decompress(path, in)
	if err != nil {
		return nil, errors.Join(err, closer.Close())
	}
	return &Reader{newSource(format, text, path, o), closer}, nil
}

// Next returns the next record and io.EOF after the last. A record that is no
// molecule, or a file that is not what it should be, comes as a Record with
// Err; reading goes on behind it.
func (r *Reader) Next() (Record, error) {
	rec, err := r.source.next()
	if err != nil {
		return Record{}, err
	}
	finish(&rec)
	return rec, nil
}

// Close closes the file.
func (r *Reader) Close() error { return r.closer.Close() }

// finish does what is the same for all formats.
func finish(rec *Record) {
	if rec.Err != nil || rec.X == nil {
		return
	}
	if err := CheckGeometry(rec.Mol.Numbers(), rec.X); err != nil {
		rec.Warnings = append(rec.Warnings, err.Error())
	}
	if text := stretched(rec.Mol, rec.X); text != "" {
		rec.Warnings = append(rec.Warnings, text)
	}
}

func formatOf(path, stated string) (string, error) {
	format := strings.ToLower(strings.TrimPrefix(stated, "."))
	if stated == "" {
		if path == "-" {
			return "", &molecule.ParseError{File: path, Msg: "standard input needs a format: " + strings.Join(Formats, ", ")}
		}
		base := strings.TrimSuffix(strings.ToLower(path), ".gz")
		format = strings.TrimPrefix(filepath.Ext(base), ".")
	}
	for _, f := range Formats {
		if f == format {
			return f, nil
		}
	}
	return "", &molecule.ParseError{File: path, Msg: fmt.Sprintf("unknown format %q: want one of %s", format, strings.Join(Formats, ", "))}
}

func openInput(path string, stdin io.Reader) (io.Reader, io.Closer, error) {
	if path == "-" {
		if stdin == nil {
			stdin = strings.NewReader("")
		}
		return stdin, io.NopCloser(nil), nil
	}
	f, err := os.Open(path)
	if err != nil {
		return nil, nil, err
	}
	if info, err := f.Stat(); err == nil && info.IsDir() {
		return nil, nil, errors.Join(&molecule.ParseError{File: path, Msg: "this is a folder, not a file"}, f.Close())
	}
	return f, f, nil
}

// decompress looks at the first bytes: gzip (RFC 1952) begins with 1f 8b,
// UTF-16 text with one of its byte-order marks.
func decompress(path string, in io.Reader) (io.Reader, error) {
	text := bufio.NewReader(in)
	if head, _ := text.Peek(2); string(head) == "\x1f\x8b" {
		z, err := gzip.NewReader(text)
		if err != nil {
			return nil, &molecule.ParseError{File: path, Msg: "the file begins as gzip and cannot be unpacked", Err: err}
		}
		text = bufio.NewReader(z)
	}
	if head, _ := text.Peek(2); string(head) == "\xff\xfe" || string(head) == "\xfe\xff" {
		return nil, &molecule.ParseError{File: path, Msg: "the text is UTF-16; save it as UTF-8"}
	}
	return text, nil
}

func newSource(format string, in io.Reader, path string, o Options) source {
	switch format {
	case "smi":
		return newLineSource(in, path, o)
	case "csv", "tsv":
		return newTableSource(in, path, format, o)
	case "xyz":
		return newFrameSource(in, path, o)
	}
	return &sdfSource{sdf.NewReader(in, path, o.MaxAtoms), o.IDField}
}
