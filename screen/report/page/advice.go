package page

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"torsieve/screen"
)

// A rule says what a chemist may do next where it applies; "" where not.
type rule func(r *screen.Result) string

// rules stand in the order in which the page prints what they say.
var rules = []rule{
	mendInput, retryFailed, runAgain,
	drawForm, stateStereo, takeSolvent,
	raiseCap, lookAtLost, searchAgain,
	methodsDisagree, wideBar, noBar, lookAtDoubts,
}

func adviceFor(r *screen.Result) []string {
	var list []string
	for _, say := range rules {
		if text := say(r); text != "" {
			list = append(list, text)
		}
	}
	return list
}

func mendInput(r *screen.Result) string {
	if r.Status != screen.Refused && r.Status != screen.Unreadable {
		return ""
	}
	return "Change the record as the reason says and run it again; nothing was computed for it."
}

func retryFailed(r *screen.Result) string {
	if r.Status != screen.Failed {
		return ""
	}
	return "Read the reason and the ligand's lines in log.jsonl. A run with --through one level lower shows whether that level alone is at fault."
}

func runAgain(r *screen.Result) string {
	if r.Status != screen.Stopped {
		return ""
	}
	return "The run ended before this ligand was done: run it again."
}

// warned says whether a warning of the result holds a text.
func warned(r *screen.Result, text string) bool {
	return slices.ContainsFunc(r.Warnings, func(w string) bool { return strings.Contains(w, text) })
}

func drawForm(r *screen.Result) string {
	if !warned(r, "drawn neutral in water") {
		return ""
	}
	return "Decide on the protonation state at the pH of your assay. If in doubt run both forms as two ligands: their ensembles may differ more than their drawings."
}

func stateStereo(r *screen.Result) string {
	if !warned(r, "stereo not stated") {
		return ""
	}
	return "State the configuration in the input if it is known; else compare the isomers, each of which is a ligand of its own here. Populations of one isomer say nothing about the others."
}

func takeSolvent(r *screen.Result) string {
	if !warned(r, "in the gas phase") {
		return ""
	}
	return "Take a solvent (--solvent): charged groups fold onto each other in the gas phase."
}

func raiseCap(r *screen.Result) string {
	n := count(r, overCap)
	if n == 0 {
		return ""
	}
	return fmt.Sprintf("%s left at the cap without a semi-empirical energy: run again with --max-conformers %d or more, and see whether the populations move.",
		shapes(n), r.Entered[1]+n)
}

func shapes(n int) string {
	if n == 1 {
		return "1 shape was"
	}
	return fmt.Sprintf("%d shapes were", n)
}

func lookAtLost(r *screen.Result) string {
	n := count(r, lost)
	if n == 0 {
		return ""
	}
	return fmt.Sprintf("%s lost on the way (the reasons stand in conformers.csv). If one of them was low at the level below, its weight is missing here.", shapes(n))
}

// manyTurns is the flexibility from which one search is not trusted alone.
const manyTurns = 10

func searchAgain(r *screen.Result) string {
	if r.Mol == nil || len(r.Kept) == 0 || screen.Flexibility(r.Mol) < manyTurns {
		return ""
	}
	return "The ligand turns about ten bonds or more and the search is a sample: run again with another --seed and compare the best conformers."
}

// methodsDisagree compares the last two levels that ranked the kept conformers.
func methodsDisagree(r *screen.Result) string {
	last := len(r.Tiers) - 1
	if last < 2 || len(r.Kept) < 2 {
		return ""
	}
	best, lowest := r.Kept[0], r.Kept[0]
	for _, i := range r.Kept {
		if r.Conformers[i].Energies[last-1] < r.Conformers[lowest].Energies[last-1] {
			lowest = i
		}
	}
	if best == lowest {
		return ""
	}
	return fmt.Sprintf("The levels disagree on the lowest conformer: %d by the semi-empirical one, %d by the last. Treat both as possible, or compute the two with a better method.",
		r.Conformers[lowest].Number, r.Conformers[best].Number)
}

// wide is the length of a bar, as a fraction, that decides nothing.
const wide = 0.4

func wideBar(r *screen.Result) string {
	if len(r.Kept) < 2 || r.Ensembles[0].Bars == nil {
		return ""
	}
	bars := r.Ensembles[0].Bars
	if bars[0].High-bars[0].Low < wide {
		return ""
	}
	able := 0
	for _, b := range bars {
		if b.High >= 0.1 {
			able++
		}
	}
	return fmt.Sprintf("The bar of the first population runs from %s to %s: the energies cannot tell which shape is the main one. Carry all %d conformers on whose bars reach 10 %%.",
		percent(bars[0].Low), percent(bars[0].High), able)
}

func noBar(r *screen.Result) string {
	if len(r.Kept) < 2 || r.Ensembles[0].Bars != nil {
		return ""
	}
	return "No error is known for the energies of the last level, so the populations have no bars: take them as an order, not as numbers."
}

func lookAtDoubts(r *screen.Result) string {
	if !warned(r, "came with doubts") {
		return ""
	}
	return "Read the doubts beside the conformers before you use one of them."
}

// percent writes a fraction for a reader.
func percent(p float64) string {
	switch {
	case p < 0.0005: // a population is never nothing
		return "< 0.1 %"
	case p < 0.0995, p >= 0.9905 && p < 0.9995:
		return fmt.Sprintf("%.1f %%", 100*p)
	case p >= 0.9995 && p < 1:
		return "> 99.9 %"
	}
	return fmt.Sprintf("%.0f %%", math.Round(100*p))
}
