//go:build full

package handbook

import (
	"slices"
	"testing"
)

// TestHandbook asks everything and compares the misses with the known ones.
func TestHandbook(t *testing.T) {
	all := facts(t)
	specimens := slices.Concat([]specimen{butane, pentane, hexane}, rotors, chains, carbonyls, rings, aValues)
	answers := make([][]row, len(specimens))
	t.Run("facts", func(t *testing.T) {
		for n, s := range specimens {
			t.Run(s.name, func(t *testing.T) {
				t.Parallel()
				answers[n] = examine(t, s, all, uff, field, gfn2)
			})
		}
	})
	rows := slices.Concat(answers...)
	t.Log("\n" + markdown(rows) + "\n" + tally(rows))
	checkMisses(t, rows)
	checkUFF(t, rows)
	if len(rows) != len(all) {
		t.Errorf("%d rows for %d facts", len(rows), len(all))
	}
}
