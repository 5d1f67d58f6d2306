//go:build full

package generate

import (
	"bufio"
	"context"
	"encoding/csv"
	"fmt"
	"io"
	"os"
	"slices"
	"strings"
	"testing"
	"time"

	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/molecule/sdf"
	"torsieve/molecule/smiles"
)

// stated reads a SMILES and takes the first isomer where it leaves stereo open.
func stated(text string) (*molecule.Molecule, error) {
	m, _, err := smiles.Parse(text)
	if err != nil {
		return nil, err
	}
	isomers, err := m.Isomers(64)
	if err != nil {
		return nil, err
	}
	return isomers[0], nil
}

// At least 98 in 100 of the ligands of testdata/reference/recovery embed whole
// with the right stereo, and so do all their fragments.
func TestLigandsEmbed(t *testing.T) {
	f, err := os.Open("../../testdata/reference/recovery/ligands.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	rows = rows[1:]
	if len(rows) != 126 {
		t.Fatalf("%d ligands, want 126", len(rows))
	}
	failed := 0
	for _, row := range rows {
		if err := embeds(row[1]); err != nil {
			failed++
			t.Logf("%s: %v", row[0], err)
		}
	}
	if failed*50 > len(rows) {
		t.Errorf("%d of %d ligands do not embed", failed, len(rows))
	}
}

func embeds(text string) error {
	m, err := stated(text)
	if err != nil {
		return err
	}
	ctx := context.Background()
	s, err := newSearch(ctx, m, text, Defaults())
	if err != nil {
		return err
	}
	if s.assembly == nil {
		return fmt.Errorf("%s", strings.Join(s.result.Warnings, "; "))
	}
	x, err := s.embedder.next(ctx, stream(1, text, streamWhole, 0))
	if err != nil {
		return err
	}
	return m.StereoMatches(x)
}

// TestWriteEnsembles generates an ensemble for each line "SMILES<tab>id" of the
// file that GENERATE_LIGANDS names and writes all of them to the SD file that
// GENERATE_OUT names, in the order in which they would be handed out: input for
// a scorer of recovered crystal shapes.
func TestWriteEnsembles(t *testing.T) {
	in, out := os.Getenv("GENERATE_LIGANDS"), os.Getenv("GENERATE_OUT")
	if in == "" || out == "" {
		t.Skip("a tool: set GENERATE_LIGANDS and GENERATE_OUT")
	}
	ligands, err := os.ReadFile(in)
	if err != nil {
		t.Fatal(err)
	}
	f, err := os.Create(out)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	w := bufio.NewWriter(f)
	failed := 0
	var took []float64
	for _, line := range strings.Split(strings.TrimSpace(string(ligands)), "\n") {
		text, id, _ := strings.Cut(line, "\t")
		begun := time.Now()
		if err := writeEnsemble(t, w, text, id); err != nil {
			failed++
			t.Errorf("%s: %v", id, err)
		}
		took = append(took, time.Since(begun).Seconds())
	}
	if err := w.Flush(); err != nil {
		t.Fatal(err)
	}
	slices.Sort(took)
	t.Logf("%d ligands, %d failed; seconds: median %.1f, nine in ten %.1f, longest %.1f", len(took), failed,
		took[len(took)/2], took[len(took)*9/10], took[len(took)-1])
}

func writeEnsemble(t *testing.T, w io.Writer, text, id string) error {
	m, err := stated(text)
	if err != nil {
		return err
	}
	begun := time.Now()
	res, err := Conformers(context.Background(), m, id, Spread())
	if err != nil {
		return err
	}
	t.Logf("%s: %d rotors, %d starts, %d relaxed, %d found, %d kept, complete %v, %.1f s %v", id, m.RotatableBonds(),
		res.Starts, res.Relaxed, res.Found, len(res.Conformers), res.Complete, time.Since(begun).Seconds(), res.Warnings)
	for _, c := range res.Conformers {
		above := (c.Energy - res.Conformers[0].Energy) / units.KcalPerMol
		if err := sdf.Write(w, sdf.Out{Mol: m, X: c.X, Title: id, Comment: fmt.Sprintf("%.3f kcal/mol", above)}); err != nil {
			return err
		}
	}
	return nil
}
