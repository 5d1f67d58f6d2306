//go:build full

package generate

import (
	"context"
	"encoding/csv"
	"fmt"
	"os"
	"strings"
	"testing"

	"torsieve/molecule"
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
