package textline

import (
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// quoted is how much of foreign text a message shows, in characters.
const quoted = 40

// Quote returns s between quotation marks, with everything that a terminal
// might take for a command escaped, and cut off with dots if it is long.
func Quote(s string) string {
	if n := utf8.RuneCountInString(s); n > quoted {
		cut := 0
		for range quoted {
			_, size := utf8.DecodeRuneInString(s[cut:])
			cut += size
		}
		return strconv.Quote(s[:cut]) + "..."
	}
	return strconv.Quote(s)
}

// Clean returns s without what cannot be shown: bytes that are no UTF-8 are
// read as Latin-1, control and format characters become U+FFFD, blanks at the
// ends go.
func Clean(s string) string {
	if plain(s) {
		return strings.TrimSpace(s)
	}
	var b strings.Builder
	for i := 0; i < len(s); {
		r, size := utf8.DecodeRuneInString(s[i:])
		if r == utf8.RuneError && size == 1 {
			r = rune(s[i])
		}
		i += size
		switch {
		case r == '\t':
			b.WriteByte(' ')
		case unicode.IsPrint(r) || r == utf8.RuneError:
			b.WriteRune(r)
		default:
			b.WriteRune(utf8.RuneError)
		}
	}
	return strings.TrimSpace(b.String())
}

// Short returns s cleaned and cut off with dots if it is long: a name for a
// message.
func Short(s string) string {
	s = Clean(s)
	if utf8.RuneCountInString(s) <= quoted {
		return s
	}
	return string([]rune(s)[:quoted]) + "..."
}

func plain(s string) bool {
	for i := range len(s) {
		if s[i] < ' ' || s[i] > '~' {
			return false
		}
	}
	return true
}
