package page

import (
	"fmt"
	"html/template"
	"math"
	"strings"

	"torsieve/internal/units"
	"torsieve/screen"
	"torsieve/screen/report/page/drawing"
)

// A ligand is what the page shows of one result.
type ligand struct {
	order                  int
	ID, SMILES, Formula    string
	Parent, Source, File   string
	Status                 screen.Status
	Reason                 string
	Structure              string // SVG, empty for a record that was not read
	Atoms, Charge          int
	Flexibility            int
	Kept, Found            int
	Best                   int // number of the first conformer
	Population             interval
	Temperature            float64
	Entropy                float64 // cal/(mol K)
	Steps                  []step
	Warnings, Advice       []string
	Conformers             []conformer // kept, by rank
	Data                   *figures    // nil: nothing to draw
	ConformersLeft, Shapes int         // kept ones beyond those shown; shapes shown in 3D
}

// An interval is a population with its bar, all as fractions.
type interval struct {
	Value, Low, High float64
	Known            bool // whether there is a bar
}

// A conformer is a row of the ligand's table.
type conformer struct {
	Number, Rank, Family, Copies int
	Relative                     float64   // kcal/mol, final energy
	Tiers                        []float64 // kcal/mol above the lowest at each tier; NaN where not computed
	Solvation                    float64   // kcal/mol; NaN where there is none
	Population                   interval
	Doubts                       string
}

// What a line of text may weigh. Longer ones are cut, and say so.
const longest = 2000

func newLigand(r *screen.Result) *ligand {
	l := &ligand{
		order: r.Ligand.Order, ID: short(r.Ligand.ID), SMILES: short(r.Ligand.SMILES),
		Parent: short(r.Ligand.Parent), Source: short(r.Ligand.Place),
		Status: r.Status, Reason: short(r.Reason), Kept: len(r.Kept), Steps: stepsOf(r),
		Found: len(r.Conformers),
	}
	for _, w := range r.Warnings {
		l.Warnings = append(l.Warnings, short(w))
	}
	if len(l.Warnings) > mostWarnings {
		l.Warnings = append(l.Warnings[:mostWarnings], "further warnings stand in ligands.csv")
	}
	if m := r.Mol; m != nil {
		l.Formula, l.Atoms, l.Charge = m.Formula(), m.NumAtoms(), m.Charge()
		if m.NumAtoms() <= screen.MaxAtoms {
			l.Structure = drawing.Of(m).SVG("structure of " + l.ID)
			l.Flexibility = screen.Flexibility(m)
		}
	}
	if len(r.Kept) > 0 {
		l.ensemble(r)
	}
	l.Advice = adviceFor(r)
	return l
}

// bare is a ligand that the page could not take in.
func bare(r *screen.Result, fault error) *ligand {
	return &ligand{
		order: r.Ligand.Order, ID: short(r.Ligand.ID), Source: short(r.Ligand.Place), Status: r.Status, Reason: short(r.Reason),
		Warnings: []string{short(fmt.Sprintf("not shown for a fault of the program (%v): its results stand in conformers.csv", fault))},
	}
}

// mostWarnings is how many warnings of a ligand the page prints.
const mostWarnings = 12

func short(text string) string {
	if len(text) <= longest {
		return text
	}
	return strings.ToValidUTF8(text[:longest], "") + " … (cut)"
}

// ensemble takes down the conformers that were kept.
func (l *ligand) ensemble(r *screen.Result) {
	w := r.Ensembles[0]
	l.File = "ensembles/" + r.Ligand.Stem + ".sdf"
	l.Best = r.Conformers[r.Kept[0]].Number
	l.Population, l.Temperature = intervalOf(w, 0), w.Temperature
	l.Entropy = w.Entropy / units.KcalPerMol * 1000
	zero := lowestByTier(r)
	for k, i := range r.Kept {
		if k == allowances[0] {
			break
		}
		l.Conformers = append(l.Conformers, rowOf(r, i, k, zero))
	}
	l.Data = figuresOf(r, zero, len(l.Conformers))
	l.ConformersLeft = len(r.Kept) - len(l.Conformers)
	l.Shapes = len(l.Data.shapes)
}

func rowOf(r *screen.Result, i, k int, zero []float64) conformer {
	c := &r.Conformers[i]
	row := conformer{
		Number: c.Number, Rank: c.Rank, Family: c.Family, Copies: c.Copies,
		Relative:   (c.Final() - r.Conformers[r.Kept[0]].Final()) / units.KcalPerMol,
		Tiers:      relative(c, zero),
		Solvation:  math.NaN(),
		Population: intervalOf(r.Ensembles[0], k),
		Doubts:     short(strings.Join(c.Doubts, "; ")),
	}
	if c.Solvated {
		row.Solvation = c.Solvation / units.KcalPerMol
	}
	return row
}

func intervalOf(w screen.Weights, k int) interval {
	v := interval{Value: w.Populations[k], Known: w.Bars != nil}
	if v.Known {
		bar := w.Bars[k]
		v.Low, v.High = bar.Low, bar.High
	}
	return v
}

// lowestByTier is the lowest energy of each tier, hartree.
func lowestByTier(r *screen.Result) []float64 {
	zero := make([]float64, len(r.Tiers))
	for t := range zero {
		zero[t] = math.Inf(1)
		for i := range r.Conformers {
			if e := r.Conformers[i].Energies[t]; e < zero[t] { // false for NaN
				zero[t] = e
			}
		}
	}
	return zero
}

// relative returns the energies of a conformer above the lowest of each tier.
func relative(c *screen.Conformer, zero []float64) []float64 {
	out := make([]float64, len(zero))
	for t, e := range c.Energies {
		out[t] = (e - zero[t]) / units.KcalPerMol
	}
	return out
}

// cut leaves the first n conformers, and with none of them a line of the
// overview.
func (l *ligand) cut(n int) {
	if n < len(l.Conformers) {
		l.Conformers = l.Conformers[:n:n]
		l.ConformersLeft = l.Kept - n
	}
	if l.Data != nil {
		l.Data.cut(n)
		l.Shapes = len(l.Data.shapes)
	}
	if n == 0 {
		l.Structure, l.Data, l.Steps, l.Advice, l.Shapes = "", nil, nil, nil, 0
		l.Warnings = l.Warnings[:min(1, len(l.Warnings))]
		l.Reason, l.SMILES = brief(l.Reason), brief(l.SMILES)
	}
}

func brief(text string) string {
	if len(text) <= 200 {
		return text
	}
	return strings.ToValidUTF8(text[:200], "") + " …"
}

// bytes is an upper estimate of what the ligand will fill on the page.
func (l *ligand) bytes() int {
	n := 1500 + len(l.Structure) + 8*escaped(l.ID) + 2*(escaped(l.SMILES)+escaped(l.Reason)+escaped(l.Source)+escaped(l.Parent))
	for _, w := range l.Warnings {
		n += 2*escaped(w) + 20
	}
	for _, a := range l.Advice {
		n += escaped(a) + 20
	}
	for i := range l.Conformers {
		n += 450 + 40*len(l.Steps) + escaped(l.Conformers[i].Doubts)
	}
	for _, s := range l.Steps {
		n += 300 + escaped(strings.Join(s.Left, " "))
	}
	if l.Data != nil {
		n += 1000 + l.Data.bytes()
	}
	return n
}

// escaped is the length of a text once it is HTML.
func escaped(text string) int { return len(template.HTMLEscapeString(text)) }
