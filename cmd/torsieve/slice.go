package main

import (
	"fmt"

	"torsieve/screen"
)

// A slice is every n-th ligand of a list, beginning with the i-th: 2/4. The zero
// value is the whole list.
type slice struct{ i, n int }

// UnmarshalText reads i/n.
func (s *slice) UnmarshalText(text []byte) error {
	var rest string
	k, _ := fmt.Sscanf(string(text)+" .", "%d/%d %s", &s.i, &s.n, &rest)
	if k != 3 || rest != "." || s.i < 1 || s.n < s.i {
		return fmt.Errorf("want i/n with i from 1 to n, as in 2/4, have %q", text)
	}
	return nil
}

// of picks the slice's ligands. They keep their places and ids in the whole list.
func (s slice) of(ligands []*screen.Ligand) []*screen.Ligand {
	if s.n == 0 {
		return ligands
	}
	var out []*screen.Ligand
	for k, l := range ligands {
		if k%s.n == s.i-1 {
			out = append(out, l)
		}
	}
	return out
}
