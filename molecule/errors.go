package molecule

import (
	"fmt"
	"strings"
)

// A ParseError says where an input record could not be understood.
type ParseError struct {
	File   string // as the user named it; "-" for stdin
	Line   int    // from 1; 0 if the record as a whole is at fault
	Record int    // from 1; 0 if the file as a whole is at fault
	ID     string // the record's name where it was known, or ""
	Msg    string // lower case, no full stop: what was found, what was expected
	Err    error  // the cause, or nil
}

func (e *ParseError) Error() string {
	var b strings.Builder
	b.WriteString(e.File)
	if e.Line > 0 {
		fmt.Fprintf(&b, ":%d", e.Line)
	}
	b.WriteString(": ")
	if e.Record > 0 {
		fmt.Fprintf(&b, "record %d", e.Record)
		if e.ID != "" {
			fmt.Fprintf(&b, " (%s)", e.ID)
		}
		b.WriteString(": ")
	}
	b.WriteString(e.Msg)
	if e.Err != nil {
		b.WriteString(": ")
		b.WriteString(e.Err.Error())
	}
	return b.String()
}

func (e *ParseError) Unwrap() error { return e.Err }
