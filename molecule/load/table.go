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
