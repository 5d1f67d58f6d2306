package handbook

import (
	"slices"
	"strings"
	"testing"
)

var knownMisses = []string{}

func missesOf(rows []row) []string {
	var found []string
	for _, r := range rows {
		_, g, h := r.verdicts()
		if g == outside || g == absent {
			found = append(found, gfn2.name+": "+r.fact.ID)
		}
		if h == outside {
			found = append(found, "HF-3c: "+r.fact.ID)
		}
	}
	return found
}

// checkMisses fails where a tier misses what is not known, or no longer misses
// what is.
func checkMisses(t *testing.T, rows []row) {
	t.Helper()
	found := missesOf(rows)
	for _, m := range found {
		if !slices.Contains(knownMisses, m) {
			t.Errorf("outside, and not known to be: %s", m)
		}
	}
	for _, m := range knownMisses {
		if asked(rows, m) && !slices.Contains(found, m) {
			t.Errorf("known to be outside, but is not any more: %s", m)
		}
	}
}

// asked says whether a miss is about one of the rows.
func asked(rows []row, miss string) bool {
	_, id, _ := strings.Cut(miss, ": ")
	return slices.ContainsFunc(rows, func(r row) bool { return r.fact.ID == id })
}
