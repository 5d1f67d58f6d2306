package molecule_test

import (
	"fmt"
	"testing"

	"torsieve/molecule"
	"torsieve/molecule/smiles"
)

func BenchmarkBuild(b *testing.B) {
	for _, tc := range []struct {
		shape string
		make  func() *molecule.Builder
	}{
		{"chain", func() *molecule.Builder { return chain(5000) }},
		{"sheet", func() *molecule.Builder { return sheet(30, 30) }},
		{"row", func() *molecule.Builder { return sheet(1, 1000) }},
		{"crowd", func() *molecule.Builder { return crowd(2000) }},
	} {
		for _, what := range []string{"graph", "smiles"} {
			b.Run(fmt.Sprintf("shape=%s/what=%s", tc.shape, what), func(b *testing.B) {
				for b.Loop() {
					m, _, err := tc.make().Build()
					if err != nil {
						b.Fatal(err)
					}
					if what == "smiles" {
						m.SMILES()
					}
				}
			})
		}
	}
}

func BenchmarkParse(b *testing.B) {
	list := ligands(b)
	for b.Loop() {
		for _, l := range list {
			m, _, err := smiles.Parse(l.smiles)
			if err != nil {
				b.Fatal(err)
			}
			m.SMILES()
			m.Rotors()
		}
	}
	b.ReportMetric(float64(b.Elapsed().Microseconds())/float64(b.N*len(list)), "us/ligand")
}
