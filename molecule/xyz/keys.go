package xyz

import (
	"fmt"
	"strconv"
	"strings"

	"torsieve/internal/textline"
)

// parseKeys reads key=value pairs; values with blanks stand in double quotes,
// where \" and \\ are the characters themselves and \n a line end. Words
// without = are passed over. Of a repeated key the last counts.
func parseKeys(comment string) map[string]string {
	keys := make(map[string]string)
	for s := comment; s != ""; {
		s = strings.TrimLeft(s, " \t")
		i := strings.IndexAny(s, "= \t")
		if i < 0 {
			break
		}
		if s[i] != '=' || i == 0 {
			s = s[i+1:]
			continue
		}
		key := s[:i]
		keys[key], s = parseValue(s[i+1:])
	}
	return keys
}

func parseValue(s string) (value, rest string) {
	if !strings.HasPrefix(s, `"`) {
		if i := strings.IndexAny(s, " \t"); i >= 0 {
			return s[:i], s[i:]
		}
		return s, ""
	}
	var b strings.Builder
	for i := 1; i < len(s); i++ {
		switch {
		case s[i] == '"':
			return b.String(), s[i+1:]
		case s[i] == '\\' && i+1 < len(s):
			if i++; s[i] == 'n' {
				b.WriteByte('\n')
			} else {
				b.WriteByte(s[i])
			}
		default:
			b.WriteByte(s[i])
		}
	}
	return b.String(), "" // the quote is never closed
}

// columns says where an atom line holds what is wanted.
type columns struct {
	species, position int
	needed            int // how many columns a line must have
}

// parseProperties reads name:type:count triplets, such as
// species:S:1:pos:R:3:forces:R:3. Without the key, four columns are read.
func parseProperties(text string) (columns, error) {
	if text == "" {
		return columns{0, 1, 4}, nil
	}
	c := columns{species: -1, position: -1}
	parts := strings.Split(text, ":")
	if len(parts)%3 != 0 {
		return c, fmt.Errorf("Properties=%s: want triplets name:type:columns", textline.Quote(text))
	}
	for i := 0; i < len(parts); i += 3 {
		n, err := strconv.Atoi(parts[i+2])
		if err != nil || n < 1 || n > 1000 {
			return c, fmt.Errorf("Properties=%s: %s is no number of columns", textline.Quote(text), textline.Quote(parts[i+2]))
		}
		switch name := strings.ToLower(parts[i]); {
		case (name == "species" || name == "z" && c.species < 0) && n == 1:
			c.species = c.needed
		case name == "pos" && n == 3:
			c.position = c.needed
		}
		c.needed += n
	}
	if c.species < 0 || c.position < 0 {
		return c, fmt.Errorf("Properties=%s: species (one column) and pos (three) are wanted", textline.Quote(text))
	}
	return c, nil
}
