//go:build full

package generate

import (
	"bufio"
	"context"
	"fmt"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"
	"time"

	"torsieve/internal/units"
	"torsieve/molecule/sdf"
	"torsieve/molecule/smiles"
)

// TestRecovery generates an ensemble for each line "SMILES<tab>id" of the file
// that GENERATE_LIGANDS names and writes all of them to the SD file that
// GENERATE_OUT names, in the order in which they would be handed out. At most
// two ligands in a hundred may fail.
func TestRecovery(t *testing.T) {
	in, out := os.Getenv("GENERATE_LIGANDS"), os.Getenv("GENERATE_OUT")
	if in == "" || out == "" {
		t.Skip("GENERATE_LIGANDS and GENERATE_OUT are not set")
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
	defer w.Flush()
	failed, total := 0, 0
	var took []time.Duration
	for _, line := range strings.Split(strings.TrimSpace(string(ligands)), "\n") {
		text, id, _ := strings.Cut(line, "\t")
		total++
		begun := time.Now()
		if err := recover1(w, text, id, t); err != nil {
			failed++
			t.Logf("%s: %v", id, err)
		}
		took = append(took, time.Since(begun))
	}
	slices.Sort(took)
	t.Logf("%d ligands, %d failed; seconds: median %.1f, nine in ten %.1f, longest %.1f", total, failed,
		took[len(took)/2].Seconds(), took[len(took)*9/10].Seconds(), took[len(took)-1].Seconds())
	if failed*50 > total {
		t.Errorf("%d of %d ligands could not be embedded, at most 2 %% may", failed, total)
	}
}

func recover1(w *bufio.Writer, text, id string, t *testing.T) error {
	m, _, err := smiles.Parse(text)
	if err != nil {
		return err
	}
	isomers, err := m.Isomers(64)
	if err != nil {
		return err
	}
	m = isomers[0]
	begun := time.Now()
	if dir := os.Getenv("GENERATE_TRACE"); dir != "" {
		trace = func(stage string, x []float64) {
			f, err := os.OpenFile(dir+"/"+stage+".sdf", os.O_APPEND|os.O_CREATE|os.O_WRONLY, 0o644)
			if err != nil {
				t.Fatal(err)
			}
			sdf.Write(f, sdf.Out{Mol: m, X: x, Title: id})
			f.Close()
		}
	}
	o := Defaults()
	o.MirrorImages = true
	if v := os.Getenv("OSCALE"); v != "" {
		f, _ := strconv.ParseFloat(v, 64)
		orderScale = f * units.KcalPerMol
	}
	if v := os.Getenv("RELAX"); v != "" {
		o.Relaxations, _ = strconv.Atoi(v)
	}
	if os.Getenv("NOCHARGE") != "" {
		o.Field.Charges = "none"
	}
	res, err := Conformers(context.Background(), m, id, o)
	if err != nil {
		return err
	}
	t.Logf("%s: %d rotors, %d starts, %d embedded, %d relaxed, %d found, %d kept, complete %v, %.1f s %v", id, m.RotatableBonds(),
		res.Starts, res.Embedded, res.Relaxed, res.Found, len(res.Conformers), res.Complete, time.Since(begun).Seconds(), res.Warnings)
	for _, c := range res.Conformers {
		title := fmt.Sprintf("%.3f kcal/mol", (c.Energy-res.Conformers[0].Energy)/units.KcalPerMol)
		if err := sdf.Write(w, sdf.Out{Mol: m, X: c.X, Title: id, Comment: title}); err != nil {
			return err
		}
	}
	return nil
}
