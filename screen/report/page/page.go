// Package page makes report.html: one file that shows a run to a reader with a
// browser and nothing else. It asks nothing of the net, and says everything that
// matters in tables too, where no script runs.
//
// A Book collects what the page needs of each ligand while the run goes on, and
// bounds it: a page of any number of ligands stays under MaxBytes.
package page

import (
	"cmp"
	"io"
	"slices"

	"torsieve/screen"
)

// MaxBytes is what a page may weigh.
const MaxBytes = 25e6

// forLigands is the part of MaxBytes that ligands may fill; the rest is the
// program of the page and what is said of the run.
const forLigands = MaxBytes - 1.5e6

// allowances are how many conformers of a ligand a page shows: the first of them
// for which the ligands have room together. With the last one a ligand is a mere
// line of the overview.
var allowances = []int{40, 30, 22, 16, 12, 8, 5, 3, 2, 1, 0}

// A Book holds the ligands of a page.
type Book struct {
	ligands []*ligand
	level   int // of allowances
	bytes   int // upper estimate of what the ligands will fill
}

// Add takes down what the page shows of a result, and keeps nothing else of it.
// How much is shown depends on which ligands there are, not on their order. A
// fault of the program in one of them costs its place on the page, and the page
// says so; the results of a run do not hang on it.
func (b *Book) Add(r *screen.Result) {
	var l *ligand
	if err := screen.Guard(func() error { l = newLigand(r); return nil }); err != nil {
		l = bare(r, err)
	}
	l.cut(allowances[b.level])
	b.ligands = append(b.ligands, l)
	b.bytes += l.bytes()
	for b.bytes > forLigands && b.level < len(allowances)-1 {
		b.level++
		b.bytes = 0
		for _, l := range b.ligands {
			l.cut(allowances[b.level])
			b.bytes += l.bytes()
		}
	}
}

// Write writes the page, ligands in the order of the run.
func (b *Book) Write(w io.Writer, run Run) error {
	slices.SortFunc(b.ligands, func(x, y *ligand) int { return cmp.Compare(x.order, y.order) })
	return write(w, run, b.ligands, allowances[b.level])
}

// A Run is what the page says of the run as a whole. Times are texts as they
// stand in run.json.
type Run struct {
	Version  string
	Command  []string
	Settings []Setting
	Tiers    []Tier // in the order of the run
	Solvent  string // "none" for the gas phase
	Inputs   []Input
	Machine  string
	Begun    string
	Seconds  float64
}

// A Setting is an option as the run used it.
type Setting struct{ Name, Value string }

// A Tier is a level of theory, and what it took over all ligands and cores.
type Tier struct {
	Name, Method string
	Seconds      float64
}

// An Input is a file that was read.
type Input struct {
	File, SHA256 string
	Records      int
}
