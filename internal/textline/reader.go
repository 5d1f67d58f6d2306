// Package textline reads text files of unknown origin line by line and knows
// where it is: any line end, no line too long for memory, a byte-order mark
// skipped. It also makes foreign text fit to be printed in a message.
package textline

import (
	"bufio"
	"errors"
	"io"
)

// MaxLength is the longest line that is kept, in bytes; what a longer one has
// beyond it is dropped, and Reader.Cut says so.
const MaxLength = 1 << 20

// A Reader hands out lines without their ends: LF, CR LF or CR alone.
type Reader struct {
	in     *bufio.Reader
	err    error
	buf    []byte
	number int
	text   string
	cut    bool
	again  bool
	began  bool
	bytes  int64
}

// NewReader returns a Reader of r.
func NewReader(r io.Reader) *Reader {
	return &Reader{in: bufio.NewReaderSize(r, 1<<16)}
}

// Next returns the next line, and false at the end or after an error of the
// underlying reader.
func (r *Reader) Next() (string, bool) {
	if r.again {
		r.again = false
		return r.text, true
	}
	if !r.began {
		r.began = true
		r.skipMark()
	}
	if !r.scan() {
		return "", false
	}
	r.number++
	r.text = string(r.buf)
	return r.text, true
}

// Back makes the following Next return the line once more.
func (r *Reader) Back() { r.again = true }

// Number returns the number of the line that Next returned last, from 1. After
// Back it is still that line's.
func (r *Reader) Number() int { return r.number }

// Cut says whether the last line was longer than MaxLength.
func (r *Reader) Cut() bool { return r.cut }

// Empty says, once Next has returned false, whether there was not one byte.
func (r *Reader) Empty() bool { return r.bytes == 0 }

// Err returns what stopped the reading, or nil at the end of the input.
func (r *Reader) Err() error {
	if errors.Is(r.err, io.EOF) {
		return nil
	}
	return r.err
}

// skipMark passes over a UTF-8 byte-order mark.
func (r *Reader) skipMark() {
	if head, _ := r.in.Peek(3); string(head) == "\xef\xbb\xbf" {
		_, _ = r.in.Discard(3) // cannot fail: the three bytes are in the buffer
		r.bytes += 3
	}
}

func (r *Reader) scan() bool {
	r.buf, r.cut = r.buf[:0], false
	if r.err != nil {
		return false
	}
	for n := 0; ; n++ {
		c, err := r.in.ReadByte()
		if err != nil {
			r.err = err
			return n > 0
		}
		r.bytes++
		switch {
		case c == '\n':
			return true
		case c == '\r':
			if next, err := r.in.Peek(1); err == nil && next[0] == '\n' {
				_, _ = r.in.Discard(1) // in the buffer as well
			}
			return true
		case len(r.buf) < MaxLength:
			r.buf = append(r.buf, c)
		default:
			r.cut = true
		}
	}
}
