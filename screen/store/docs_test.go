package store

import (
	"database/sql"
	"os"
	"regexp"
	"strings"
	"testing"
)

// The examples of docs/store.md are run as they stand there, and the page names
// every table and every column.
func TestTheHandbookIsTrue(t *testing.T) {
	page, err := os.ReadFile("../../docs/store.md")
	must(t, err)
	examples := regexp.MustCompile("(?s)```sql\n(.*?);\n```").FindAllStringSubmatch(string(page), -1)
	if len(examples) < 4 {
		t.Fatalf("%d examples were found", len(examples))
	}
	everywhere(t, func(t *testing.T, p place) {
		s := p.open()
		f := fill(t, s, 1, 3)
		for _, e := range examples {
			query := strings.ReplaceAll(e[1], "QLW-001", f.ligands[0].ID)
			rows := 0
			view(t, &s.Reader, func(v *View) error {
				return v.each(func(*sql.Rows) error {
					rows++
					return nil
				}, query)
			})
			if rows == 0 && !strings.Contains(query, "error <> '' ORDER") {
				t.Errorf("no answer to:\n%s", query)
			}
		}
	})
	for _, table := range regexp.MustCompile(`(?s)CREATE TABLE (\w+) \((.*?)\n\)`).FindAllStringSubmatch(schema, -1) {
		for _, column := range regexp.MustCompile(`(?m)^  ([a-z]\w*)`).FindAllStringSubmatch(table[2], -1) {
			if queueOnly := table[1] == "unit" || table[1] == "worker" || table[1] == "holder" || table[1] == "torsieve_store"; queueOnly {
				continue // no table of columns: nobody has a question about them
			}
			if !regexp.MustCompile("[`.]" + column[1] + "`").Match(page) {
				t.Errorf("the page does not tell of %s.%s", table[1], column[1])
			}
		}
		if !strings.Contains(string(page), "**`"+table[1]+"`**") {
			t.Errorf("the page does not tell of the table %s", table[1])
		}
	}
}
