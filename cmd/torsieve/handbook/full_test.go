//go:build full

package handbook

import (
	"slices"
	"testing"
)

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
	t.Log("\n" + markdown(slices.Concat(answers...)))
}
