package store

import (
	"fmt"
	"os"
	"path/filepath"
	"testing"
)

// Benchmarks take molecules of 60 atoms with 100 conformers, on SQLite, and on
// PostgreSQL where the environment names a server.
const (
	benchAtoms  = 60
	benchShapes = 100
)

// benchStore has one structure, its shapes, and nothing else.
func benchStore(b *testing.B, where string) (s *Store, keys []Key, structure func() int64) {
	b.Helper()
	s, err := Open(b.Context(), where, Options{Machine: Machine{Host: "here"}})
	if err != nil {
		b.Fatal(err)
	}
	b.Cleanup(func() { s.Close() })
	if err := s.SetRun(b.Context(), Run{Chain: ladder("298.15")}, nil); err != nil {
		b.Fatal(err)
	}
	keys = ladder("298.15").Keys()
	n := 0
	return s, keys, func() int64 {
		n++
		ids, err := s.AddStructures(b.Context(), []Structure{{SMILES: fmt.Sprint("C", n), NAtoms: benchAtoms}})
		if err != nil {
			b.Fatal(err)
		}
		g := newSample(uint64(n)).generation(ids[0], keys[0], benchAtoms, benchShapes)
		if _, err := s.Commit(b.Context(), Batch{Generations: []Generation{g}}); err != nil {
			b.Fatal(err)
		}
		return ids[0]
	}
}

func benchPlaces(b *testing.B, run func(b *testing.B, where string)) {
	b.Run("sqlite", func(b *testing.B) { run(b, filepath.Join(b.TempDir(), "run.db")) })
	if server := os.Getenv(serverVariable); server != "" {
		b.Run("postgres", func(b *testing.B) { run(b, newSchema(b, server)) })
	}
}

// BenchmarkCommitAnswers stores answers of a tier that relaxes, so many to a
// transaction.
func BenchmarkCommitAnswers(b *testing.B) {
	for _, batch := range []int{1, 10, 100} {
		b.Run(fmt.Sprint("batch=", batch), func(b *testing.B) {
			benchPlaces(b, func(b *testing.B, where string) {
				s, keys, structure := benchStore(b, where)
				sam := newSample(1)
				var id int64
				answers, n := make([]Answer, 0, batch), 0
				for b.Loop() {
					if n%benchShapes == 0 {
						b.StopTimer()
						id = structure()
						b.StartTimer()
					}
					answers = append(answers, sam.answer(id, keys[1], n%benchShapes+1, benchAtoms, true))
					if n++; n%batch == 0 {
						if _, err := s.Commit(b.Context(), Batch{Answers: answers}); err != nil {
							b.Fatal(err)
						}
						answers = answers[:0]
					}
				}
				b.ReportMetric(float64(b.N)/b.Elapsed().Seconds(), "answers/s")
			})
		})
	}
}

// BenchmarkGeneration stores the shapes of a ligand.
func BenchmarkGeneration(b *testing.B) {
	benchPlaces(b, func(b *testing.B, where string) {
		_, _, structure := benchStore(b, where)
		for b.Loop() {
			structure()
		}
		b.ReportMetric(float64(b.N*benchShapes)/b.Elapsed().Seconds(), "shapes/s")
	})
}

// BenchmarkQueue plans, claims and ends units with one answer each, one to a
// transaction: what a unit costs beside its computing.
func BenchmarkQueue(b *testing.B) {
	benchPlaces(b, func(b *testing.B, where string) {
		s, keys, structure := benchStore(b, where)
		w, err := s.Join(b.Context(), "worker", "")
		if err != nil {
			b.Fatal(err)
		}
		sam := newSample(1)
		n := 0
		for b.Loop() {
			if n%benchShapes == 0 {
				id := structure()
				var units []Unit
				for k := range benchShapes {
					units = append(units, Unit{Structure: id, Key: keys[1], Conformer: k + 1})
				}
				if err := s.Plan(b.Context(), units); err != nil {
					b.Fatal(err)
				}
			}
			n++
			units, err := w.Claim(b.Context(), 1)
			if err != nil || len(units) != 1 {
				b.Fatal(len(units), err)
			}
			a := sam.answer(units[0].Structure, keys[1], units[0].Conformer, benchAtoms, true)
			if _, err := s.Commit(b.Context(), Batch{Answers: []Answer{a}}); err != nil {
				b.Fatal(err)
			}
		}
		b.ReportMetric(float64(b.N)/b.Elapsed().Seconds(), "units/s")
	})
}

// BenchmarkFileSize stores 50 ligands whole and reports what a conformer at a
// tier takes on disk, and how long a look at a run's progress takes.
func BenchmarkFileSize(b *testing.B) {
	path := filepath.Join(b.TempDir(), "run.db")
	s, keys, structure := benchStore(b, path)
	const ligands = 50
	var list []Ligand
	for i := range ligands {
		id := structure()
		sam := newSample(uint64(i))
		var answers []Answer
		for k := range benchShapes {
			answers = append(answers, sam.answer(id, keys[1], k+1, benchAtoms, true))
		}
		e := sam.ensemble(id, keys[3], benchShapes)
		if _, err := s.Commit(b.Context(), Batch{Answers: answers, Ensembles: []Ensemble{e}}); err != nil {
			b.Fatal(err)
		}
		list = append(list, Ligand{Order: i, ID: fmt.Sprint(i), Stem: fmt.Sprint(i), Structure: id})
	}
	if err := s.SetRun(b.Context(), Run{Chain: ladder("298.15")}, list); err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		err := s.View(b.Context(), func(v *View) error {
			_, err := v.Progress()
			return err
		})
		if err != nil {
			b.Fatal(err)
		}
	}
	if err := s.Close(); err != nil {
		b.Fatal(err)
	}
	info, err := os.Stat(path)
	if err != nil {
		b.Fatal(err)
	}
	const geometries = 2 * ligands * benchShapes
	b.ReportMetric(float64(info.Size())/geometries, "bytes/geometry")
	b.ReportMetric(float64(info.Size())/geometries-24*benchAtoms, "bytes/geometry-beside-coordinates")
}
