package sdf

import (
	"fmt"
	"strings"

	"torsieve/internal/textline"
)

// fields reads the data items up to the end of the record.
func (r *Reader) fields(rec *Record) error {
	stray, strayAt := 0, 0
	defer func() {
		if stray > 0 {
			rec.Warnings = append(rec.Warnings, fmt.Sprintf("%d lines outside of any data item are ignored, the first is line %d", stray, strayAt))
		}
	}()
	for {
		line, ok := r.lines.Next()
		switch {
		case !ok || isDelimiter(line):
			if err := r.lines.Err(); !ok && err != nil {
				return &fault{r.lines.Number(), "reading stopped: " + err.Error()}
			}
			r.open = false
			return nil
		case strings.HasPrefix(line, ">"):
			rec.Fields = append(rec.Fields, Field{Name: fieldName(line, len(rec.Fields)+1), Value: r.fieldValue()})
		case strings.TrimSpace(line) != "":
			if stray++; stray == 1 {
				strayAt = r.lines.Number()
			}
		}
	}
}

// fieldName takes the name between < and >, or else numbers the item.
func fieldName(line string, number int) string {
	if i := strings.IndexByte(line, '<'); i >= 0 {
		if j := strings.LastIndexByte(line, '>'); j > i {
			if name := textline.Clean(line[i+1 : j]); name != "" {
				return name
			}
		}
	}
	return fmt.Sprintf("item %d", number)
}

// fieldValue reads lines up to a blank one.
func (r *Reader) fieldValue() string {
	var value []string
	for {
		line, ok := r.lines.Next()
		if !ok || strings.TrimSpace(line) == "" {
			break
		}
		if isDelimiter(line) {
			r.lines.Back()
			break
		}
		value = append(value, strings.TrimRight(line, " \t"))
	}
	return strings.Join(value, "\n")
}
