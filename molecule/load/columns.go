package load

import (
	"fmt"
	"strings"

	"torsieve/internal/textline"
)

// column finds the column that the user names, or else the first that is good.
func (s *tableSource) column(wanted string, good func(name string, exact bool) bool) (int, error) {
	if wanted != "" {
		for i, name := range s.header {
			if strings.EqualFold(name, strings.TrimSpace(wanted)) {
				return i, nil
			}
		}
		return -1, fmt.Errorf("no column is called %s; there are %s", textline.Quote(wanted), s.columnNames())
	}
	for _, exact := range []bool{true, false} {
		for i, name := range s.header {
			if good(strings.ToLower(name), exact) {
				return i, nil
			}
		}
	}
	return -1, nil
}

func isSmilesColumn(name string, exact bool) bool {
	return name == "smiles" || !exact && strings.Contains(name, "smiles")
}

func isIDColumn(name string, exact bool) bool {
	if name == "id" {
		return true
	}
	if exact {
		return false
	}
	switch name {
	case "name", "title", "ligand", "compound", "molecule":
		return true
	}
	return strings.HasSuffix(name, "_id") || strings.HasSuffix(name, " id") || strings.HasSuffix(name, "_name")
}

func (s *tableSource) columnNames() string {
	const shown = 12
	var names []string
	for i, name := range s.header {
		if i == shown {
			names = append(names, "...")
			break
		}
		names = append(names, textline.Quote(name))
	}
	return strings.Join(names, ", ")
}
