package load

import (
	"fmt"
	"io"
	"strings"

	"torsieve/internal/textline"
)

// A tableSource reads .csv and .tsv files with a header.
type tableSource struct {
	lines    *textline.Reader
	file     string
	format   string
	o        Options
	comma    byte
	header   []string
	smiles   int // column
	id       int // column, -1 without
	record   int
	warnings []string // about the header, for the next record
	done     bool
}

func newTableSource(in io.Reader, file, format string, o Options) *tableSource {
	comma := byte(',')
	if format == "tsv" {
		comma = '\t'
	}
	return &tableSource{lines: textline.NewReader(in), file: file, format: format, o: o, comma: comma}
}

func (s *tableSource) next() (Record, error) {
	if s.done {
		return Record{}, io.EOF
	}
	if s.header == nil {
		line, ok := s.nextLine()
		if !ok {
			s.done = true
			return endOfText(s.lines, s.file, 0)
		}
		if err := s.readHeader(line); err != nil {
			s.done = true
			return Record{Line: s.lines.Number()}.failed(s.file, err.Error(), nil), nil
		}
	}
	line, ok := s.nextLine()
	if !ok {
		s.done = true
		return endOfText(s.lines, s.file, s.record)
	}
	s.record++
	rec := Record{Line: s.lines.Number(), Record: s.record, Warnings: s.warnings}
	s.warnings = nil
	return s.parse(rec, line), nil
}

func (s *tableSource) nextLine() (string, bool) {
	for {
		line, ok := s.lines.Next()
		if !ok || strings.TrimSpace(line) != "" {
			return line, ok
		}
	}
}

// readHeader finds the columns.
func (s *tableSource) readHeader(line string) error {
	if s.format == "csv" && !strings.Contains(line, ",") && strings.Contains(line, ";") {
		s.comma = ';'
		s.warnings = append(s.warnings, "the columns are taken to be separated by semicolons")
	}
	cells, closed := splitCells(line, s.comma)
	if !closed {
		return fmt.Errorf("the header has a quotation mark that is never closed")
	}
	for _, c := range cells {
		s.header = append(s.header, textline.Clean(c))
	}
	var err error
	if s.smiles, err = s.column(s.o.SmilesColumn, isSmilesColumn); err != nil {
		return err
	}
	if s.smiles < 0 {
		return fmt.Errorf("no column of the header is called SMILES; name one of %s", s.columnNames())
	}
	if s.id, err = s.column(s.o.IDColumn, isIDColumn); err != nil {
		return err
	}
	if s.id < 0 {
		s.warnings = append(s.warnings, "no column for ids is found; molecules are named by their line")
	}
	return nil
}

// column finds the column that the user names, or else the first that is good.
func (s *tableSource) column(wanted string, good func(name string, exact bool) bool) (int, error) {
	if wanted != "" {
		for i, name := range s.header {
			if strings.EqualFold(name, strings.TrimSpace(wanted)) {
				return i, nil
			}
		}
		return -1, fmt.Errorf("no column is called %s; there are %s", textline.Quote(wanted), s.columnNames())
	}
	for _, exact := range []bool{true, false} {
		for i, name := range s.header {
			if good(strings.ToLower(name), exact) {
				return i, nil
			}
		}
	}
	return -1, nil
}

func isSmilesColumn(name string, exact bool) bool {
	return name == "smiles" || !exact && strings.Contains(name, "smiles")
}

func isIDColumn(name string, exact bool) bool {
	if name == "id" {
		return true
	}
	if exact {
		return false
	}
	switch name {
	case "name", "title", "ligand", "compound", "molecule":
		return true
	}
	return strings.HasSuffix(name, "_id") || strings.HasSuffix(name, " id") || strings.HasSuffix(name, "_name")
}

func (s *tableSource) columnNames() string {
	const shown = 12
	var names []string
	for i, name := range s.header {
		if i == shown {
			names = append(names, "...")
			break
		}
		names = append(names, textline.Quote(name))
	}
	return strings.Join(names, ", ")
}

// parse reads one row, which may run over several lines where a cell is quoted.
func (s *tableSource) parse(rec Record, line string) Record {
	cells, closed := splitCells(line, s.comma)
	for more := line; !closed; {
		next, ok := s.lines.Next()
		if !ok || len(more)+len(next) > textline.MaxLength {
			rec.name("", "line")
			return rec.failed(s.file, fmt.Sprintf("a quotation mark is never closed: lines %d to %d are lost", rec.Line, s.lines.Number()), nil)
		}
		more += "\n" + next
		cells, closed = splitCells(more, s.comma)
	}
	if s.id >= 0 && s.id < len(cells) {
		rec.name(cells[s.id], "line")
	} else {
		rec.name("", "line")
	}
	if len(cells) > len(s.header) {
		rec.Warnings = append(rec.Warnings, fmt.Sprintf("the row has %d cells, the header %d", len(cells), len(s.header)))
	}
	if s.smiles >= len(cells) || strings.TrimSpace(cells[s.smiles]) == "" {
		return rec.failed(s.file, fmt.Sprintf("the column %s is empty", textline.Quote(s.header[s.smiles])), nil)
	}
	return rec.parseSMILES(s.file, strings.TrimSpace(cells[s.smiles]), s.o.MaxAtoms)
}

// splitCells cuts a row at its commas. A cell may stand in double quotes, in
// which two of them mean one (RFC 4180). closed is false if a quote is open at
// the end.
func splitCells(row string, comma byte) (cells []string, closed bool) {
	for {
		if strings.HasPrefix(row, `"`) {
			cell, rest, ok := cutQuoted(row)
			if !ok {
				return append(cells, cell), false
			}
			if i := strings.IndexByte(rest, comma); i >= 0 {
				cells, row = append(cells, cell+rest[:i]), rest[i+1:]
				continue
			}
			return append(cells, cell+rest), true
		}
		i := strings.IndexByte(row, comma)
		if i < 0 {
			return append(cells, row), true
		}
		cells, row = append(cells, row[:i]), row[i+1:]
	}
}

// cutQuoted takes a quoted cell off the front of row.
func cutQuoted(row string) (cell, rest string, ok bool) {
	var b strings.Builder
	for i := 1; i < len(row); i++ {
		if row[i] != '"' {
			b.WriteByte(row[i])
			continue
		}
		if i+1 < len(row) && row[i+1] == '"' {
			b.WriteByte('"')
			i++
			continue
		}
		return b.String(), row[i+1:], true
	}
	return b.String(), "", false
}
