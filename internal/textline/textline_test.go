package textline

import (
	"errors"
	"io"
	"slices"
	"strings"
	"testing"
	"testing/iotest"
	"unicode/utf8"
)

func all(r *Reader) (lines []string) {
	for {
		line, ok := r.Next()
		if !ok {
			return lines
		}
		lines = append(lines, line)
	}
}

func TestLineEnds(t *testing.T) {
	for _, tc := range []struct {
		in   string
		want []string
	}{
		{"", nil},
		{"a", []string{"a"}},
		{"a\n", []string{"a"}},
		{"a\nb", []string{"a", "b"}},
		{"a\r\nb\r\n", []string{"a", "b"}},
		{"a\rb\r", []string{"a", "b"}},
		{"\n\r\n\r", []string{"", "", ""}},
		{"\xef\xbb\xbfa\n\xef\xbb\xbfb", []string{"a", "\xef\xbb\xbfb"}},
	} {
		for _, in := range []io.Reader{strings.NewReader(tc.in), iotest.OneByteReader(strings.NewReader(tc.in))} {
			r := NewReader(in)
			if got := all(r); !slices.Equal(got, tc.want) {
				t.Errorf("%q: got %q, want %q", tc.in, got, tc.want)
			}
			if r.Number() != len(tc.want) || r.Err() != nil || r.Empty() != (tc.in == "") {
				t.Errorf("%q: number %d, error %v, empty %v", tc.in, r.Number(), r.Err(), r.Empty())
			}
		}
	}
}

func TestBackAndLongLines(t *testing.T) {
	r := NewReader(strings.NewReader("one\n" + strings.Repeat("x", MaxLength+5) + "\nthree"))
	r.Next()
	r.Back()
	if line, _ := r.Next(); line != "one" || r.Number() != 1 {
		t.Errorf("after Back: %q, line %d", line, r.Number())
	}
	if line, _ := r.Next(); len(line) != MaxLength || !r.Cut() {
		t.Errorf("long line: %d bytes, cut %v", len(line), r.Cut())
	}
	if line, _ := r.Next(); line != "three" || r.Cut() {
		t.Errorf("after the long line: %q, cut %v", line, r.Cut())
	}
}

func TestReadErrorIsKept(t *testing.T) {
	broken := errors.New("broken")
	r := NewReader(io.MultiReader(strings.NewReader("a\nb"), iotest.ErrReader(broken)))
	if got := all(r); !slices.Equal(got, []string{"a", "b"}) || !errors.Is(r.Err(), broken) {
		t.Errorf("got %q, error %v", got, r.Err())
	}
}

func FuzzClean(f *testing.F) {
	f.Add("methanol")
	f.Add("\x1b[31m\x07\xff\xe9 b\u202e")
	f.Fuzz(func(t *testing.T, s string) {
		for _, got := range []string{Clean(s), Quote(s)} {
			if !utf8.ValidString(got) || strings.ContainsAny(got, "\x00\x07\x1b\n\r\t\u202e\x7f\u009b") {
				t.Errorf("%q is shown as %q", s, got)
			}
		}
		if again := Clean(Clean(s)); again != Clean(s) {
			t.Errorf("%q: cleaned twice %q, once %q", s, again, Clean(s))
		}
	})
}
