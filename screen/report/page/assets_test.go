package page

import (
	"crypto/sha256"
	"encoding/hex"
	"io/fs"
	"strings"
	"testing"
)

// The embedded library is the published one, byte by byte, and its licence is
// beside it and on the page.
func TestAssetsAreThePublishedOnes(t *testing.T) {
	listed := map[string]string{}
	for _, line := range strings.Split(strings.TrimSpace(text("assets/VERSIONS")), "\n") {
		if f := strings.Fields(line); f[0] != "#" {
			listed[f[2]] = f[3]
			if f[1] != libraryVersion {
				t.Errorf("VERSIONS has %s %s, the page says %s", f[0], f[1], libraryVersion)
			}
		}
	}
	err := fs.WalkDir(files, "assets", func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() || path == "assets/VERSIONS" {
			return err
		}
		sum := sha256.Sum256([]byte(text(path)))
		if want := listed[strings.TrimPrefix(path, "assets/")]; want != hex.EncodeToString(sum[:]) {
			t.Errorf("%s is not what VERSIONS lists", path)
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	var b Book
	if page := written(t, &b); !strings.Contains(page, "BSD-3-Clause") || !strings.Contains(page, "University of Pittsburgh") {
		t.Error("the page does not carry the licence of the library in it")
	}
}

// No script of ours may end the element that it stands in, and none takes text
// for markup but where the template has escaped it.
func TestScriptsAreHarmless(t *testing.T) {
	for _, script := range []string{text("assets/3dmol/3Dmol-min.js"), program()} {
		if strings.Contains(strings.ToLower(script), "</script") || strings.Contains(script, "<!--") {
			t.Error("a script would end its element")
		}
	}
	ours := program()
	if n := strings.Count(ours, "innerHTML") + strings.Count(ours, "insertAdjacentHTML") + strings.Count(ours, "document.write"); n != 1 {
		t.Errorf("text becomes markup at %d places, want the one in start.js", n)
	}
	for _, bad := range []string{"fetch(", "XMLHttpRequest", "import(", "eval(", "http:", "localStorage"} {
		if at := strings.Index(strings.ReplaceAll(ours, "http://www.w3.org/2000/svg", ""), bad); at >= 0 {
			t.Errorf("our script has %q", bad)
		}
	}
}
