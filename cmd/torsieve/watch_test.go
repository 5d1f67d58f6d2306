package main

import (
	"bytes"
	"math"
	"strings"
	"testing"

	"torsieve/screen"
)

// recorder keeps what a progress was told.
type recorder struct{ parts []float64 }

func (r *recorder) set(part float64, _ string) { r.parts = append(r.parts, part) }
func (r *recorder) close()                     {}

// A bar never runs backwards, and is full when all ligands have ended, also
// where one of them stops early.
func TestProgressRunsForward(t *testing.T) {
	var said, logged bytes.Buffer
	ligands := []*screen.Ligand{{ID: "a"}, {ID: "b"}}
	w := newWatcher(newVoice(&said), newLogger(&logged), ligands, 3)
	seen := &recorder{}
	w.progress = seen
	end := func(l *screen.Ligand) screen.Event {
		return screen.Event{Kind: screen.Ended, Ligand: l.ID, Result: &screen.Result{Ligand: l, Status: screen.Failed, Reason: "no shape"}}
	}
	events := []screen.Event{
		{Kind: screen.Begun, Ligand: "a"},
		{Kind: screen.Entered, Ligand: "a", Tier: tierSemiempirical, Total: 2},
		{Kind: screen.Computed, Ligand: "a", Tier: tierSemiempirical, Conformer: 1},
		{Kind: screen.Begun, Ligand: "b"},
		{Kind: screen.Computed, Ligand: "a", Tier: tierSemiempirical, Conformer: 2},
		{Kind: screen.Entered, Ligand: "a", Tier: tierHF, Total: 1},
		{Kind: screen.Computed, Ligand: "a", Tier: tierHF, Conformer: 1},
		end(ligands[0]), end(ligands[1]),
	}
	for _, e := range events {
		w.see(e)
	}
	last := 0.0
	for i, p := range seen.parts {
		if p < last-1e-12 || p > 1 {
			t.Errorf("step %d: %.4f after %.4f", i, p, last)
		}
		last = p
	}
	if math.Abs(last-1) > 1e-12 {
		t.Errorf("at the end the bar is at %.4f", last)
	}
	if n := strings.Count(logged.String(), "\n"); n != len(events) {
		t.Errorf("%d lines in the log for %d events", n, len(events))
	}
	if n := strings.Count(said.String(), "no shape"); n != 2 {
		t.Errorf("%d failures were told, want 2:\n%s", n, said.String())
	}
}
