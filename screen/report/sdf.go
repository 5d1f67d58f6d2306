package report

import (
	"io"

	"torsieve/molecule/sdf"
	"torsieve/screen"
)

// EnsembleFile is the place of a ligand's ensemble in the run folder.
func EnsembleFile(l *screen.Ligand) string { return "ensembles/" + l.Stem + ".sdf" }

// writeEnsemble writes every kept conformer by rank, superposed on the first.
// Data items carry the columns of conformers.csv at the first temperature.
func writeEnsemble(w io.Writer, r *screen.Result) error {
	for k, i := range r.Kept {
		row := conformerRow(r, i, &place{rank: k, weights: &r.Ensembles[0]})
		out := sdf.Out{Mol: r.Mol, X: r.Conformers[i].X, Title: r.Ligand.ID}
		for n, name := range conformerColumns {
			if row[n] != "" {
				out.Fields = append(out.Fields, sdf.Field{Name: name, Value: row[n]})
			}
		}
		if err := sdf.Write(w, out); err != nil {
			return err
		}
	}
	return nil
}
