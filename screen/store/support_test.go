package store

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"net/url"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
)

// serverVariable names the environment variable with the URL of a PostgreSQL
// database that tests may make schemas in; testdata/postgres.sh sets it.
const serverVariable = "TORSIEVE_TEST_POSTGRES"

// A place is where a test's store stands: it may be opened again and again.
type place struct {
	t     *testing.T
	where string
}

// everywhere runs a test on a SQLite file, and on a PostgreSQL server where the
// environment names one.
func everywhere(t *testing.T, test func(*testing.T, place)) {
	t.Helper()
	t.Run("sqlite", func(t *testing.T) { test(t, place{t, filepath.Join(t.TempDir(), "run.db")}) })
	if server := os.Getenv(serverVariable); server != "" {
		t.Run("postgres", func(t *testing.T) { test(t, place{t, newSchema(t, server)}) })
	}
}

// newSchema returns the URL of a schema that nobody has, which goes with the test.
func newSchema(t testing.TB, server string) string {
	t.Helper()
	u, err := url.Parse(server)
	if err != nil {
		t.Fatalf("%s: %v", serverVariable, err)
	}
	name := fmt.Sprintf("t%d", rand.Uint64()>>1)
	q := u.Query()
	q.Set("search_path", name)
	u.RawQuery = q.Encode()
	t.Cleanup(func() {
		config, err := postgresConfig(server)
		if err != nil {
			t.Fatal(err)
		}
		db := pool(config)
		defer db.Close()
		if _, err := db.Exec("DROP SCHEMA IF EXISTS " + name + " CASCADE"); err != nil {
			t.Error(err)
		}
	})
	return u.String()
}

func (p place) open() *Store {
	p.t.Helper()
	s, err := Open(p.t.Context(), p.where, Options{Machine: Machine{Host: "here", Processor: "any", Kernel: "portable", Version: "0.1"}})
	if err != nil {
		p.t.Fatal(err)
	}
	p.t.Cleanup(func() { // a test may have closed it: database/sql does not mind
		if err := s.Close(); err != nil && !strings.Contains(err.Error(), "database is closed") {
			p.t.Error(err)
		}
	})
	return s
}

func (p place) reader() *Reader {
	p.t.Helper()
	r, err := OpenReader(p.t.Context(), p.where)
	if err != nil {
		p.t.Fatal(err)
	}
	p.t.Cleanup(func() { r.Close() })
	return r
}

// view looks at a store and checks its laws.
func view(t *testing.T, r *Reader, look func(*View) error) {
	t.Helper()
	if err := r.View(context.Background(), look); err != nil {
		t.Fatal(err)
	}
	if err := r.Check(context.Background()); err != nil {
		t.Fatal(err)
	}
}

func must(t *testing.T, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

// same compares to the last bit; NaN is NaN, no list is an empty list.
func same(t *testing.T, what string, got, want any) {
	t.Helper()
	if d := cmp.Diff(want, got, cmpopts.EquateNaNs(), cmpopts.EquateEmpty()); d != "" {
		t.Errorf("%s (-want +got):\n%s", what, d)
	}
}

var nan = math.NaN()

// ladder is a chain of four levels; the ensemble's settings name a temperature.
func ladder(temperature string) Chain {
	return Chain{
		{"forcefield", `{"max":250,"seed":0}`},
		{"semiempirical", `{"accuracy":1}`},
		{"hf", `{"basis":"MINIX","method":"hf-3c"}`},
		{"ensemble", `{"temperature":[` + temperature + `]}`},
	}
}

// A sample makes whatever a run would store, from a seed.
type sample struct{ *rand.Rand }

func newSample(seed uint64) sample { return sample{rand.New(rand.NewPCG(seed, 7))} }

// structure is one with n atoms.
func (s sample) structure(n int) Structure {
	return Structure{SMILES: fmt.Sprintf("C%x", s.Uint64()), NAtoms: n, Drawing: "drawing"}
}

// x are coordinates with all bits in use, subnormal numbers and both zeros among
// them.
func (s sample) x(natoms int) []float64 {
	x := make([]float64, 3*natoms)
	for i := range x {
		x[i] = s.NormFloat64() * 5
	}
	x[0], x[1], x[2] = 5e-324, math.Copysign(0, -1), 1/3.
	return x
}

func (s sample) generation(structure int64, key Key, natoms, shapes int) Generation {
	g := Generation{
		Structure: structure, Key: key, Starts: 100, Embedded: 90, Relaxed: 80, Found: shapes, Complete: true,
		Warnings: []string{"a ring of 12 was sampled"}, Details: `{"seed":0}`, Work: Work{Seconds: 1.25},
	}
	for i := range shapes {
		g.Shapes = append(g.Shapes, Shape{Energy: s.NormFloat64(), Family: i % 3, Hits: 1 + i%5, X: s.x(natoms)})
	}
	return g
}

func (s sample) answer(structure int64, key Key, conformer, natoms int, moved bool) Answer {
	a := Answer{
		Structure: structure, Key: key, Conformer: conformer, Energy: -50 + s.NormFloat64(), Solvation: nan,
		Gradients: 31, Work: Work{Seconds: 2.5},
	}
	if moved {
		a.X = s.x(natoms)
	}
	return a
}

func (s sample) ensemble(structure int64, key Key, shapes int) Ensemble {
	e := Ensemble{
		Structure: structure, Key: key, Status: "done", Entered: map[string]int{"forcefield": shapes, "hf": 2},
		MissedWeight: 0.01, MissedP95: nan, Warnings: []string{"two tiers disagree"}, Work: Work{Seconds: 0.1},
	}
	w := Weights{Temperature: 298.15, FreeEnergy: -50.1, Energy: -50, Entropy: 1e-6}
	for i := range shapes {
		m := Member{Conformer: i + 1, LastTier: "hf", Energy: -50, Thermal: nan, Why: "8.10 kcal/mol above the lowest"}
		if i < 2 {
			m.Rank, m.Copies, m.Why = i+1, 2, "kept"
			w.Populations = append(w.Populations, Population{Conformer: i + 1, Fraction: 0.5, Low: 0.3, High: nan})
		}
		e.Members = append(e.Members, m)
	}
	e.Weights = []Weights{w, {Temperature: 310, FreeEnergy: -50.2, Energy: -50, Entropy: 1e-6, Populations: w.Populations}}
	return e
}

// filled is a store with a run of ligands of 9 atoms and 5 shapes each, all of it
// computed, and what should be in it.
type filled struct {
	run         Run
	ligands     []Ligand
	generations []Generation
	answers     map[Key][]Answer
	ensembles   []Ensemble
}

const (
	sampleAtoms  = 9
	sampleShapes = 5
)

// fill stores ligands from first to last, each with a structure of its own.
func fill(t *testing.T, s *Store, first, last int) filled {
	t.Helper()
	ctx := t.Context()
	f := filled{run: Run{Version: "0.1", Begun: "2026-01-02T03:04:05Z", Record: `{"a":1}`, Chain: ladder("298.15,310")}, answers: map[Key][]Answer{}}
	keys := f.run.Chain.Keys()
	var samples []sample
	for i := first; i <= last; i++ {
		sam := newSample(uint64(i))
		samples = append(samples, sam)
		st := sam.structure(sampleAtoms)
		ids, err := s.AddStructures(ctx, []Structure{st})
		must(t, err)
		f.ligands = append(f.ligands, Ligand{
			Order: i, ID: fmt.Sprintf("ligand %d", i), Stem: fmt.Sprintf("ligand_%d", i), Place: fmt.Sprintf("l.smi:%d: record %d", i, i),
			SMILES: st.SMILES, Structure: ids[0], Warnings: []string{"drawn neutral"},
		})
	}
	must(t, s.SetRun(ctx, f.run, f.ligands))
	for i, l := range f.ligands {
		sam := samples[i]
		g := sam.generation(l.Structure, keys[0], sampleAtoms, sampleShapes)
		b := Batch{Generations: []Generation{g}}
		for n := range sampleShapes {
			b.Answers = append(b.Answers, sam.answer(l.Structure, keys[1], n+1, sampleAtoms, true), sam.answer(l.Structure, keys[2], n+1, sampleAtoms, false))
		}
		e := sam.ensemble(l.Structure, keys[3], sampleShapes)
		b.Ensembles = []Ensemble{e}
		fresh, err := s.Commit(ctx, b)
		must(t, err)
		if want := 2 + len(b.Answers); fresh != want {
			t.Fatalf("%d results were new, want %d", fresh, want)
		}
		f.generations, f.ensembles = append(f.generations, g), append(f.ensembles, e)
		for _, a := range b.Answers {
			f.answers[a.Key] = append(f.answers[a.Key], a)
		}
	}
	return f
}

// checkFilled reads everything back.
func checkFilled(t *testing.T, r *Reader, f filled) {
	t.Helper()
	here := Machine{Host: "here", Processor: "any", Kernel: "portable", Version: "0.1"}
	keys := f.run.Chain.Keys()
	view(t, r, func(v *View) error {
		run, there, err := v.Run()
		if err != nil || !there {
			return fmt.Errorf("run: %v, %w", there, err)
		}
		same(t, "run", run, f.run)
		ligands, err := v.Ligands()
		same(t, "ligands", ligands, f.ligands)
		if err != nil {
			return err
		}
		for i, l := range f.ligands {
			g, _, err := v.Generation(l.Structure, keys[0])
			if err != nil {
				return err
			}
			x, err := v.Geometries(l.Structure, keys[0])
			if err != nil {
				return err
			}
			for n := range g.Shapes {
				g.Shapes[n].X = x[n+1]
			}
			want := f.generations[i]
			want.Machine = here
			same(t, "generation", g, want)
			for _, key := range keys[1:3] {
				if err := sameAnswers(t, v, l.Structure, key, f.answers[key], here); err != nil {
					return err
				}
			}
			relaxed, err := v.Geometries(l.Structure, keys[1])
			if err != nil {
				return err
			}
			last, err := v.Geometries(l.Structure, keys[2])
			same(t, "geometries that hf left as they were", last, relaxed)
			if err != nil {
				return err
			}
			e, _, err := v.Ensemble(l.Structure, keys[3])
			wantEnsemble := f.ensembles[i]
			wantEnsemble.Machine = here
			same(t, "ensemble", e, wantEnsemble)
			if err != nil {
				return err
			}
		}
		return nil
	})
}

func sameAnswers(t *testing.T, v *View, structure int64, key Key, all []Answer, m Machine) error {
	t.Helper()
	answers, err := v.Answers(structure, key)
	if err != nil {
		return err
	}
	x, err := v.moved(structure, key)
	for i := range answers {
		answers[i].X = x[answers[i].Conformer]
	}
	var want []Answer
	for _, a := range all {
		if a.Structure == structure {
			a.Machine = m
			want = append(want, a)
		}
	}
	same(t, "answers", answers, want)
	return err
}
