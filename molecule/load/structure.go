package load

import (
	"io"
	"strings"

	"torsieve/internal/textline"
	"torsieve/molecule"
	"torsieve/molecule/sdf"
	"torsieve/molecule/xyz"
)

// An sdfSource reads molfiles and SD files.
type sdfSource struct {
	reader  *sdf.Reader
	idField string
}

func (s *sdfSource) next() (Record, error) {
	r, err := s.reader.Next()
	if err != nil {
		return Record{}, err
	}
	rec := Record{Mol: r.Mol, X: r.X, Fields: r.Fields, Line: r.Line, Record: r.Record, Warnings: r.Warnings, Err: r.Err}
	if r.Record == 0 {
		return rec, nil // the file as a whole
	}
	rec.name(r.Title, "record")
	if s.idField != "" && r.Err == nil {
		s.takeID(&rec)
	}
	if r.Err == nil {
		compareStereo(&rec)
	}
	return rec, nil
}

// takeID takes the id from a data item.
func (s *sdfSource) takeID(rec *Record) {
	for _, f := range rec.Fields {
		first, _, _ := strings.Cut(f.Value, "\n")
		if id := textline.Clean(first); strings.EqualFold(f.Name, s.idField) && id != "" {
			rec.ID = id
			return
		}
	}
	rec.Warnings = append(rec.Warnings, "there is no data item "+textline.Quote(s.idField)+" to take the id from; "+textline.Quote(rec.ID)+" is used")
}

// A frameSource reads XYZ files and looks for the bonds.
type frameSource struct {
	reader *xyz.Reader
	file   string
	o      Options
}

func newFrameSource(in io.Reader, file string, o Options) *frameSource {
	return &frameSource{xyz.NewReader(in, file, o.MaxAtoms), file, o}
}

func (s *frameSource) next() (Record, error) {
	f, err := s.reader.Next()
	if err != nil {
		return Record{}, err
	}
	rec := Record{Line: f.Line, Record: f.Record, Warnings: f.Warnings, Err: f.Err}
	if f.Record == 0 {
		return rec, nil
	}
	rec.name(f.ID(), "record")
	rec.Title = f.ID()
	if f.Err != nil {
		return rec, nil
	}
	charge, multiplicity := 0, 0
	if q := firstOf(f.Charge, s.o.Charge); q != nil {
		charge = *q
	}
	if m := firstOf(f.Multiplicity, s.o.Multiplicity); m != nil {
		multiplicity = *m
	}
	m, warnings, err := molecule.Perceive(f.Atoms, f.X, charge, multiplicity)
	if err != nil {
		return rec.failed(s.file, "no bonds can be found", err), nil
	}
	rec.Mol, rec.X = m, f.X
	rec.Warnings = append(rec.Warnings, warnings...)
	return rec, nil
}

func firstOf(a, b *int) *int {
	if a != nil {
		return a
	}
	return b
}
