package screen

import (
	"fmt"
	"hash/fnv"
	"strings"
)

// maxStem is how many characters of an id stand in a file name: enough for
// every id that a person types, and far from the 255 of the file systems with
// room for an ending.
const maxStem = 100

// A namer hands out file names that are safe on every system and differ also
// where case does not count.
type namer struct{ taken map[string]bool }

func newNamer() *namer { return &namer{taken: map[string]bool{}} }

// stem returns a file name without ending for id. An id that is safe as it
// stands keeps its name; of any other the unsafe characters become "_", "id_"
// goes before and a hash of the id follows, so that the name depends on the id
// alone as long as no two names collide.
func (n *namer) stem(id string) string {
	safe := strings.Map(safeRune, id)
	if len(safe) > maxStem {
		safe = safe[:maxStem]
	}
	if safe != id || strings.HasPrefix(id, "-") || strings.HasSuffix(id, ".") || reserved(id) || n.taken[strings.ToLower(safe)] {
		safe = "id_" + strings.Trim(safe, "._-~") + "_" + shortHash(id)
	}
	name := safe
	for k := 2; n.taken[strings.ToLower(name)]; k++ {
		name = fmt.Sprintf("%s-%d", safe, k)
	}
	n.taken[strings.ToLower(name)] = true
	return name
}

// safeRune maps what some file system, shell or spreadsheet minds to "_".
func safeRune(r rune) rune {
	switch {
	case r >= 'a' && r <= 'z', r >= 'A' && r <= 'Z', r >= '0' && r <= '9':
		return r
	case strings.ContainsRune("._-~+@,=", r):
		return r
	}
	return '_'
}

// reserved says whether Windows keeps the name for a device, with any ending,
// or the name is a folder's own.
func reserved(id string) bool {
	base, _, _ := strings.Cut(strings.ToUpper(id), ".")
	switch base {
	case "", "CON", "PRN", "AUX", "NUL":
		return true
	}
	if port, ok := strings.CutPrefix(base, "COM"); ok {
		return len(port) == 1 && port >= "0" && port <= "9"
	}
	if port, ok := strings.CutPrefix(base, "LPT"); ok {
		return len(port) == 1 && port >= "0" && port <= "9"
	}
	return false
}

func shortHash(id string) string {
	h := fnv.New64a()
	h.Write([]byte(id)) // never fails
	return fmt.Sprintf("%08x", h.Sum64()>>32)
}
