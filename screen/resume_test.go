package screen

import (
	"context"
	"fmt"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"torsieve/screen/store"
)

// openStore opens a run's database in a file.
func openStore(t *testing.T, path string) *store.Store {
	t.Helper()
	s, err := store.Open(t.Context(), path, store.Options{Machine: store.Machine{Host: "here", Kernel: "any", Version: "1"}})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// A unit is what is told of one computed conformer.
func unitOf(e Event) string { return fmt.Sprintf("%s %s %d", e.Ligand, e.Tier, e.Conformer) }

// sameResults compares all but times.
func sameResults(t *testing.T, got, want []*Result) {
	t.Helper()
	for k := range want {
		a, b := *got[k], *want[k]
		a.Took, b.Took, a.Ligand, b.Ligand, a.Mol, b.Mol = nil, nil, nil, nil, nil, nil
		for _, r := range []*Result{&a, &b} { // NaN differs from itself
			for i := range r.Conformers {
				r.Conformers[i].Energies = append([]float64(nil), r.Conformers[i].Energies[:r.Conformers[i].Last+1]...)
			}
		}
		if !reflect.DeepEqual(a, b) {
			t.Errorf("%s: the results differ:\n%+v\n%+v", want[k].Ligand.ID, a, b)
		}
	}
}

// A run that is stopped again and again, each time after a few conformers, ends
// with the results of one that was not, and no conformer is computed twice.
func TestResumeGivesTheSameResults(t *testing.T) {
	list := []string{"OCCCN", "CC(N)CO", "OC[C@@H](C)N", "OCCCN"}
	take := func() []*Ligand {
		in := NewIntake()
		in.ExpandStereo = true
		return ligandsOf(t, in, list...)
	}
	o := quick()
	o.Thermal = true
	tiers := []Tier{fieldTier{name: "first"}, wetTier{fieldTier: fieldTier{name: "second"}, pull: 0.002}, fieldTier{name: "third", flat: true}}
	whole, err := results(t.Context(), t, take(), tiers, o)
	if err != nil {
		t.Fatal(err)
	}
	path := filepath.Join(t.TempDir(), "run.db")
	computed := map[string]int{}
	stops := 0
	for {
		s := openStore(t, path)
		ctx, cancel := context.WithCancel(t.Context())
		left := 3 + stops%4
		o.Store = s
		o.Watch = func(e Event) {
			if e.Kind != Computed || e.Stored {
				return
			}
			computed[unitOf(e)]++
			if left--; left == 0 {
				cancel()
			}
		}
		res, err := results(ctx, t, take(), tiers, o)
		cancel()
		if closeErr := s.Close(); closeErr != nil {
			t.Fatal(closeErr)
		}
		if err == nil {
			sameResults(t, res, whole)
			break
		}
		if stops++; stops > 200 {
			t.Fatalf("no end after %d stops: %v", stops, err)
		}
	}
	if stops < 5 {
		t.Errorf("only %d stops: the test shows little", stops)
	}
	for unit, n := range computed {
		if n != 1 {
			t.Errorf("%s was computed %d times", unit, n)
		}
	}
}

// What an earlier run in the same store has done serves a longer list, another
// temperature and a deeper tier; other settings of a tier do not mix with it.
func TestEarlierResultsServe(t *testing.T) {
	s := openStore(t, filepath.Join(t.TempDir(), "run.db"))
	defer s.Close()
	first, second := fieldTier{name: "first"}, fieldTier{name: "second"}
	third := fieldTier{name: "third", flat: true}
	for _, c := range []struct {
		what   string
		list   []string
		tiers  []Tier
		change func(*Options)
		anew   []string // what is computed: ligand and tier
	}{
		{"the first run", []string{"CCCO"}, []Tier{first, second}, nil, []string{"CCCO second"}},
		{"the same again", []string{"CCCO"}, []Tier{first, second}, nil, nil},
		{"a longer list", []string{"OCCF", "CCCO"}, []Tier{first, second}, nil, []string{"OCCF second"}},
		{"another temperature", []string{"OCCF", "CCCO"}, []Tier{first, second}, func(o *Options) { o.Temperatures = []float64{350} }, nil},
		{"a deeper tier", []string{"OCCF", "CCCO"}, []Tier{first, second, third}, nil, []string{"OCCF third", "CCCO third"}},
		{"other relaxations", []string{"CCCO"}, []Tier{first, second, third}, func(o *Options) { o.Relax.RMSGradient /= 2 }, []string{"CCCO second", "CCCO third"}},
		{"the first again", []string{"CCCO"}, []Tier{first, second}, nil, nil},
	} {
		o := quick()
		if c.change != nil {
			c.change(&o)
		}
		o.Store = s
		var anew []string
		o.Watch = func(e Event) {
			unit := e.Ligand + " " + e.Tier
			if e.Kind == Computed && !e.Stored && !strings.Contains(strings.Join(anew, ";"), unit) {
				anew = append(anew, unit)
			}
		}
		res, err := results(t.Context(), t, ligandsOf(t, NewIntake(), c.list...), c.tiers, o)
		if err != nil {
			t.Fatalf("%s: %v", c.what, err)
		}
		for _, r := range res {
			if r.Status != Done {
				t.Errorf("%s: %s: %s %s", c.what, r.Ligand.ID, r.Status, r.Reason)
			}
		}
		if len(anew) != len(c.anew) {
			t.Errorf("%s: computed %q, want %q", c.what, anew, c.anew)
		}
		for _, unit := range c.anew {
			if !strings.Contains(strings.Join(anew, ";"), unit) {
				t.Errorf("%s: computed %q, want %q", c.what, anew, c.anew)
			}
		}
	}
}
