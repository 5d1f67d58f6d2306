package store

import (
	"encoding/base64"
	"encoding/json"
	"fmt"
	"strings"
	"unicode/utf8"
)

// PostgreSQL takes no text with a zero byte or with bytes that are no UTF-8. An
// id of a hostile file may have both and must come back as it was, so such text
// is kept in base64 behind a mark. The mark is a control character that clean
// text does not begin with.
const packed = "\x1a"

func pack(s string) string {
	if utf8.ValidString(s) && !strings.ContainsRune(s, 0) && !strings.HasPrefix(s, packed) {
		return s
	}
	return packed + base64.StdEncoding.EncodeToString([]byte(s))
}

func unpack(s string) (string, error) {
	code, yes := strings.CutPrefix(s, packed)
	if !yes {
		return s, nil
	}
	b, err := base64.StdEncoding.DecodeString(code)
	if err != nil {
		return "", fmt.Errorf("text that cannot be unpacked: %w", err)
	}
	return string(b), nil
}

// text is a string as it stands in a column.
type text struct{ s *string }

// Scan takes the column's value, packed or plain; NULL is the empty text.
func (t text) Scan(v any) (err error) {
	switch v := v.(type) {
	case nil:
		*t.s = ""
	case string:
		*t.s, err = unpack(v)
	case []byte:
		*t.s, err = unpack(string(v))
	default:
		err = fmt.Errorf("want text, have %T", v)
	}
	return err
}

// listed is a list of texts as a JSON array; an empty list is an empty text.
func listed(list []string) (string, error) {
	if len(list) == 0 {
		return "", nil
	}
	out := make([]string, len(list))
	for i, s := range list {
		out[i] = pack(s)
	}
	b, err := json.Marshal(out)
	return pack(string(b)), err
}

// list is a []string as it stands in a column.
type list struct{ l *[]string }

// Scan reads what listed wrote.
func (l list) Scan(v any) error {
	var s string
	if err := (text{&s}).Scan(v); err != nil {
		return err
	}
	*l.l = nil
	if s == "" {
		return nil
	}
	if err := json.Unmarshal([]byte(s), l.l); err != nil {
		return err
	}
	for i, s := range *l.l {
		var err error
		if (*l.l)[i], err = unpack(s); err != nil {
			return err
		}
	}
	return nil
}
