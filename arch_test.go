package torsieve

import (
	"go/parser"
	"go/token"
	"io/fs"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// mayImport is the architecture: each folder, and what of ours it may import.
// A folder counts with all below it that has no entry of its own.
var mayImport = map[string]string{
	"internal":           "",
	"molecule":           "internal",
	"forcefield":         "internal molecule",
	"semiempirical":      "internal molecule",
	"hf":                 "internal molecule",
	"dedupe":             "internal molecule",
	"screen/store":       "internal",
	"screen/ensemble":    "internal molecule",
	"screen/promotion":   "internal",
	"screen/calibration": "internal screen/ensemble screen/promotion",
	"screen/generate":    "internal molecule forcefield dedupe",
	"screen":             "internal molecule dedupe screen/generate screen/ensemble screen/store",
	"screen/tiertest":    "internal molecule screen",
	"screen/report":      "internal molecule screen screen/ensemble screen/report/page",
	"screen/report/page": "internal molecule screen screen/ensemble",
	"cmd": "internal molecule forcefield semiempirical hf dedupe screen " +
		"screen/generate screen/ensemble screen/report screen/store",
}

// forTestsOnly are packages that no program may contain.
var forTestsOnly = []string{"internal/gradcheck", "internal/reference", "screen/tiertest"}

// clockAndFlags are what cmd alone reads: the person, the terminal, the clock of
// the wall. A package that needs the time is handed a clock.
var clockAndFlags = []string{"flag", "os/signal", "golang.org/x/term", "github.com/alecthomas/kong"}

func TestImports(t *testing.T) {
	files := 0
	err := filepath.WalkDir(".", func(path string, d fs.DirEntry, err error) error {
		if err != nil || !strings.HasSuffix(path, ".go") || strings.HasSuffix(path, "_test.go") {
			return err
		}
		f, err := parser.ParseFile(token.NewFileSet(), path, nil, parser.ImportsOnly)
		if err != nil {
			return err
		}
		files++
		dir := filepath.ToSlash(filepath.Dir(path))
		for _, spec := range f.Imports {
			imported, err := strconv.Unquote(spec.Path.Value)
			if err != nil {
				return err
			}
			checkImport(t, path, dir, imported)
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if files < 50 {
		t.Errorf("only %d files were looked at: this test must run at the top of the module", files)
	}
}

func checkImport(t *testing.T, path, dir, imported string) {
	t.Helper()
	from := folder(dir)
	if from == "" {
		t.Errorf("%s: the folder %s has no place in the architecture", path, dir)
		return
	}
	if from != "cmd" && slices.Contains(clockAndFlags, imported) {
		t.Errorf("%s imports %s: only cmd knows the person", path, imported)
	}
	to, ours := strings.CutPrefix(imported, "torsieve/")
	if !ours {
		return
	}
	if slices.Contains(forTestsOnly, to) && !slices.Contains(forTestsOnly, dir) {
		t.Errorf("%s imports %s, which is for tests", path, to)
	}
	allowed := append(strings.Fields(mayImport[from]), from)
	if !slices.Contains(allowed, folder(to)) {
		t.Errorf("%s imports %s: %s may import %v", path, to, from, allowed)
	}
}

// folder returns the longest entry of mayImport that holds dir.
func folder(dir string) string {
	best := ""
	for key := range mayImport {
		if (dir == key || strings.HasPrefix(dir, key+"/")) && len(key) > len(best) {
			best = key
		}
	}
	return best
}
