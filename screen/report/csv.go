package report

import (
	"encoding/csv"
	"io"
	"math"
	"strconv"
	"strings"

	"torsieve/internal/units"
	"torsieve/screen"
)

// ligandColumns is the header of ligands.csv. Columns are added at the end,
// none is renamed.
var ligandColumns = []string{
	"ligand", "smiles", "status", "reason",
	"conformers_generated", "conformers_semiempirical", "conformers_hf", "conformers_kept",
	"best_conformer", "best_population", "missed_weight", "missed_weight_p95", "entropy_cal_mol_k", "warnings",
	"temperature_k", "parent", "source", "file",
}

// ligandRow is one ligand at the first temperature. The missed weight is empty:
// a plain window does not know it.
func ligandRow(r *screen.Result) []string {
	l := r.Ligand
	row := []string{l.ID, l.SMILES, string(r.Status), r.Reason}
	for _, tier := range []string{"forcefield", "semiempirical", "hf"} {
		row = append(row, entered(r, tier))
	}
	if len(r.Kept) == 0 {
		row = append(row, "", "", "", "", "", "", warnings(r), "", l.Parent, l.Place, "")
		return row
	}
	w := r.Ensembles[0]
	return append(row,
		strconv.Itoa(len(r.Kept)),
		strconv.Itoa(r.Conformers[r.Kept[0]].Number), population(w.Populations[0]), "", "",
		fixed(w.Entropy/units.KcalPerMol*1000, 4), warnings(r),
		plain(w.Temperature), l.Parent, l.Place, EnsembleFile(l))
}

func warnings(r *screen.Result) string { return strings.Join(r.Warnings, "; ") }

// entered is how many conformers a tier looked at, empty where it did not run.
func entered(r *screen.Result, tier string) string {
	for i, name := range r.Tiers {
		if name == tier && len(r.Conformers) > 0 {
			return strconv.Itoa(r.Entered[i])
		}
	}
	return ""
}

// conformerColumns is the header of conformers.csv, and the names of the data
// items in the ensembles' SD files.
var conformerColumns = []string{
	"ligand", "conformer", "rank", "population", "population_p05", "population_p95", "degeneracy", "relative_kcal_mol",
	"e_forcefield_hartree", "e_semiempirical_hartree", "e_hf_hartree", "e_final_hartree",
	"solvation_kcal_mol", "thermal_kcal_mol", "family", "last_tier", "why", "temperature_k",
	"doubts",
}

// conformerRows has a row for each kept conformer and temperature, by rank, and
// one row for each of the others, by number.
func conformerRows(r *screen.Result) [][]string {
	var rows [][]string
	for k, i := range r.Kept {
		for t := range r.Ensembles {
			rows = append(rows, conformerRow(r, i, &place{rank: k, temperature: t, weights: &r.Ensembles[t]}))
		}
	}
	for i := range r.Conformers {
		if r.Conformers[i].Rank == 0 {
			rows = append(rows, conformerRow(r, i, nil))
		}
	}
	return rows
}

// A place is where a kept conformer stands in the ensemble of one temperature.
type place struct {
	rank        int // from 0
	temperature int // index
	weights     *screen.Weights
}

func conformerRow(r *screen.Result, i int, p *place) []string {
	c := &r.Conformers[i]
	row := []string{r.Ligand.ID, strconv.Itoa(c.Number)}
	row = append(row, standing(r, c, p)...)
	for _, tier := range []string{"forcefield", "semiempirical", "hf"} {
		row = append(row, tierEnergy(r, c, tier))
	}
	final, temperature := "", ""
	if p != nil {
		final, temperature = energy(c.FinalAt(p.temperature)), plain(p.weights.Temperature)
	}
	solvation, thermal := "", ""
	if p != nil && c.Thermal != nil {
		thermal = fixed(c.Thermal[p.temperature]/units.KcalPerMol, 4)
	}
	if c.Solvated {
		solvation = fixed(c.Solvation/units.KcalPerMol, 4)
	}
	return append(row, final, solvation, thermal, strconv.Itoa(c.Family), r.Tiers[c.Last], c.Why, temperature, strings.Join(c.Doubts, "; "))
}

// standing is rank, population, its bar, degeneracy and relative energy.
func standing(r *screen.Result, c *screen.Conformer, p *place) []string {
	if p == nil {
		return make([]string, 6)
	}
	low, high := "", ""
	if p.weights.Bars != nil {
		low, high = population(p.weights.Bars[p.rank].Low), population(p.weights.Bars[p.rank].High)
	}
	above := (c.FinalAt(p.temperature) - lowest(r, p.temperature)) / units.KcalPerMol
	return []string{
		strconv.Itoa(c.Rank), population(p.weights.Populations[p.rank]), low, high,
		strconv.Itoa(c.Copies), fixed(above, 4),
	}
}

// lowest is the lowest final energy at a temperature, by index.
func lowest(r *screen.Result, temperature int) float64 {
	low := math.Inf(1)
	for _, i := range r.Kept {
		low = min(low, r.Conformers[i].FinalAt(temperature))
	}
	return low
}

func tierEnergy(r *screen.Result, c *screen.Conformer, tier string) string {
	for t, name := range r.Tiers {
		if name == tier && !math.IsNaN(c.Energies[t]) {
			return energy(c.Energies[t])
		}
	}
	return ""
}

func energy(hartree float64) string { return fixed(hartree, 9) }
func population(p float64) string   { return fixed(p, 6) }
func fixed(v float64, n int) string { return strconv.FormatFloat(v, 'f', n, 64) }
func plain(v float64) string        { return strconv.FormatFloat(v, 'f', -1, 64) }

func writeRows(w io.Writer, rows [][]string) error {
	return csv.NewWriter(w).WriteAll(rows) // flushes
}
