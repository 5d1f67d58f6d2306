package hf

import (
	"fmt"
	"os"
	"testing"
	"time"
)

func TestExplore(t *testing.T) {
	only := os.Getenv("ONLY")
	for _, s := range readReference(t, "drug-like.json") {
		if s.Conformer != 0 || only != "" && s.Name != only {
			continue
		}
		want := s.Results[0]
		t0 := time.Now()
		surface, err := New(s.numbers(t), s.Charge, s.Multiplicity, Options{Method: "hf", Basis: want.Basis})
		if err != nil {
			t.Fatal(err)
		}
		p, err := surface.Energy(t.Context(), s.coordinates())
		if err != nil {
			t.Fatal(err)
		}
		dt := time.Since(t0)
		t0 = time.Now()
		surface.fock.place(t.Context(), s.coordinates(), 1e-10)
		di := time.Since(t0)
		fmt.Printf("%-12s atoms %d N %d  total %.2fs integrals %.2fs  it %d  stored %d MB  dE %.2e\n", s.Name, len(s.Atoms), surface.fock.n, dt.Seconds(), di.Seconds(), p.Iterations, len(surface.fock.values)*8>>20, p.Energy-want.Energy)
	}
}
