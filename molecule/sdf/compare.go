package sdf

import (
	"fmt"
	"strings"

	"torsieve/molecule"
)

// compareWedges warns where wedges of a 3D record say the opposite of its
// coordinates, which count.
func (t *table) compareWedges(rec *Record) {
	if !t.hasMarks() {
		return
	}
	var wrong []string
	neighbours := t.neighbours()
	for _, c := range rec.Mol.Centres() {
		drawn, _ := t.wedgeParity(c.Atom, neighbours[c.Atom])
		if drawn == 0 || c.Parity == 0 {
			continue
		}
		order := append([]int(nil), neighbours[c.Atom]...)
		if len(order) == 3 {
			order = append(order, molecule.LonePair)
		}
		if drawn*permutationSign(order, c.Neighbours[:]) != c.Parity {
			wrong = append(wrong, fmt.Sprint(c.Atom+1))
		}
	}
	if len(wrong) > 0 {
		rec.Warnings = append(rec.Warnings, fmt.Sprintf("the wedges contradict the 3D coordinates at atom %s; the coordinates count", strings.Join(wrong, ", ")))
	}
}

// permutationSign is +1 or -1 for an even or odd permutation from a to b, and 0
// where they do not hold the same.
func permutationSign(a, b []int) molecule.Parity {
	if len(a) != len(b) {
		return 0
	}
	a = append([]int(nil), a...)
	sign := molecule.Parity(1)
	for i, want := range b {
		at := -1
		for j := i; j < len(a); j++ {
			if a[j] == want {
				at = j
			}
		}
		if at < 0 {
			return 0
		}
		if at != i {
			a[i], a[at] = a[at], a[i]
			sign = -sign
		}
	}
	return sign
}
