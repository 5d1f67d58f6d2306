//go:build full

package hf

import "testing"

// Everything that the fast suite leaves out for its time: all bases of all
// systems but def2-TZVP beyond four atoms, and the drug-like molecules.

func TestAllSmallSystems(t *testing.T) {
	entries(t, "small-systems.json",
		func(s *referenceSystem, r *referenceResult) bool {
			return r.Functions > 40 && (r.Basis != "def2-TZVP" || len(s.Atoms) <= 4)
		},
		func(t *testing.T, s *referenceSystem, r *referenceResult) { check(t, s, r, 0.01, 1e-8) })
}

func TestAllUnrestrictedSystems(t *testing.T) {
	entries(t, "uhf-small-systems.json",
		func(s *referenceSystem, r *referenceResult) bool { return r.Functions > 31 },
		func(t *testing.T, s *referenceSystem, r *referenceResult) { check(t, s, r, 0.01, 1e-8) })
}

func TestDrugLike(t *testing.T) {
	entries(t, "drug-like.json",
		func(s *referenceSystem, r *referenceResult) bool { return r.Basis == "MINIX" },
		func(t *testing.T, s *referenceSystem, r *referenceResult) { check(t, s, r, 1, 1e-7) })
}
