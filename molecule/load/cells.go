package load

import "strings"

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
