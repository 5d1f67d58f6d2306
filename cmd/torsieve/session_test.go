package main

import (
	"context"
	"errors"
	"io"
	"os"
	"path/filepath"
	"testing"
)

// What is done when a signal comes is on disk as a whole file; a failure leaves
// none, and neither does work that did nothing.
func TestWriteDone(t *testing.T) {
	failed := errors.New("disk full")
	for _, tc := range []struct {
		name    string
		done    int
		stopped bool
		err     error
		want    string // of the file; "" for none
	}{
		{"all done", 2, false, nil, "one two"},
		{"stopped half-way", 1, true, errInterrupted, "one two"},
		{"stopped at once", 0, true, errInterrupted, ""},
		{"failed", 1, false, failed, ""},
		{"nothing done", 0, false, nil, ""},
	} {
		t.Run(tc.name, func(t *testing.T) {
			ctx, cancel := context.WithCancelCause(t.Context())
			defer cancel(nil)
			if tc.stopped {
				cancel(errInterrupted)
			}
			path := filepath.Join(t.TempDir(), "out.sdf")
			s := &session{ctx: ctx}
			err := s.writeDone(path, &tally{done: tc.done, failed: 1}, func(w io.Writer) error {
				_, err := io.WriteString(w, "one two")
				return errors.Join(err, tc.err)
			})
			if tc.err != nil && !errors.Is(err, tc.err) || tc.err == nil && tc.done > 0 && err != nil {
				t.Errorf("have %v, want %v", err, tc.err)
			}
			got, readErr := os.ReadFile(path)
			if string(got) != tc.want || tc.want != "" && readErr != nil {
				t.Errorf("the file holds %q (%v), want %q", got, readErr, tc.want)
			}
		})
	}
}
