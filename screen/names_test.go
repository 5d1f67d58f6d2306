package screen

import (
	"path/filepath"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestStemKeepsSafeNames(t *testing.T) {
	n := newNamer()
	for _, id := range []string{"QLW-001", "ligand_7", "a.b", "X~2", "mol+1"} {
		if got := n.stem(id); got != id {
			t.Errorf("%q becomes %q, want it as it stands", id, got)
		}
	}
}

// What the file systems of Windows, macOS and Linux and their shells mind.
func TestStemAvoids(t *testing.T) {
	for _, id := range []string{
		"../../etc/passwd", "a/b", `a\b`, "C:x", "con", "CON.txt", "nul", "com1", "LPT9.x", "", ".", "..", ".hidden/..",
		"-rf", "end.", "two words", "tab\there", "null\x00byte", "Grüße", "名", strings.Repeat("long", 100), "a*b?", "<x>|y",
	} {
		got := newNamer().stem(id)
		if got == id || len(got) > 120 || strings.ContainsAny(got, "/\\:*?\"<>| \t\x00") || reserved(got) ||
			strings.HasPrefix(got, "-") || strings.HasPrefix(got, ".") || strings.HasSuffix(got, ".") {
			t.Errorf("%q becomes %q", id, got)
		}
		if dir := filepath.Dir(filepath.Join("out", got+".sdf")); dir != "out" {
			t.Errorf("%q leaves the folder: %q", id, dir)
		}
	}
}

// No two ids share a file, not even where case does not count.
func TestStemsDiffer(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		ids := rapid.SliceOf(rapid.StringMatching(`[aAbB._/ ~-]{0,4}`)).Draw(t, "ids")
		n, seen := newNamer(), map[string]string{}
		for _, id := range ids {
			stem := strings.ToLower(n.stem(id))
			if other, ok := seen[stem]; ok {
				t.Fatalf("%q and %q share %q", other, id, stem)
			}
			seen[stem] = id
		}
	})
}
