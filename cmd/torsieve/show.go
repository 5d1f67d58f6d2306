package main

import (
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"
	"text/tabwriter"

	"torsieve/internal/units"
	"torsieve/screen/store"
)

// showCommand prints the answer of a run in the terminal.
type showCommand struct {
	storedOptions `embed:""`
	ID            string `arg:"" optional:"" help:"Ligand whose conformers are shown; without it: all ligands."`
}

// Run prints a table of ligands, or of one ligand's conformers.
func (c *showCommand) Run(s *session) error {
	return c.view(s.ctx, func(v *store.View, run store.Run) error {
		ligands, err := storedLigands(v, run)
		if err != nil {
			return err
		}
		if c.ID == "" {
			return writeLigands(s.stdout, ligands)
		}
		k := slices.IndexFunc(ligands, func(l storedLigand) bool { return l.ID == c.ID })
		if k < 0 {
			return nothing(fmt.Errorf("no ligand of this run is called %q", c.ID), nearestID(c.ID, ligands))
		}
		l := ligands[k]
		if !l.done() {
			return nothing(fmt.Errorf("%s: %s %s", l.ID, l.status(), l.reason()), "")
		}
		return writeShapes(s.stdout, v, run, l)
	})
}

func nearestID(wanted string, ligands []storedLigand) string {
	ids := make([]string, len(ligands))
	for i := range ligands {
		ids[i] = ligands[i].ID
	}
	if near := nearest(wanted, ids); near != "" {
		return "did you mean " + near + "?"
	}
	return "torsieve show DIR lists the ligands"
}

func writeLigands(w io.Writer, ligands []storedLigand) error {
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', tabwriter.AlignRight)
	fmt.Fprintln(t, "ligand\tstatus\tkept\tbest\tpopulation\t5 to 95 %\tentropy\twarnings\t")
	fmt.Fprintln(t, "\t\t\t\t%\t%\tcal/(mol K)\t\t")
	for i := range ligands {
		l := &ligands[i]
		row := []string{printable(l.ID), l.status(), "", "", "", "", "", strconv.Itoa(len(l.Warnings) + len(l.ensemble.Warnings))}
		if l.done() {
			w := l.ensemble.Weights[0]
			best := w.Populations[0]
			row[2], row[3], row[4] = strconv.Itoa(len(w.Populations)), strconv.Itoa(best.Conformer), hundredths(best.Fraction)
			row[5], row[6] = spread(best), fmt.Sprintf("%.2f", w.Entropy/units.KcalPerMol*1000)
		}
		fmt.Fprintln(t, strings.Join(row, "\t")+"\t")
	}
	if err := t.Flush(); err != nil {
		return err
	}
	for i := range ligands {
		if l := &ligands[i]; l.reason() != "" {
			if _, err := fmt.Fprintf(w, "%s: %s\n", printable(l.ID), printable(l.reason())); err != nil {
				return err
			}
		}
	}
	return nil
}

// writeShapes prints the kept conformers of a ligand, the lowest first, for each
// temperature, and then how many were left behind and why.
func writeShapes(w io.Writer, v *store.View, run store.Run, l storedLigand) error {
	energies, err := tierEnergies(v, run, l.Structure)
	if err != nil {
		return nothing(err, "")
	}
	tiers := tiersOf(run)
	members := map[int]store.Member{}
	best := math.Inf(1) // final energy, at the first temperature
	for _, m := range l.ensemble.Members {
		members[m.Conformer] = m
		if m.Rank > 0 {
			best = min(best, m.Energy)
		}
	}
	lowest := lowestOf(energies, l.ensemble.Weights[0].Populations)
	for _, weights := range l.ensemble.Weights {
		if _, err := fmt.Fprintf(w, "%s at %g K: energies in kcal/mol above the lowest of each level\n", printable(l.ID), weights.Temperature); err != nil {
			return err
		}
		t := tabwriter.NewWriter(w, 0, 0, 2, ' ', tabwriter.AlignRight)
		fmt.Fprintln(t, "rank\tconformer\tpopulation %\t5 to 95 %\tcopies\t"+strings.Join(tiers, "\t")+"\tfinal\t")
		for _, p := range weights.Populations {
			m := members[p.Conformer]
			fmt.Fprintf(t, "%d\t%d\t%s\t%s\t%d\t", m.Rank, p.Conformer, hundredths(p.Fraction), spread(p), m.Copies)
			for k, of := range energies {
				fmt.Fprintf(t, "%s\t", above(of[p.Conformer], lowest[k]))
			}
			fmt.Fprintf(t, "%.2f\t\n", (m.Energy-best)/units.KcalPerMol)
		}
		if err := t.Flush(); err != nil {
			return err
		}
	}
	return writeLeft(w, l)
}

// tiersOf are the levels that have energies: all but the thermal one and the
// ensemble.
func tiersOf(run store.Run) []string {
	var names []string
	for _, l := range run.Chain {
		if slices.Contains(tierNames, l.Tier) {
			names = append(names, l.Tier)
		}
	}
	return names
}

// tierEnergies returns the energies of a structure's conformers, hartree, by
// tier and number.
func tierEnergies(v *store.View, run store.Run, structure int64) ([]map[int]float64, error) {
	var out []map[int]float64
	keys := run.Chain.Keys()
	for i, l := range run.Chain {
		if !slices.Contains(tierNames, l.Tier) {
			continue
		}
		of := map[int]float64{}
		if i == 0 {
			g, _, err := v.Generation(structure, keys[0])
			if err != nil {
				return nil, err
			}
			for k, s := range g.Shapes {
				of[k+1] = s.Energy
			}
		} else {
			answers, err := v.Answers(structure, keys[i])
			if err != nil {
				return nil, err
			}
			for _, a := range answers {
				if !math.IsNaN(a.Energy) {
					of[a.Conformer] = a.Energy
				}
			}
		}
		out = append(out, of)
	}
	return out, nil
}

// lowestOf is the lowest energy of the kept conformers in each tier.
func lowestOf(energies []map[int]float64, kept []store.Population) []float64 {
	low := make([]float64, len(energies))
	for k, of := range energies {
		low[k] = math.Inf(1)
		for _, p := range kept {
			if e, there := of[p.Conformer]; there {
				low[k] = min(low[k], e)
			}
		}
	}
	return low
}

func above(e, lowest float64) string {
	if e == 0 || math.IsInf(lowest, 1) {
		return ""
	}
	return fmt.Sprintf("%.2f", (e-lowest)/units.KcalPerMol)
}

func writeLeft(w io.Writer, l storedLigand) error {
	left := 0
	for _, m := range l.ensemble.Members {
		if m.Rank == 0 {
			left++
		}
	}
	if left > 0 {
		if _, err := fmt.Fprintf(w, "%s left behind: conformers.csv says why\n", count(left, "conformer")); err != nil {
			return err
		}
	}
	for _, warning := range slices.Concat(l.Warnings, l.ensemble.Warnings) {
		if _, err := fmt.Fprintf(w, "warning: %s\n", printable(warning)); err != nil {
			return err
		}
	}
	return nil
}

func hundredths(p float64) string { return fmt.Sprintf("%.1f", 100*p) }

func spread(p store.Population) string {
	if math.IsNaN(p.Low) {
		return ""
	}
	return fmt.Sprintf("%.0f-%.0f", 100*p.Low, 100*p.High)
}
