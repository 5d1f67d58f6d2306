package handbook

import (
	"slices"
	"testing"
)

// quick are the specimens of a few atoms, for every run.
var quick = []string{"ethane", "methanol", "methanethiol", "acetaldehyde", "formic acid", "methyl formate", "1,2-difluoroethane"}

func TestQuickHandbook(t *testing.T) {
	all := facts(t)
	var rows []row
	for _, s := range append([]specimen{butane}, slices.Concat(rotors, chains, carbonyls)...) {
		if s.name == "butane" || slices.Contains(quick, s.name) {
			rows = append(rows, examine(t, s, all, uff, field, gfn2)...)
		}
	}
	if len(rows) < 14 {
		t.Errorf("only %d facts", len(rows))
	}
	checkMisses(t, rows)
	checkUFF(t, rows)
}
