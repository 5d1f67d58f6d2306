//go:build full

package generate

import (
	"context"
	"os"
	"strings"
	"testing"

	"torsieve/molecule/smiles"
)

func TestDebug(t *testing.T) {
	for _, line := range strings.Split(strings.TrimSpace(os.Getenv("DBG")), ";") {
		m, _, err := smiles.Parse(line)
		if err != nil {
			t.Fatal(err)
		}
		s := &search{m: m, id: "x", o: Defaults(), numbers: m.Numbers(), held: handednesses(m), screen: newClashScreen(m)}
		label := func(i int) string { return atomLabel(m, i) }
		if s.embedder, err = newEmbedder(m, s.held, heldBonds(m), label); err != nil {
			t.Fatal(err)
		}
		if err := s.cut(context.Background()); err != nil {
			t.Fatal(err)
		}
		t.Log(line, s.result.Warnings)
		if s.assembly != nil {
			for k, f := range s.assembly.frags {
				t.Log(k, f.core, f.outside, len(f.shapes), f.model.Formula(), f.rings)
			}
		}
		reasons := map[string]int{}
		for k := range 5 {
			_, err := s.embedder.next(context.Background(), stream(1, "x", 9, k))
			if err != nil {
				reasons[err.Error()]++
			}
		}
		t.Log(reasons)
	}
}
