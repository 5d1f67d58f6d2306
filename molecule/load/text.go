package load

import (
	"fmt"
	"io"
	"strings"

	"torsieve/internal/textline"
	"torsieve/molecule"
	"torsieve/molecule/smiles"
)

// A lineSource reads .smi files: SMILES, white space, name.
type lineSource struct {
	lines    *textline.Reader
	file     string
	maxAtoms int
	begun    bool // a line with content has been seen
	record   int
	note     string // about the header, for the next record
	done     bool
}

func newLineSource(in io.Reader, file string, o Options) *lineSource {
	return &lineSource{lines: textline.NewReader(in), file: file, maxAtoms: o.MaxAtoms}
}

func (s *lineSource) next() (Record, error) {
	for !s.done {
		line, ok := s.lines.Next()
		if !ok {
			s.done = true
			return endOfText(s.lines, s.file, s.record)
		}
		text := strings.TrimSpace(line)
		if text == "" || text[0] == '#' {
			continue
		}
		first := !s.begun
		s.begun = true
		if word := strings.Fields(text)[0]; first && strings.Contains(strings.ToLower(word), "smiles") {
			s.note = fmt.Sprintf("line %d is taken for a header: %s", s.lines.Number(), textline.Quote(text))
			continue
		}
		s.record++
		rec := s.parse(line, text)
		if s.note != "" {
			rec.Warnings = append([]string{s.note}, rec.Warnings...)
			s.note = ""
		}
		return rec, nil
	}
	return Record{}, io.EOF
}

// parse reads one line; text is the line without blanks at its ends.
func (s *lineSource) parse(line, text string) Record {
	rec := Record{Line: s.lines.Number(), Record: s.record}
	if line[0] == ' ' || line[0] == '\t' {
		rec.Warnings = append(rec.Warnings, "the line begins with blanks; they are passed over")
	}
	code, name := text, ""
	if i := strings.IndexAny(text, " \t"); i >= 0 {
		code, name = text[:i], strings.TrimSpace(text[i:])
	}
	if strings.HasPrefix(name, "|") {
		if i := strings.IndexByte(name[1:], '|'); i >= 0 {
			rec.Warnings = append(rec.Warnings, fmt.Sprintf("what stands between bars behind the SMILES is ignored: %s", textline.Quote(name[:i+2])))
			name = strings.TrimSpace(name[i+2:])
		}
	}
	rec.name(name, "line")
	if s.lines.Cut() {
		return rec.failed(s.file, fmt.Sprintf("the line is longer than %d characters", textline.MaxLength), nil)
	}
	return rec.parseSMILES(s.file, code, s.maxAtoms)
}

// name sets title and id; without a name the id is made of the place.
func (rec *Record) name(title, place string) {
	rec.Title = textline.Clean(title)
	rec.ID = rec.Title
	if rec.ID != "" {
		return
	}
	if place == "line" {
		rec.ID = fmt.Sprintf("line-%d", rec.Line)
	} else {
		rec.ID = fmt.Sprintf("record-%d", rec.Record)
	}
}

// parseSMILES fills Mol from a SMILES string.
func (rec Record) parseSMILES(file, code string, maxAtoms int) Record {
	if n := countAtoms(code); n > maxAtoms {
		return rec.failed(file, fmt.Sprintf("SMILES with %d atoms besides hydrogen is over the limit of %d", n, maxAtoms), nil)
	}
	m, warnings, err := smiles.Parse(code)
	if err != nil {
		return rec.failed(file, "SMILES "+textline.Quote(code), err)
	}
	rec.Mol = m
	rec.Warnings = append(rec.Warnings, warnings...)
	return rec
}

// failed makes a record an error.
func (rec Record) failed(file, msg string, cause error) Record {
	rec.Mol, rec.X = nil, nil
	rec.Err = &molecule.ParseError{File: file, Line: rec.Line, Record: rec.Record, ID: textline.Short(rec.Title), Msg: msg, Err: cause}
	return rec
}

// countAtoms counts atoms of a SMILES without reading it: brackets, and letters
// outside of them that begin a symbol.
func countAtoms(code string) int {
	count, inside := 0, false
	for i := range len(code) {
		switch c := code[i]; {
		case c == '[':
			inside = true
			count++
		case c == ']':
			inside = false
		case inside:
		case c == 'l' || c == 'r': // the second letters of Cl and Br
		case c >= 'A' && c <= 'Z' || c >= 'a' && c <= 'z':
			count++
		}
	}
	return count
}

// endOfText says why a text had no records, once, or io.EOF.
func endOfText(lines *textline.Reader, file string, records int) (Record, error) {
	rec := Record{}
	switch err := lines.Err(); {
	case err != nil:
		return rec.failed(file, "reading stopped", err), nil
	case records > 0:
		return rec, io.EOF
	case lines.Empty():
		return rec.failed(file, "the file is empty", nil), nil
	}
	return rec.failed(file, "no molecule in the file", nil), nil
}
