package main

import (
	"fmt"

	"torsieve/screen"
)

// A watcher tells a person and the log how a run goes.
type watcher struct {
	voice    *voice
	log      *logger
	progress progress
	ended    int
	ligands  int
	perTier  float64            // share of a ligand that a tier stands for
	share    map[string]float64 // of each ligand under way, 0 to 1
	inTier   map[string]*stage
}

// A stage is where a ligand is.
type stage struct {
	tier        string
	index       int // of the tier, from 0
	seen, total int // conformers
}

func newWatcher(v *voice, log *logger, ligands []*screen.Ligand, stages int) *watcher {
	return &watcher{
		voice: v, log: log, progress: newProgress(v), ligands: len(ligands), perTier: 1 / float64(stages),
		share: map[string]float64{}, inTier: map[string]*stage{},
	}
}

// see is the run's Watch.
func (w *watcher) see(e screen.Event) {
	w.log.write(e)
	switch e.Kind {
	case screen.Begun:
		w.inTier[e.Ligand] = &stage{tier: tierForceField}
		w.show(e.Ligand)
	case screen.Entered:
		next := 1
		if s := w.inTier[e.Ligand]; s != nil {
			next = s.index + 1
		}
		w.share[e.Ligand] = w.perTier * float64(next)
		w.inTier[e.Ligand] = &stage{tier: e.Tier, index: next, total: e.Total}
		w.show(e.Ligand)
	case screen.Computed:
		if s := w.inTier[e.Ligand]; s != nil && s.total > 0 {
			s.seen++
			w.share[e.Ligand] += w.perTier / float64(s.total)
			w.show(e.Ligand)
		}
	case screen.Ended:
		w.ended++
		delete(w.share, e.Ligand)
		delete(w.inTier, e.Ligand)
		w.tell(e.Result)
		w.show(e.Ligand)
	}
}

// show moves the bar.
func (w *watcher) show(ligand string) {
	part := float64(w.ended)
	for _, share := range w.share { // the order changes the last digits of a picture only
		part += min(share, 1)
	}
	text := fmt.Sprintf("%d/%d ligands", w.ended, w.ligands)
	if s := w.inTier[ligand]; s != nil {
		text += " · " + ligand + " · " + s.tier
		if s.total > 0 {
			text += fmt.Sprintf(" %d/%d", s.seen, s.total)
		}
	}
	w.progress.set(part/float64(max(1, w.ligands)), text)
}

// tell says in a line how a ligand ended. What was wrong with its record has
// been said when it was read.
func (w *watcher) tell(r *screen.Result) {
	id := r.Ligand.ID
	switch {
	case r.Ligand.Err != nil:
		return
	case r.Status == screen.Stopped:
		return
	case len(r.Kept) == 0:
		w.voice.failed("%s: %s", r.Ligand.Name(), r.Reason)
		return
	}
	for _, warning := range r.Warnings[len(r.Ligand.Warnings):] {
		w.voice.warn("%s: %s", id, warning)
	}
	if r.Status == screen.Partial {
		w.voice.failed("%s: %s", id, r.Reason)
	}
	best := r.Conformers[r.Kept[0]]
	text := fmt.Sprintf("%d/%d %s: %s, best is number %d with %s", w.ended, w.ligands, id,
		count(len(r.Kept), "conformer"), best.Number, percent(r.Ensembles[0].Populations[0]))
	if bars := r.Ensembles[0].Bars; bars != nil {
		text += fmt.Sprintf(" (%s to %s)", percent(bars[0].Low), percent(bars[0].High))
	}
	w.voice.note("%s", text)
}

func (w *watcher) close() { w.progress.close() }

func percent(p float64) string { return fmt.Sprintf("%.0f %%", 100*p) }

// count writes a number with its noun.
func count(n int, noun string) string {
	if n == 1 {
		return "1 " + noun
	}
	return fmt.Sprintf("%d %ss", n, noun)
}
