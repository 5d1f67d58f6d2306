package main

import (
	"fmt"
	"io"
	"strings"
	"sync"
	"unicode"
)

// This file is all that torsieve says to a person. The rules:
//
//   - stdout is data; whatever a person should read goes to stderr.
//   - A message starts with "torsieve: ", in lower case, without a full stop.
//   - An error says what was found and what was wanted; a hint says what to do.
//   - No control character of an input reaches the terminal.

// A voice speaks to stderr, from any goroutine, and keeps out of the way of a
// progress bar.
type voice struct {
	mu     sync.Mutex
	w      io.Writer
	quiet  bool
	before func() // takes a bar off the line; may be nil
}

func newVoice(w io.Writer) *voice { return &voice{w: w} }

// complain is for what stops the command; it is said even when quiet.
func (v *voice) complain(err error, hint string) {
	v.say("error: " + err.Error())
	if hint != "" {
		v.say("hint: " + hint)
	}
}

// failed is for a record or ligand that could not be done.
func (v *voice) failed(format string, args ...any) { v.say("error: " + fmt.Sprintf(format, args...)) }

// warn is for a doubt that a chemist should know.
func (v *voice) warn(format string, args ...any) {
	if !v.quiet {
		v.say("warning: " + fmt.Sprintf(format, args...))
	}
}

// note is for everything else.
func (v *voice) note(format string, args ...any) {
	if !v.quiet {
		v.say(fmt.Sprintf(format, args...))
	}
}

func (v *voice) say(text string) {
	v.mu.Lock()
	defer v.mu.Unlock()
	if v.before != nil {
		v.before()
	}
	// Nothing can be done about a terminal that is gone.
	_, _ = fmt.Fprintf(v.w, "torsieve: %s\n", printable(text))
}

// printable replaces control characters, which a hostile file could put into a
// message; a line break of a joined error becomes "; ".
func printable(s string) string {
	s = strings.ReplaceAll(strings.TrimRight(s, "\n"), "\n", "; ")
	return strings.Map(func(r rune) rune {
		if unicode.IsControl(r) || r == unicode.ReplacementChar {
			return '?'
		}
		return r
	}, s)
}
